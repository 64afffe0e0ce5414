"""The shop's clock: times are shown and typed in the time zone of the shop whose person is signed in."""

from collections.abc import Callable
from zoneinfo import ZoneInfo, ZoneInfoNotFoundError

from django.conf import settings
from django.http import HttpRequest, HttpResponse
from django.utils import timezone


def shop_time(get_response: Callable[[HttpRequest], HttpResponse]) -> Callable[[HttpRequest], HttpResponse]:
    """Middleware behind the one that knows who is signed in."""

    def answer(request: HttpRequest) -> HttpResponse:
        zone = request.user.shop.time_zone if request.user.is_authenticated else settings.TIME_ZONE
        with timezone.override(zone_named(zone)):
            return get_response(request)

    return answer


def zone_named(name: str) -> ZoneInfo | None:
    """Give a time zone; None, which is UTC here, where this machine's own tables have lost it."""
    try:
        return ZoneInfo(name)
    except (ZoneInfoNotFoundError, ValueError):
        return None
