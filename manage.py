#!/usr/bin/env python
"""Run a management command."""

import os
import sys

if __name__ == "__main__":
    os.environ.setdefault("DJANGO_SETTINGS_MODULE", "sugarhouse.settings")
    if sys.argv[1:2] == ["demo"]:
        os.environ.setdefault("SUGARHOUSE_DATA", "data/demo")
    from django.core.management import execute_from_command_line

    execute_from_command_line(sys.argv)
