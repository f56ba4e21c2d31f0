"""Words and numbers printed on a sheet, read from its pixels or taken from its file; what they label is not asked."""
