"""How passwords are kept: argon2, with less memory than Django's own setting."""

from django.contrib.auth.hashers import Argon2PasswordHasher


class BenchArgon2Hasher(Argon2PasswordHasher):
    """Argon2id with 19 MiB, two passes, one lane: a shift signing in at once doesn't exhaust a small server.

    Source: OWASP Password Storage Cheat Sheet, Argon2id (from memory); Django's default takes 100 MiB a check.
    """

    memory_cost = 19_456  # KiB
    time_cost = 2
    parallelism = 1
