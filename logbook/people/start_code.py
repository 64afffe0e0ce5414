"""The one-time code that opens an empty logbook: printed by the server, kept hashed, good until somebody exists."""

import os
import secrets
import tempfile
from pathlib import Path

from django.contrib.auth.hashers import check_password, make_password

SIGNS = "23456789ABCDEFGHJKMNPQRSTUVWXYZ"  # no 0/O, 1/I/L: it is read off one screen and keyed on another
GROUPS, GROUP = 3, 4  # 59 bits: no number of tries finds it


def make_code(home: Path) -> str:
    """Make a code, keep its hash for its owner's eyes only, and give the code itself to be printed once.

    A code made before is worth nothing from then on.
    """
    code = "-".join("".join(secrets.choice(SIGNS) for _ in range(GROUP)) for _ in range(GROUPS))
    home.mkdir(parents=True, exist_ok=True)
    handle, draft = tempfile.mkstemp(dir=home, prefix="first_start.")  # made with mode 0600
    with os.fdopen(handle, "w") as file:
        file.write(make_password(bare(code)))
    os.replace(draft, kept_at(home))
    return code


def is_made(home: Path) -> bool:
    """Tell whether there is a code that could be right."""
    return kept_at(home).exists()


def is_right(home: Path, typed: str) -> bool:
    """Tell whether this is the code; capitals, spaces and hyphens don't matter."""
    return is_made(home) and check_password(bare(typed), kept_at(home).read_text())


def use_up(home: Path) -> None:
    """Make the code worth nothing."""
    kept_at(home).unlink(missing_ok=True)


def kept_at(home: Path) -> Path:
    """Where its hash lies."""
    return home / "first_start"


def bare(typed: str) -> str:
    """Give the signs of a code alone.

    >>> bare(" 7kq4-M2XP 9tbc")
    '7KQ4M2XP9TBC'
    """
    return "".join(sign for sign in typed.upper() if sign.isalnum())
