"""What opening a PDF may cost, told from its bytes: whether it may be read here, or only in a process of its own."""

import re
import zlib

LIGHT_BYTES = 60_000_000
"""What all streams of a light file hold when unpacked; an A4 scan of 300 dpi has 26 million bytes of colour."""

LIGHT_FORMS = 12
"""Forms of a light file: ten in each of ten, ten deep, are drawn ten thousand million times."""

_STREAM = re.compile(rb"stream\r?\n")
_FLATE = re.compile(rb"/(?:FlateDecode|Fl)\b")
_OTHER_PACKING = re.compile(rb"/(?:LZWDecode|LZW|RunLengthDecode|RL|JBIG2Decode|JPXDecode|Crypt)\b")
_FORM = re.compile(rb"/Form\b")
BEFORE_STREAM = 400
"""Bytes in which a stream's own entries stand."""


def is_light(data: bytes) -> bool:
    """Whether every stream is packed once and plainly, their contents are small together, and few forms are defined."""
    if len(data) > LIGHT_BYTES or _OTHER_PACKING.search(data):
        return False
    forms, room = len(_FORM.findall(data)), LIGHT_BYTES
    for match in _STREAM.finditer(data):
        before = data[max(0, match.start() - BEFORE_STREAM) : match.start()]
        packed = len(_FLATE.findall(before[before.rfind(b" obj") + 1 :]))
        if packed > 1:
            return False
        content = _unpacked(data[match.end() :]) if packed else b""
        room -= len(content)
        forms += len(_FORM.findall(content))
        if room <= 0 or _OTHER_PACKING.search(content):
            return False
    return forms <= LIGHT_FORMS


def _unpacked(stream: bytes) -> bytes:
    """What can be unpacked of a stream, up to what is light."""
    try:
        return zlib.decompressobj().decompress(stream, LIGHT_BYTES)
    except zlib.error:
        return b""
