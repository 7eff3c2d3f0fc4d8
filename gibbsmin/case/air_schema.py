"""Keys of a feed that is air or another gas whose composition is given dry: its water, its altitude, its enrichment."""

from __future__ import annotations

from typing import Annotated, Final, Literal

from pydantic import Field, field_validator

from gibbsmin.case.fields import Length, Number, Pressure, Share, Table, Temperature

MOISTURES: Final = ("relative_humidity", "dew_point", "wet_bulb", "humidity_ratio", "moisture_mole_percent")
"""Keys that say how much water vapour a gas holds; a feed has at most one of them."""


MEASURED_AT: Final[dict[str, tuple[str, ...]]] = {
    "humidity_temperature": ("relative_humidity", "wet_bulb"),
    "humidity_pressure": ("relative_humidity", "wet_bulb", "dew_point"),
}
"""Keys that say where a humidity was measured, with those that need it."""


class AirKeys(Table):
    """What may be said of a feed that is air, or of one that is a gas known dry."""

    composition: Literal["air", "flue gas"] | None = Field(
        default=None,
        description=(
            "Named composition. air: dry air of ISO 2533, O2 20.9476, Ar 0.934, CO2 0.0314 and N2 78.087 mole %, its "
            "traces counted as N2; its water is given by relative_humidity or one of its like. flue gas: what "
            "[flue_gas] freezes of the settled mixture, of which a part goes back."
        ),
        examples=["air", "flue gas"],
    )
    carbon_dioxide_in_air: Annotated[Number, Field(ge=0.0, le=0.01)] | None = Field(
        default=None,
        description=(
            "CO2 of the dry air before enrichment, for composition = 'air', as a mole fraction or with its unit (ppm: "
            "by volume); 314 ppmv unless given. The other gases keep their proportions."
        ),
        examples=["420 ppm"],
    )
    oxygen_mole_percent: Annotated[float, Field(gt=0.0, le=100.0, allow_inf_nan=False)] | None = Field(
        default=None,
        description=(
            "Enriched air, for composition = 'air': O2 in the whole oxidant, dry, in mole percent. The water of the "
            "air is thinned out with it, and what is added is dry."
        ),
        examples=[30.0],
    )
    enriched_with: dict[str, Share] | None = Field(
        default=None,
        description=(
            "What the air is enriched with, by species in mole percent, dry; must sum to 100 within 0.5. Pure O2 "
            "unless given."
        ),
        examples=[{"O2": 95.0, "Ar": 3.5, "N2": 1.5}],
    )
    relative_humidity: Number | None = Field(
        default=None,
        description=(
            "Water vapour that is added to a gas given dry: its pressure over that of saturation (over ice below "
            "0.01 degC), at humidity_temperature and humidity_pressure. A bare number is a fraction."
        ),
        examples=["60 %"],
    )
    dew_point: Temperature | None = Field(
        default=None,
        description=(
            "Water vapour that is added to a gas given dry: the temperature at which water drops out at "
            "humidity_pressure (below 0.01 degC as ice: the frost point). A bare number is K."
        ),
        examples=["12 degC"],
    )
    wet_bulb: Temperature | None = Field(
        default=None,
        description=(
            "Water vapour that is added to a gas given dry: the temperature of adiabatic saturation, which a well "
            "aired wet bulb comes near to; the dry bulb is humidity_temperature. A bare number is K."
        ),
        examples=["18 degC"],
    )
    humidity_ratio: Annotated[Number, Field(ge=0.0, le=1e3)] | None = Field(
        default=None,
        description=(
            "Water vapour that is added to a gas given dry: mass of water over mass of dry gas (of the air, where it is"
            " enriched). A bare number is kg/kg."
        ),
        examples=["6.3 g/kg"],
    )
    moisture_mole_percent: Annotated[float, Field(ge=0.0, lt=100.0, allow_inf_nan=False)] | None = Field(
        default=None,
        description="Water vapour that is added to a gas given dry: mole percent of the whole moist gas.",
        examples=[1.0],
    )
    humidity_temperature: Temperature | None = Field(
        default=None,
        description=(
            "Where the relative humidity or the wet bulb was measured, in the outside air, say: the dry bulb. Needed "
            "where the temperature of the feed is not given, is varied, or is above 55 degC. A bare number is K."
        ),
        examples=["15 degC"],
    )
    humidity_pressure: Pressure | None = Field(
        default=None,
        description=(
            "Where the relative humidity, the wet bulb or the dew point was measured, absolute. Needed where the "
            "pressure of the feed is varied, or is above 1.1 bar; else that of the altitude, of the feed, or 101325 Pa."
        ),
        examples=["101325 Pa"],
    )
    altitude: Length | None = Field(
        default=None,
        description=(
            "Height of the site above the sea: gives the pressure of the humidity, and that of the feed where it has "
            "none of its own, by the standard atmosphere of ISO 2533. A bare number is m."
        ),
        examples=["1000 m"],
    )

    @field_validator("relative_humidity")
    @classmethod
    def _is_a_fraction(cls, value: float) -> float:
        if value < 0.0:
            raise ValueError(f"{value:g} is too low; expected at least 0")
        if value > 1.0:
            raise ValueError(
                f"{value:g} is too high; expected at most 1, which is 100 %: write percent with the sign, as in '60 %'"
            )
        return value
