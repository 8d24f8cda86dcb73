"""The Django project: settings, addresses and servers' entry points."""
