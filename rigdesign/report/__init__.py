"""Stage: report."""
