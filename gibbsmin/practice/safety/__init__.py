"""Cautions, and the limits at which they are raised."""
