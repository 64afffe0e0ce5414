"""Figures on the engines' pages: all their digits, thousands set apart, with the shop's decimal mark."""

from django import template

from logbook.core.figures import figure as to_four_digits
from logbook.engines.written import THIN, written
from logbook.people.models import Shop

register = template.Library()


@register.filter
def figure(value: float | None, shop: Shop) -> str:
    """Write a stored figure; a dash where it isn't known."""
    return "–" if value is None else written(value, shop.decimal_mark, apart=THIN)


@register.filter
def about(value: float, shop: Shop) -> str:
    """Write a figure that was worked out, to four significant digits."""
    return to_four_digits(value, decimal_mark=shop.decimal_mark)
