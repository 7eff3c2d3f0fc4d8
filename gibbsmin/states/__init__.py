"""One question answered: a system, two held conditions, a state and its certificate."""
