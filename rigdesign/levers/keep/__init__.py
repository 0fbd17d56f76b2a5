"""A rig that is kept."""
