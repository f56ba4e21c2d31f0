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
    "disconnection": "curvelab.calculators.disconnection",
    "Circumstances": "curvelab.calculators.circumstances",
    "withstand": "curvelab.calculators.withstand",
    "Faults": "curvelab.calculators.withstand",
    "conductor_of": "curvelab.calculators.conductors",
    "discrimination": "curvelab.calculators.discrimination",
    "transformer_of": "curvelab.calculators.transformer",
    "overload": "curvelab.calculators.overload",
    "Load": "curvelab.calculators.overload",
    "breaking": "curvelab.calculators.breaking",
    "ShortCircuit": "curvelab.calculators.breaking",
}

__all__ = [
    "Circumstances",
    "Faults",
    "Load",
    "ShortCircuit",
    "__version__",
    "breaking",
    "compare",
    "conductor_of",
    "digitise",
    "disconnection",
    "discrimination",
    "open_library",
    "overload",
    "transformer_of",
    "withstand",
]


def __getattr__(name: str) -> Any:
    if name in _PUBLIC:
        return getattr(import_module(_PUBLIC[name]), name)
    raise AttributeError(f"module 'curvelab' has no attribute '{name}'")
