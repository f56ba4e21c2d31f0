"""Keeps devices and what led to them in one SQLite file, revision by revision; the only room that opens a database."""
