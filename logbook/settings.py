"""Django's settings, read from the environment: nothing set means this machine only; production says all it needs."""

import os
from pathlib import Path

from logbook.core.database import database_from, sqlite_at
from logbook.core.environment import hosts_in, key_kept_in, mode_of, refuse_unfit_production

BASE = Path(__file__).resolve().parent.parent
DEMO = os.environ.get("LOGBOOK_DEMO") == "1"  # an invented shop, with everything of its own in a folder of its own
HOME = Path(os.environ.get("LOGBOOK_HOME") or BASE / "var").absolute() / ("demo" if DEMO else "")
PRODUCTION = mode_of(os.environ) == "production"

if PRODUCTION:
    refuse_unfit_production(os.environ)
    SECRET_KEY = os.environ["LOGBOOK_SECRET_KEY"]
    ALLOWED_HOSTS = hosts_in(os.environ)
else:
    SECRET_KEY = key_kept_in(HOME)
    ALLOWED_HOSTS = ["localhost", "127.0.0.1", "[::1]"]

DEBUG = os.environ.get("LOGBOOK_DEBUG") == "1"
DATABASES = {
    "default": database_from(os.environ["DATABASE_URL"])
    if os.environ.get("DATABASE_URL")
    else sqlite_at(HOME / "logbook.sqlite3")
}
DEFAULT_AUTO_FIELD = "django.db.models.BigAutoField"

INSTALLED_APPS = [
    "django.contrib.auth",
    "django.contrib.contenttypes",
    "django.contrib.sessions",
    "django.contrib.messages",
    "whitenoise.runserver_nostatic",
    "django.contrib.staticfiles",
    "django_htmx",
    "template_partials",
    "logbook.core",
    "logbook.people",
    "logbook.paper",
    "logbook.engines",
    "logbook.gauges",
    "logbook.work",
    "logbook.bench",
    "logbook.review",
    "logbook.desk",
]
MIDDLEWARE = [
    "logbook.core.csp.content_security_policy",
    "django.middleware.security.SecurityMiddleware",
    "whitenoise.middleware.WhiteNoiseMiddleware",
    "django.contrib.sessions.middleware.SessionMiddleware",
    "django.middleware.locale.LocaleMiddleware",
    "django.middleware.common.CommonMiddleware",
    "django.middleware.csrf.CsrfViewMiddleware",
    "django.contrib.auth.middleware.AuthenticationMiddleware",
    "logbook.people.clock.shop_time",
    "django.contrib.messages.middleware.MessageMiddleware",
    "django.middleware.clickjacking.XFrameOptionsMiddleware",
    "django_htmx.middleware.HtmxMiddleware",
]
ROOT_URLCONF = "logbook.urls"
WSGI_APPLICATION = "logbook.wsgi.application"
TEMPLATES = [
    {
        "BACKEND": "django.template.backends.django.DjangoTemplates",
        "DIRS": [BASE / "templates"],
        "APP_DIRS": True,
        "OPTIONS": {
            "context_processors": [
                "django.template.context_processors.request",
                "django.template.context_processors.i18n",
                "django.contrib.auth.context_processors.auth",
                "django.contrib.messages.context_processors.messages",
                "logbook.desk.navigation.navigation",
                "logbook.desk.demo.door.demo_door",
            ]
        },
    }
]

# People
AUTH_USER_MODEL = "people.Person"
AUTHENTICATION_BACKENDS = ["logbook.people.backend.ByName"]
LOGIN_URL = "people:sign_in"
LOGIN_REDIRECT_URL = "desk:home"
PASSWORD_HASHERS = ["logbook.people.hashers.BenchArgon2Hasher"]
AUTH_PASSWORD_VALIDATORS = [
    {
        "NAME": "django.contrib.auth.password_validation.UserAttributeSimilarityValidator",
        "OPTIONS": {"user_attributes": ["name"]},
    },
    {"NAME": "django.contrib.auth.password_validation.MinimumLengthValidator", "OPTIONS": {"min_length": 10}},
    {"NAME": "django.contrib.auth.password_validation.CommonPasswordValidator"},
]

# Words, times. A number's decimal mark is the shop's, written by the program itself, never by Django.
LANGUAGE_CODE = "en"
LANGUAGES = [("en", "English")]
LOCALE_PATHS = [BASE / "logbook" / "locale"]
USE_I18N = True
USE_TZ = True
TIME_ZONE = "UTC"

# Static files: collected into HOME, named by their content, served by the program itself
STATIC_URL = "/static/"
STATIC_ROOT = HOME / "static"
STORAGES = {
    "default": {"BACKEND": "django.core.files.storage.FileSystemStorage"},
    "staticfiles": {"BACKEND": "whitenoise.storage.CompressedManifestStaticFilesStorage"},
}
MEDIA_ROOT = HOME / "photos"

# What keeps strangers out
SESSION_COOKIE_NAME = "logbook_session"
CSRF_COOKIE_NAME = "logbook_csrf"
SESSION_COOKIE_HTTPONLY = CSRF_COOKIE_HTTPONLY = True
SESSION_COOKIE_SAMESITE = CSRF_COOKIE_SAMESITE = "Lax"
SESSION_COOKIE_AGE = 16 * 3600  # s: a long shift, and nobody is still signed in on a shared tablet the day after
X_FRAME_OPTIONS = "DENY"
CSRF_FAILURE_VIEW = "logbook.core.errors.form_too_old"
SECURE_REFERRER_POLICY = "same-origin"
if PRODUCTION:  # behind a proxy that speaks TLS and says so in this header, having dropped any the browser sent
    SECURE_PROXY_SSL_HEADER = ("HTTP_X_FORWARDED_PROTO", "https")
    SECURE_SSL_REDIRECT = True
    SECURE_HSTS_SECONDS = 365 * 24 * 3600
    SESSION_COOKIE_SECURE = CSRF_COOKIE_SECURE = True

# An error's traceback goes to the terminal, never to the page; a refusal that a page answers with is one line there
LOGGING = {
    "version": 1,
    "disable_existing_loggers": False,
    "formatters": {"plain": {"format": "{asctime} {levelname} {name}: {message}", "style": "{"}},
    "filters": {"refusals": {"()": "logbook.core.log.RefusalsInOneLine"}},
    "handlers": {"terminal": {"class": "logging.StreamHandler", "formatter": "plain", "filters": ["refusals"]}},
    "root": {"handlers": ["terminal"], "level": "WARNING"},
    "loggers": {"django": {"handlers": ["terminal"], "level": "WARNING", "propagate": False}},
}
