"""Persons: one name each, and passwords that can't be read back."""

import pytest
from django.contrib.auth import authenticate, get_user_model
from django.contrib.auth.models import AnonymousUser
from django.core.exceptions import ValidationError
from django.db import IntegrityError, transaction

from logbook.people.models import Person, Shop
from tests.factories import make_shop

pytestmark = pytest.mark.django_db


def person(name="Night shift 3", password="a feeler of 0.18"):
    somebody = Person(shop=Shop.objects.first() or make_shop(), name=name, is_technician=True)
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
        Person.objects.create(shop=Shop.objects.first(), name=name, is_technician=True)


def test_a_person_without_a_name_is_refused_by_the_database_too():
    with pytest.raises(IntegrityError, match="person_has_a_name"), transaction.atomic():
        Person.objects.create(shop=make_shop(), name="", is_technician=True)


def test_a_person_has_at_least_one_role():
    with pytest.raises(ValidationError) as refused:
        Person(shop=make_shop(), name="Nobody's helper", password="!").full_clean()
    assert "Tick at least one role: it says what this person may do." in refused.value.messages


def test_rows_are_seen_by_their_own_shop_only():
    ours, theirs = make_shop(), make_shop("Other works")
    here = Person.objects.create(shop=ours, name="Here", is_technician=True)
    Person.objects.create(shop=theirs, name="There", is_technician=True)

    assert list(Person.objects.seen_by(here)) == [here]
    assert list(Person.objects.seen_by(AnonymousUser())) == []
