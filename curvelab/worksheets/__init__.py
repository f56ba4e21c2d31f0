"""The text form of a worksheet: TOML read strictly, and written back so that it can be read again."""
