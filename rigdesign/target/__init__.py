"""Stage: target."""
