"""Several people at once, in real transactions on both databases."""
