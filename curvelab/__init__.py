"""Time-current curves of protective devices: read from a sheet, checked, stored, asked.

The public names are loaded when first used, so that asking a stored device needs NumPy alone.
"""

from importlib import import_module
from typing import Any

__version__ = "0.1.0.dev0"

_PUBLIC = {
    "digitise": "curvelab.reading.digitise",
    "open_library": "curvelab.library.library",
    "compare": "curvelab.calculators.compare",
}

__all__ = ["__version__", "compare", "digitise", "open_library"]


def __getattr__(name: str) -> Any:
    if name in _PUBLIC:
        return getattr(import_module(_PUBLIC[name]), name)
    raise AttributeError(f"module 'curvelab' has no attribute '{name}'")
