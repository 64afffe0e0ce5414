#!/usr/bin/env python
"""The door to the program's commands: `python manage.py help` lists them."""

import os
import sys


def main() -> None:
    os.environ.setdefault("DJANGO_SETTINGS_MODULE", "logbook.settings")
    if sys.argv[1:2] in (["run"], ["demo"]):  # they are about the invented shop, which has a database of its own
        os.environ["LOGBOOK_DEMO"] = "1"
    from django.core.management import execute_from_command_line

    execute_from_command_line(sys.argv)


if __name__ == "__main__":
    main()
