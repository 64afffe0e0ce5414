"""What was recorded is never changed or deleted."""

from django.db import migrations

from logbook.core.append_only import AppendOnly


class Migration(migrations.Migration):
    dependencies = [("review", "0001_initial")]

    operations = [AppendOnly("Decision"), AppendOnly("Signature"), AppendOnly("SealedSheet")]
