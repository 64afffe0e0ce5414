"""Append-only tables: triggers that refuse a change or a deletion even to someone at the database's own prompt.

SQLite's triggers are reached by INSERT OR REPLACE only with `recursive_triggers` on (core.database turns it on); a
BEFORE INSERT check refuses a row whose number is there already all the same. PostgreSQL's row triggers miss TRUNCATE,
so a statement trigger refuses that too.
"""

from django.db.migrations.operations.base import Operation

REFUSAL = "rows of {table} are never changed or deleted; a correction is a new row"


class AppendOnly(Operation):
    """Migration operation: make a model's table append-only."""

    reversible = True
    reduces_to_sql = True

    def __init__(self, model: str) -> None:
        self.model = model

    def state_forwards(self, app_label, state) -> None:  # noqa: ANN001 - Django's signature
        pass

    def database_forwards(self, app_label, schema_editor, from_state, to_state) -> None:  # noqa: ANN001
        table = to_state.apps.get_model(app_label, self.model)._meta.db_table
        for statement in statements(table, schema_editor.connection.vendor):
            schema_editor.execute(statement, params=None)

    def database_backwards(self, app_label, schema_editor, from_state, to_state) -> None:  # noqa: ANN001
        table = to_state.apps.get_model(app_label, self.model)._meta.db_table
        for name in (f"{table}_no_update", f"{table}_no_delete", f"{table}_no_replace", f"{table}_no_truncate"):
            on = f' ON "{table}"' if schema_editor.connection.vendor == "postgresql" else ""
            schema_editor.execute(f'DROP TRIGGER IF EXISTS "{name}"{on}', params=None)

    def describe(self) -> str:
        return f"Make {self.model} append-only"


def statements(table: str, vendor: str) -> list[str]:
    """SQL that refuses UPDATE, DELETE and what amounts to them on a table."""
    refusal = REFUSAL.format(table=table)
    if vendor == "sqlite":
        raising = f"BEGIN SELECT RAISE(ABORT, '{refusal}'); END"
        return [
            f'CREATE TRIGGER "{table}_no_update" BEFORE UPDATE ON "{table}" {raising}',
            f'CREATE TRIGGER "{table}_no_delete" BEFORE DELETE ON "{table}" {raising}',
            f'CREATE TRIGGER "{table}_no_replace" BEFORE INSERT ON "{table}" '
            f'WHEN EXISTS (SELECT 1 FROM "{table}" WHERE id = NEW.id) {raising}',
        ]
    function = f"{table}_append_only"
    return [
        f'CREATE OR REPLACE FUNCTION "{function}"() RETURNS trigger LANGUAGE plpgsql AS '
        f"$$ BEGIN RAISE EXCEPTION '{refusal}'; END $$",
        f'CREATE TRIGGER "{table}_no_update" BEFORE UPDATE OR DELETE ON "{table}" '
        f'FOR EACH ROW EXECUTE FUNCTION "{function}"()',
        f'CREATE TRIGGER "{table}_no_truncate" BEFORE TRUNCATE ON "{table}" EXECUTE FUNCTION "{function}"()',
    ]
