"""What was recorded is never changed or deleted."""

from django.db import migrations

from logbook.core.append_only import AppendOnly


class Migration(migrations.Migration):
    dependencies = [("work", "0001_initial")]

    operations = [AppendOnly("Done"), AppendOnly("Deferral"), AppendOnly("Move"), AppendOnly("PartUsed")]
