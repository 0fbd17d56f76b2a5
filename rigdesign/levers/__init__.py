"""Stage: levers."""
