"""Source text of a span, taken from the lines that a review keeps."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from soplint.intake.model import Span


def stretch(lines: tuple[str, ...], span: Span) -> str:
    """The characters of ``span``, line ends as "\\n"; what lies beyond the text is left out."""
    chosen = list(lines[span.line - 1 : span.end_line])
    if not chosen:
        return ""
    chosen[-1] = chosen[-1][: span.end_column - 1]
    chosen[0] = chosen[0][span.column - 1 :]
    return "\n".join(chosen)
