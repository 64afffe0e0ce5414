"""The database's plan is the models' plan."""

import pytest
from django.core.management import call_command


@pytest.mark.django_db
def test_no_migration_is_missing(capsys):
    call_command("makemigrations", check=True, dry_run=True, verbosity=1)
    assert capsys.readouterr().out == "No changes detected\n"


@pytest.mark.django_db
def test_the_settings_pass_every_check(capsys):
    call_command("check", fail_level="WARNING")
    assert capsys.readouterr().out == "System check identified no issues (0 silenced).\n"
