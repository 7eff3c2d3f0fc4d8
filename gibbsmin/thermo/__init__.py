"""Thermochemical data: species records, standard-state functions, the database and its data files."""
