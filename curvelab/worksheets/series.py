"""The keys of a series: one device a rating, from a key that carries ``{rating}``."""

import re

from curvelab.records.worksheet import DeviceEntry

KEY = re.compile(r"[A-Za-z0-9_-]{1,64}")
"""What a device key may be."""

PLACEHOLDER = "{rating}"


def rating_key(template: str, rating: float) -> str:
    """The key of one rating; a key has no decimal point, so 1.6 A is written ``1_6``."""
    return template.replace(PLACEHOLDER, f"{rating:g}".replace(".", "_"))


def device_keys(entry: DeviceEntry) -> tuple[str, ...]:
    """The keys of all devices an entry stores, in the order of its ratings."""
    if not entry.ratings:
        return (entry.nameplate.key,)
    return tuple(rating_key(entry.nameplate.key, rating) for rating in entry.ratings)
