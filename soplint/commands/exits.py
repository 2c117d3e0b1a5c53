"""The exit codes; the higher wins."""

from __future__ import annotations

NOT_HELD = 0
HELD = 1
NOT_REVIEWED = 2  # usage, configuration, unreadable file, folder without procedures
FAULT = 3  # in soplint itself
INTERRUPTED = 130  # by the user, as shells count it
