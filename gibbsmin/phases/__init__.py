"""Mixing models: what turns the standard-state functions of species into those of a phase. One model a file."""
