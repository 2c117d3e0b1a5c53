"""The command line, one module per command.

Each command module has ``run(arguments) -> int``, which returns the exit code: 0 nothing at or
above the hold level, 1 held, 2 something could not be reviewed, 3 fault in soplint; the higher
wins.  Findings go to standard output, messages to standard error.  The command line is read by
``arguments`` rather than argparse, whose import takes as long as starting Python.
"""
