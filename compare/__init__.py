"""What the readings mean in a circuit: derived values, verdicts, ranking, page and command line."""
