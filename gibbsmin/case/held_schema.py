"""The tables ``[held]`` and ``[surroundings]``: which conditions stay fixed while the mixture settles.

One condition is mechanical (pressure or volume), one is thermal (temperature, heat, or entropy). Two of one kind say
the same thing twice or contradict each other.
"""

from __future__ import annotations

from typing import Annotated, Any, Final, Literal

from pydantic import ConfigDict, Field, model_validator

from gibbsmin.case.fields import OF_FEEDS, Heat, Pressure, RuleError, Table, Temperature, Volume

MECHANICAL: Final = ("pressure", "volume")
"""Keys of which one is held."""

THERMAL: Final = ("temperature", "adiabatic", "heat", "entropy")
"""Keys of which one more is held."""

_POSSIBLE: Final = (
    "Possible are pressure or volume, together with one of temperature, adiabatic = true, heat, or"
    ' entropy = "from feeds".'
)
_WHY: Final = {
    ("pressure", "volume"): "of a mixture that settles one follows from the other",
    ("temperature", "adiabatic"): "without heat the temperature is what comes out",
    ("temperature", "heat"): "one follows from the other: the result of a held temperature tells the heat",
    ("temperature", "entropy"): "the temperature would have to be the one at which the mixture has that entropy",
    ("adiabatic", "heat"): "adiabatic means no heat at all",
    ("adiabatic", "entropy"): "held entropy is without heat already, and its work changes the energy",
    ("heat", "entropy"): "heat that is moved changes the entropy",
}


def _one_of_each(schema: dict[str, Any]) -> None:
    """Tell editors that one key of each kind is wanted."""
    schema["allOf"] = [{"oneOf": [{"required": [key]} for key in kind]} for kind in (MECHANICAL, THERMAL)]


class Held(Table):
    """The two conditions that stay fixed while the mixture settles."""

    model_config = ConfigDict(json_schema_extra=_one_of_each)

    temperature: Temperature | None = Field(
        default=None,
        description="Temperature of the settled mixture. A bare number is K.",
        examples=["870 degC", 1143.15],
    )
    adiabatic: bool | None = Field(
        default=None, description="true where no heat is moved; the temperature is then a result.", examples=[True]
    )
    heat: Heat | None = Field(
        default=None,
        description=(
            "Heat put into the mixture, negative where it is taken away: a power where the feeds are flows (a bare "
            "number is W), an energy where they are amounts (J)."
        ),
        examples=["5 MW", "-40 kJ"],
    )
    entropy: Literal["from feeds"] | None = Field(
        default=None,
        description=(
            "'from feeds': the mixture keeps the entropy of its feeds, as in an ideal expansion or compression. "
            "Several feeds first mix, without heat and before anything reacts, at the lowest pressure among them."
        ),
        examples=["from feeds"],
    )
    isentropic_efficiency: Annotated[float, Field(gt=0.0, le=1.0, allow_inf_nan=False)] | None = Field(
        default=None,
        description=(
            "With held entropy and pressure: work gained over that of the ideal expansion, or work of the ideal "
            "compression over that spent."
        ),
        examples=[0.9],
    )
    pressure: Pressure | None = Field(
        default=None,
        description="Pressure of the settled mixture, absolute. A bare number is Pa.",
        examples=["24 bar", 101325.0],
    )
    volume: Volume | None = Field(
        default=None,
        description=(
            "Volume of a closed vessel; a bare number is m3. 'of feeds': what the gas of the feeds fills at its own "
            "temperature and pressure. The feeds are then amounts, and the volume of solids and liquids is neglected."
        ),
        examples=["2 m3", OF_FEEDS],
    )

    @model_validator(mode="after")
    def _one_of_each_kind(self) -> Held:
        if self.adiabatic is False:
            raise RuleError("false says nothing; leave it out, or give the heat that is moved", "adiabatic")
        mechanical, thermal = self.given(MECHANICAL), self.given(THERMAL)
        for kind in (mechanical, thermal):
            if len(kind) > 1:
                first, second = kind[:2]
                raise RuleError(f"{first} and {second} cannot both be held: {_WHY[first, second]}. {_POSSIBLE}", second)
        if not mechanical:
            raise RuleError(
                'pressure or volume is missing; give one, for example pressure = "24 bar" or volume = "2 m3"'
            )
        if not thermal:
            raise RuleError(
                'nothing says how hot it is; give temperature, for example temperature = "870 degC", or adiabatic ='
                ' true, heat, or entropy = "from feeds"'
            )
        if self.isentropic_efficiency is not None and (thermal, mechanical) != (["entropy"], ["pressure"]):
            raise RuleError(
                'an isentropic efficiency goes with entropy = "from feeds" and pressure, nothing else',
                "isentropic_efficiency",
            )
        return self

    def given(self, keys: tuple[str, ...]) -> list[str]:
        """Those of ``keys`` that the table holds."""
        return [key for key in keys if getattr(self, key) is not None]

    @property
    def mechanical(self) -> str:
        """``pressure`` or ``volume``."""
        return self.given(MECHANICAL)[0]

    @property
    def thermal(self) -> str:
        """``temperature``, ``adiabatic``, ``heat`` or ``entropy``."""
        return self.given(THERMAL)[0]


class Surroundings(Table):
    """The place around, for the second-law account."""

    temperature: Temperature = Field(
        default="25 degC",
        description="Temperature of the surroundings, at which what is lost is counted as lost work.",
        examples=["25 degC", 298.15],
        validate_default=False,
    )
    heat_source_temperature: Temperature | None = Field(
        default=None,
        description="Temperature of what gives or takes the heat; without it heat is exchanged as the audit says.",
        examples=["1000 degC"],
    )
