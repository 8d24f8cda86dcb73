"""Limits as data and their evaluation; roles, retention and regulators. No Django."""
