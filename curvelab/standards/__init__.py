"""Checks of a device against the rule tables of published standards; every number stands in a table, none in code."""
