"""The command line: reads what was typed, calls one thing, shows what came back. No science here."""
