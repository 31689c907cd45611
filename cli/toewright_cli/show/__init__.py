"""How results are shown on the terminal and as JSON; no figure is worked out here."""
