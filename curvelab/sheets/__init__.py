"""A file and a page become a Sheet: pixels, exact strokes and words; every guard against hostile files is here."""
