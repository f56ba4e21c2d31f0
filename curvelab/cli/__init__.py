"""The command line: each command is one call of a room below, shown."""
