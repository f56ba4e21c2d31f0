"""What a sheet may cost: one table, chosen so that opening any file stays under 1 GB of memory and 30 s."""

FILE_BYTES = 220_000_000
"""Size of a file; a catalogue of some hundred pages is below."""

PIXELS = 72_000_000
"""Pixels of one image: A3 at 600 dpi (69.6 million) is just inside."""

FRAMES = 2_000
"""Pages of one TIFF file."""

RENDERED_PIXELS = 36_000_000
"""Pixels of a rendering for display: A4 at 600 dpi."""

STROKES = 200_000
"""Exact pieces of paths on one page; a dense log-log page has some hundreds."""

STROKE_POINTS = 1_000_000
"""Points of all strokes of one page together."""

CHARACTERS = 200_000
"""Characters of text on one page."""

NESTING = 64
"""Depth of forms within forms, groups within groups, and uses of uses."""

ELEMENTS = 400_000
"""Objects or elements visited on one page, counting each use of a repeated one."""

SVG_BYTES = 40_000_000
"""Size of an SVG file, whose text grows about tenfold when parsed."""

PAGE_BYTES = 700_000_000
"""Memory that a costly page of a PDF may take beside the program's own."""

PAGE_SECONDS = 20
"""Time that a costly page of a PDF may take to open."""
