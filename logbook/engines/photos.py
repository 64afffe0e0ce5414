"""Photos of a limit's source: what may be uploaded, and how it is named."""

from uuid import uuid4

from django.core.files.uploadedfile import UploadedFile
from django.utils.translation import gettext as _
from PIL import Image, UnidentifiedImageError

MOST_BYTES = 8_000_000
MOST_PIXELS = 60_000_000  # a phone's largest; a picture that unpacks to more is refused before it is unpacked
KINDS = {"JPEG": ("jpg", "image/jpeg"), "PNG": ("png", "image/png")}


class PhotoRefused(ValueError):
    """The file is no photo that is kept; its text says why."""


def named_photo(upload: UploadedFile) -> UploadedFile:
    """Check an uploaded photo and give it a name of our own; the person's file name is not kept.

    Raises
    ------
    PhotoRefused
        It is too large, is no whole JPEG or PNG, or unpacks to too many pixels.
    """
    if upload.size > MOST_BYTES:
        raise PhotoRefused(
            _("The file has %(size).1f MB; a photo has 8 MB at most. Take it at a lower resolution.")
            % {"size": upload.size / 1e6}
        )
    ending, _media_type = KINDS[_format_of(upload)]
    upload.name = f"{uuid4().hex}.{ending}"
    return upload


def _format_of(upload: UploadedFile) -> str:
    """Unpack the whole picture: a cut-off file, or one that only begins like a picture, doesn't pass."""
    upload.seek(0)
    try:
        with Image.open(upload, formats=tuple(KINDS)) as image:
            if image.width * image.height > MOST_PIXELS:
                raise PhotoRefused(_("The picture has too many pixels; take it at a lower resolution."))
            image.load()
            return image.format
    except (UnidentifiedImageError, OSError, SyntaxError, ValueError, Image.DecompressionBombError) as error:
        if isinstance(error, PhotoRefused):
            raise
        raise PhotoRefused(
            _("This is no whole JPEG or PNG picture; take the photo again, or choose another file.")
        ) from error
    finally:
        upload.seek(0)


def media_type(name: str) -> str:
    """Media type to serve a kept photo as, by the name that we gave it."""
    return next(kind for ending, kind in KINDS.values() if name.endswith(f".{ending}"))
