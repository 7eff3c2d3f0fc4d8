"""The numbers of the other trades, each set in a file of its own, and what they share."""
