"""The room's addresses."""

from django.urls import path

from .views import door, shop

app_name = "people"
urlpatterns = [
    path("first-start/", door.first_start, name="first_start"),
    path("sign-in/", door.sign_in, name="sign_in"),
    path("sign-out/", door.sign_out, name="sign_out"),
    path("password/", door.own_password, name="own_password"),
    path("people/", shop.people, name="people"),
    path("people/new/", shop.new_person, name="new_person"),
    path("people/<int:pk>/", shop.person, name="person"),
    path("shop/", shop.shop, name="shop"),
]
