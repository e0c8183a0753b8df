"""The kernel as a referee: its extracted program, what is written to it, what it says."""
