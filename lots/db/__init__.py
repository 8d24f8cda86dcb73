"""Database guards: the triggers that hold what no single-row constraint can."""
