"""Persons: one name each, and passwords that can't be read back."""

import pytest
from django.contrib.auth import authenticate, get_user_model
from django.core.exceptions import ValidationError
from django.db import IntegrityError, transaction

from logbook.people.models import Person

pytestmark = pytest.mark.django_db


def person(name="Night shift 3", password="a feeler of 0.18"):
    somebody = Person(name=name)
    somebody.set_password(password)
    somebody.full_clean()
    somebody.save()
    return somebody


def test_the_program_knows_people_by_its_own_model():
    assert get_user_model() is Person


def test_a_password_is_kept_by_argon2_with_19_mebibytes():
    assert person().password.startswith("argon2$argon2id$v=19$m=19456,t=2,p=1$")


def test_somebody_signs_in_by_name_whatever_the_capitals():
    somebody = person()
    assert authenticate(username="night SHIFT 3", password="a feeler of 0.18") == somebody
    assert authenticate(username="Night shift 3", password="a feeler of 0.19") is None


def test_who_left_can_no_longer_sign_in():
    somebody = person()
    somebody.is_active = False
    somebody.save()
    assert authenticate(username="Night shift 3", password="a feeler of 0.18") is None


@pytest.mark.parametrize("name", ["Night shift 3", "NIGHT SHIFT 3"])
def test_a_name_is_given_once(name):
    person()
    with pytest.raises(ValidationError) as refused:
        person(name=name)
    assert "Somebody with this name is here already; add an initial or a number." in refused.value.messages
    with pytest.raises(IntegrityError), transaction.atomic():
        Person.objects.create(name=name)


def test_a_person_without_a_name_is_refused_by_the_database_too():
    with pytest.raises(IntegrityError, match="person_has_a_name"), transaction.atomic():
        Person.objects.create(name="")
