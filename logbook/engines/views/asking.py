"""How every form of this room is answered: sent, done or refused where it stands, then back to where it came from."""

from collections.abc import Callable

from django import forms
from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from logbook.engines.services import EngineryRefused

form_page = require_http_methods(["GET", "HEAD", "POST"])


def done(form: forms.BaseForm, act: Callable[[dict[str, object]], object]) -> object | None:
    """Act on a form that was sent and is right; a refusal stands at its fields, a question shows the remark."""
    if not form.is_bound or not form.is_valid():
        return None
    try:
        return act(form.cleaned_data)
    except EngineryRefused as refused:
        form.asked = refused.asks
        for field, said in refused.at_fields or [(None, str(refused))]:
            form.add_error(field if field in form.fields else None, said)
    return None


def form_answer(
    request: HttpRequest, form: forms.BaseForm, *, heading: str, submit: str, back: str, where: object,
    template: str = "engines/form.html", **more: object,
) -> HttpResponse:  # fmt: skip
    """A page with one form.

    Parameters
    ----------
    heading, submit : str
        Words over the form and on its button.
    back, where : str
        Address to go back to without sending it, and what stands there.
    """
    context = {"form": form, "heading": heading, "submit": submit, "back": back, "where": where, **more}
    return render(request, template, context)


def acted(request: HttpRequest, said: str, back: str, act: Callable[[], object]) -> HttpResponse:
    """Act on a button without a form, and say on the page it stood on what came of it."""
    try:
        act()
        messages.success(request, said)
    except EngineryRefused as refused:
        messages.error(request, str(refused))
    return redirect(back)
