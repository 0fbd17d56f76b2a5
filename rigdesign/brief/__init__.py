"""Stage: brief."""
