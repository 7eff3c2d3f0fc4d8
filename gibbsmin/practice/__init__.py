"""The trade's arithmetic and its cautions, on names and plain numbers."""
