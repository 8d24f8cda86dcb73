"""Lot codes and open identification standards: pure text, no I/O."""
