"""Stage: command."""
