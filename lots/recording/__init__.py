"""Floor."""
