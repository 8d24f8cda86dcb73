"""Tests of the physics floor: no database, no framework."""
