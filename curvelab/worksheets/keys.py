"""The keys of every table of a worksheet, in the order in which they are written."""

TOP = ("format", "document", "sheet", "axes", "curves", "devices", "accepted")
DOCUMENT = ("title", "issue", "date", "maker", "note")
SHEET = ("file", "page", "plot", "sha256")
AXES = ("current", "time", "let_through", "peak")
AXIS = ("scale", "unit", "factor", "direction", "marks")
MARK = ("at", "value", "unit")
TOLERANCE = ("tolerance_current", "tolerance_time", "tolerance_time_s")
CONDITIONS = ("start", "time_kind", "supply", "voltage_v", "frequency_hz", "ambient_c", "poles_loaded")
CURVE = (
    *("edge", "meaning", "element", "device", "devices", "through", "colour", "avoid", "at"),
    *CONDITIONS,
    *TOLERANCE,
    *("base", "points", "source"),
)
NAMEPLATE_TEXTS = ("characteristic", "standard", "standard_edition")
NAMEPLATE_REST = (
    *("residual_waveform", "residual_delay", "rated_voltage_v", "poles", "frequency_hz", "ambient_reference_c"),
    *("utilisation_category", "maker", "series", "catalogue"),
)
DEVICE = (
    *("key", "kind", *NAMEPLATE_TEXTS, "rated_current_a", "ratings", "rated_residual_current_a", *NAMEPLATE_REST),
    *TOLERANCE,
    *("breaking", "settings", "derating"),
)
BREAKING = ("quantity", "value_a", "voltage_v", "supply", "duration_s")
SETTING = ("from", "to", "steps", "base", "at", "off")
DERATING = ("ambient_c", "factor", "element")
ACCEPTED = ("code", "place", "reason", "name")
