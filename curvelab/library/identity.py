"""Content hashes: the same curve, statement or revision has the same hash, whenever and by whom it is stored.

What is None, False or empty is left out, so that a field added to a record later does not change the hash of what
lacks it.
"""

import hashlib
import json
from collections.abc import Iterable, Mapping
from dataclasses import fields, is_dataclass
from functools import cache, lru_cache
from typing import TYPE_CHECKING, Any

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.curve import Curve
from curvelab.records.device import Nameplate

if TYPE_CHECKING:
    from curvelab.records.reading import Reading

_HEAD = tuple(field.name for field in fields(Curve) if field.name not in ("parts", "at", "sheet"))

NO_STATEMENT = hashlib.sha256(b"").digest()


def curve_sha256(curve: Curve) -> bytes:
    """Hash of all a curve says; of its sheet the file's bytes, page and plot count, not the file's name."""
    values = (getattr(curve, name) for name in _HEAD)
    digest = hashlib.sha256(_head((*values, tuple(sorted(curve.at.items())), curve.sheet)))
    for part in curve.parts:
        digest.update(len(part.current).to_bytes(8, "little"))
        digest.update(_bytes(np.stack((part.current, part.value, part.sd_current, part.sd_value, part.sd_common))))
    return digest.digest()


@lru_cache(maxsize=4096)
def _head(values: tuple[Any, ...]) -> bytes:
    """What a curve says beside its points; curves of a series say the same, so that it is written once."""
    *said, at, sheet = values
    name = sheet and [sheet.sha256, sheet.page, sheet.plot]
    return _text({**dict(zip(_HEAD, said, strict=True)), "at": dict(at), "sheet": name})


def statement_sha256(reading: "Reading") -> bytes:
    """Hash of what people said beside the numbers: the document, and the warnings with who accepted them."""
    return hashlib.sha256(_text([reading.worksheet.document, reading.warnings])).digest()


def revision_sha256(nameplate: Nameplate, evidence: Iterable[tuple[bytes, bytes]]) -> bytes:
    """Hash of a device's content: its nameplate and its (curve, statement) hashes in any order."""
    digest = hashlib.sha256(_text(nameplate))
    for curve, statement in sorted(evidence):
        digest.update(curve + statement)
    return digest.digest()


def _text(value: object) -> bytes:
    return json.dumps(_plain(value), sort_keys=True, separators=(",", ":")).encode("ascii")


def _plain(value: object) -> Any:
    """Nested plain values: numbers as floats, records as mappings without what is None, False or empty."""
    if value is None or isinstance(value, (str, bool)):
        return value
    if isinstance(value, (int, float)):
        return float(value) + 0.0
    if isinstance(value, (tuple, list)):
        return [_plain(item) for item in value]
    said: Iterable[tuple[str, Any]]
    if isinstance(value, Mapping):
        said = value.items()
    elif is_dataclass(value):
        said = ((name, getattr(value, name)) for name in _names(type(value)))  # type: ignore[arg-type]
    else:
        raise TypeError(f"{type(value).__name__} has no canonical form")
    return {name: plain for name, item in said if item is not None and not _is_nothing(plain := _plain(item))}


@cache
def _names(record: type[Any]) -> tuple[str, ...]:
    return tuple(field.name for field in fields(record))


def _is_nothing(plain: object) -> bool:
    """None, False or empty; zero is something."""
    return plain is None or plain is False or (not plain and isinstance(plain, (str, list, dict)))


def _bytes(values: Floats) -> bytes:
    """Little-endian doubles, every NaN alike and -0 as 0."""
    return np.where(np.isnan(values), np.nan, values + 0.0).astype("<f8").tobytes()
