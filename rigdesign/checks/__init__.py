"""Stage: checks."""
