"""Version of the program, the only place it is written."""

VERSION = "0.2.0"
