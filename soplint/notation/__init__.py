"""Read sentences, headings and table cells into typed phrases.

A lexicon turns characters into few typed terminals (quantities by dimension, names, commands, role
words), an LALR grammar says how they form phrases, and three short passes join neighbours and
give them their meaning.  The notation is described in ``grammar/README.md``.
"""

from soplint.notation.read import Reading, read_sentence

__all__ = ["Reading", "read_sentence"]
