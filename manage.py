#!/usr/bin/env python
"""Run a management command."""

import os
import sys
from pathlib import Path

if __name__ == "__main__":
    os.environ.setdefault("DJANGO_SETTINGS_MODULE", "sugarhouse.settings")
    if sys.argv[1:2] == ["demo"]:
        demo = Path(__file__).resolve().parent / "data" / "demo"
        os.environ.setdefault("SUGARHOUSE_DATA", str(demo))
    from django.core.management import execute_from_command_line

    execute_from_command_line(sys.argv)
