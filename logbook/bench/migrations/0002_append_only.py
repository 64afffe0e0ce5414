"""What was recorded is never changed or deleted."""

from django.db import migrations

from logbook.core.append_only import AppendOnly


class Migration(migrations.Migration):
    dependencies = [("bench", "0001_initial")]

    operations = [AppendOnly("Reading"), AppendOnly("Finding"), AppendOnly("Act")]
