"""Ways to damage a file, as disks, networks, editors and ill-wishers do."""

import random
from collections.abc import Callable

TOKENS = [
    b"-1", b"0", b"1e309", b"nan", b"inf", b"99999999999999999999", b"4294967295", b"-0.0", b"1e-320", b"true", b"null",
    b'"', b"'", b"\\", b"[", b"]", b"{", b"}", b",", b"=", b"\n", b"\x00", b"\xff\xfe", b"\xf0\x9f\x92\xa1",
    b"../../etc/passwd", b"=cmd()", b"<script>", b"&x;", b"%n%s",
    b"'; DROP TABLE device; --", b"A" * 5000, b"[" * 2000, b"\xe2\x80\xae",
]  # fmt: skip
"""Numbers at the edge, marks of structure, and words that mean something to some reader."""


def damaged(data: bytes, rng: random.Random) -> bytes:
    """The data after one to four kinds of damage."""
    for _ in range(rng.randint(1, 4)):
        data = rng.choice(DAMAGES)(data, rng)
    return data


def _changed_bytes(data: bytes, rng: random.Random) -> bytes:
    out = bytearray(data)
    for _ in range(rng.randint(1, 8) if out else 0):
        out[rng.randrange(len(out))] = rng.randrange(256)
    return bytes(out)


def _cut_short(data: bytes, rng: random.Random) -> bytes:
    return data[: rng.randint(0, len(data))]


def _stretch_repeated(data: bytes, rng: random.Random) -> bytes:
    start = rng.randint(0, len(data))
    end = min(len(data), start + rng.randint(1, 200))
    return data[:end] + data[start:end] * rng.randint(1, 20) + data[end:]


def _stretch_left_out(data: bytes, rng: random.Random) -> bytes:
    start = rng.randint(0, len(data))
    return data[:start] + data[start + rng.randint(1, 100) :]


def _token_put_in(data: bytes, rng: random.Random) -> bytes:
    at = rng.randint(0, len(data))
    return data[:at] + rng.choice(TOKENS) + data[at:]


def _number_replaced(data: bytes, rng: random.Random) -> bytes:
    digits = [k for k, byte in enumerate(data) if 48 <= byte <= 57]
    if not digits:
        return data
    start = end = rng.choice(digits)
    while end < len(data) and data[end : end + 1] in b"0123456789.":
        end += 1
    return data[:start] + rng.choice(TOKENS[:10]) + data[end:]


def _lines_exchanged(data: bytes, rng: random.Random) -> bytes:
    lines = data.split(b"\n")
    a, b = rng.randrange(len(lines)), rng.randrange(len(lines))
    lines[a], lines[b] = lines[b], lines[a]
    return b"\n".join(lines)


DAMAGES: tuple[Callable[[bytes, random.Random], bytes], ...] = (
    _changed_bytes,
    _cut_short,
    _stretch_repeated,
    _stretch_left_out,
    _token_put_in,
    _number_replaced,
    _lines_exchanged,
)
