"""Figures of a result folder: what is drawn, how it looks, and the files it is written to."""
