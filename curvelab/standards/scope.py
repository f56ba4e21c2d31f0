"""Why a device is not checked, in words: silence must not read as a pass."""

from curvelab.devices.settings import written_ranges
from curvelab.records.device import Nameplate
from curvelab.units import written_current

_ISOLATES = "is a switch, not a protective device: no standard asks it to trip, and none of its checks can be met"


def unchecked(plate: Nameplate) -> str:
    """One sentence on a device that no rule applies to."""
    if plate.kind == "switch":
        carries = "its carrying rating is not given"
        if plate.rated_current_a is not None:
            carries = f"it carries {written_current(plate.rated_current_a, 'A')}"
        return f"'{plate.key}' {_ISOLATES}; {carries}. A protective device upstream has to protect it."
    words = [f"kind {plate.kind}"]
    if plate.characteristic:
        words.append(f"characteristic {plate.characteristic}")
    if plate.standard:
        words.append(plate.standard)
    if plate.rated_current_a is not None:
        words.append(written_current(plate.rated_current_a, "A"))
    settings = f" Its settings: {written_ranges(plate)}." if plate.settings else ""
    return f"'{plate.key}': no rule covers {', '.join(words)}; nothing is checked, so nothing is met.{settings}"
