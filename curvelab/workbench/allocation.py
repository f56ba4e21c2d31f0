"""Gives the memory of large arrays back to the system as soon as they are freed.

The usual C library of Linux learns from large blocks that were freed to keep such blocks for itself, in a heap for each
thread. A process that opens page after page then holds nearly twice of what it uses.
"""

import ctypes
import sys

M_MMAP_THRESHOLD, M_ARENA_MAX = -3, -8
"""Numbers of the settings in malloc.h."""
LARGE_BYTES = 1_000_000
HEAPS = 2


def return_large_blocks() -> None:
    """Fix the size from which a block is the system's own; elsewhere than on Linux nothing is needed."""
    if sys.platform != "linux":
        return
    try:
        mallopt = ctypes.CDLL("libc.so.6").mallopt
    except (OSError, AttributeError):
        # Another C library, which has no such habit.
        return
    mallopt(M_MMAP_THRESHOLD, LARGE_BYTES)
    mallopt(M_ARENA_MAX, HEAPS)
