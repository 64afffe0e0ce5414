"""What was recorded is never changed or deleted, not even at the database's own prompt."""

import pytest
from django.db import DatabaseError, connection, transaction

from logbook.engines.models import MeterReading
from tests.factories import make_engine, make_meter, make_person, make_shop

pytestmark = pytest.mark.django_db


@pytest.fixture
def reading():
    shop = make_shop()
    meter = make_meter(make_engine(shop), make_person(shop, "Technician 3"))
    return meter.readings.get()


@pytest.mark.parametrize(
    "statement",
    [
        "UPDATE engines_meterreading SET shows = 1",
        "DELETE FROM engines_meterreading",
        "INSERT OR REPLACE INTO engines_meterreading SELECT * FROM engines_meterreading",
    ],
)
def test_the_database_refuses_what_would_change_a_record(reading, statement):
    with (
        pytest.raises(DatabaseError, match="never changed or deleted"),
        transaction.atomic(),
        connection.cursor() as cursor,
    ):
        cursor.execute(statement)

    assert MeterReading.objects.get().shows == 4210.0


def test_a_correction_is_a_new_row_with_its_reason(reading):
    told = {"shop": reading.shop, "meter": reading.meter, "taken_at": reading.taken_at, "recorded_at": reading.recorded_at,
            "recorded_by": reading.recorded_by}  # fmt: skip
    MeterReading.objects.create(**told, shows=4120.0, supersedes=reading, reason="digits swapped")

    assert MeterReading.objects.count() == 2
    with pytest.raises(DatabaseError, match="meter_correction_has_a_reason"), transaction.atomic():
        MeterReading.objects.create(**told, shows=4121.0, supersedes=MeterReading.objects.last())
