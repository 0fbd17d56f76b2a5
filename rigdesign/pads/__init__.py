"""Stage: pads."""
