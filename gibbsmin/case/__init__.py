"""The case file: schema, reading, defaults, and turning a case into a study."""
