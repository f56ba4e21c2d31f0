"""Decoders written in C tell of damage on the process's standard error; what is told is the program's to word."""

import contextlib
import os
import sys
from collections.abc import Iterator


@contextlib.contextmanager
def silent_decoders() -> Iterator[None]:
    """Drop what C code writes to standard error; the caller holds the lock under which images are decoded."""
    if sys.stderr is not None:
        sys.stderr.flush()
    try:
        kept = os.dup(2)
    except OSError:  # the process has no standard error
        yield
        return
    try:
        with open(os.devnull, "wb") as nowhere:
            os.dup2(nowhere.fileno(), 2)
        yield
    finally:
        os.dup2(kept, 2)
        os.close(kept)
