"""The numbers of a flue gas: composition, emissions, losses, dew points."""
