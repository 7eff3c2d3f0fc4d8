"""The ``[species]`` table: which species may form."""

from __future__ import annotations

from typing import Final

from pydantic import Field, model_validator

from gibbsmin.case.fields import RuleError, Table, Text
from gibbsmin.case.rules_schema import Percent

FROM_FEEDS: Final = "from feeds"
Names = list[Text]


class SpeciesTable(Table):
    """Which species may form."""

    elements: Text = Field(
        default=FROM_FEEDS,
        description="Elements whose species may form: 'from feeds', or symbols with blanks between them.",
        examples=["from feeds", "C H O N"],
    )
    allow: Names | None = Field(
        default=None,
        description="The species that may form, one by one; then elements, condensed, ions and exclude are not given.",
        examples=[["CH4", "H2O", "CO", "CO2", "H2", "N2"]],
    )
    condensed: bool = Field(default=True, description="Whether solids and liquids may form.", examples=[True])
    ions: bool = Field(default=False, description="Whether ions and electrons may form.", examples=[False])
    settling: Names | None = Field(
        default=None,
        description=(
            "The species that settle among themselves; all others of the feeds pass through as they come. Then "
            "elements, allow, condensed, ions and exclude are not given."
        ),
        examples=[["H2O", "H2O(l)"]],
    )
    exclude: Names = Field(default=[], description="Species that must not form.", examples=[["C(s):graphite", "C2H2"]])
    inert: Names = Field(
        default=[],
        description="Species that pass through without reacting; their atoms take no part.",
        examples=[["Ar"]],
    )
    conversion: dict[Text, Percent] | None = Field(
        default=None,
        description=(
            "Given conversion of a species, in percent of what the feeds bring: the rest of it leaves as it came, and "
            "no more of it forms."
        ),
        examples=[{"CH4": 85.0}],
    )
    carbon_conversion: Percent | None = Field(
        default=None,
        description=(
            "Given conversion of the carbon of fuels, in percent: the rest leaves as graphite of the temperature of "
            "the mixture and takes no part. Carbon counts as for steam_to_carbon."
        ),
        examples=[98.0],
    )
    files: Names = Field(
        default=[],
        description="Files of own species (TOML), in the folder of the case.",
        examples=[["my_species.toml"]],
    )

    @model_validator(mode="after")
    def _allow_stands_alone(self) -> SpeciesTable:
        usual = {"elements": FROM_FEEDS, "condensed": True, "ions": False, "exclude": []}
        clash = [key for key, value in usual.items() if getattr(self, key) != value]
        if self.settling is not None and (clash or self.allow is not None):
            raise RuleError(f"settling lists what takes part; leave out {' and '.join(clash) or 'allow'}", "settling")
        if self.settling is not None and not self.settling:
            raise RuleError("lists no species; name at least one, or leave settling out", "settling")
        if self.allow is not None and clash:
            raise RuleError(f"allow lists every species that may form; leave out {' and '.join(clash)}", clash[0])
        twice = [name for name in self.conversion or {} if name in (*self.inert, *self.exclude)]
        if twice:
            raise RuleError(f"{twice[0]} has a given conversion and is inert or excluded; choose one", "conversion")
        if self.allow is not None and not self.allow:
            raise RuleError("lists no species; name at least one, or leave allow out", "allow")
        return self
