"""rigdesign."""
