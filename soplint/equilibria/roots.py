"""One root of a continuous function inside a bracket, in plain floats."""

from __future__ import annotations

from collections.abc import Callable

from soplint.equilibria.errors import UnreachableError


def bracketed_root(
    function: Callable[[float], float], low: float, high: float, tolerance: float = 1e-12
) -> float:
    """Root by the Illinois variant of false position, with bisection when it stalls.

    Parameters: function; low, high, where the signs differ; tolerance, width
    relative to the larger end.
    Returns: the root.
    Errors: UnreachableError when the signs do not differ.
    Reference: Dowell & Jarratt 1971, BIT 11, 168.

    >>> round(bracketed_root(lambda x: x * x - 2.0, 0.0, 2.0), 9)
    1.414213562
    """
    at_low, at_high = function(low), function(high)
    if at_low == 0.0:
        return low
    if at_high == 0.0:
        return high
    if (at_low > 0.0) == (at_high > 0.0):
        raise UnreachableError(f"no root between {low:g} and {high:g}", f"{low:g} to {high:g}")
    for count in range(200):
        width = high - low
        x = (low * at_high - high * at_low) / (at_high - at_low)
        if count % 4 == 3 or not low < x < high:
            x = 0.5 * (low + high)
        value = function(x)
        if value == 0.0 or width <= tolerance * max(abs(low), abs(high), 1e-300):
            return x
        if (value > 0.0) == (at_low > 0.0):
            low, at_low = x, value
            at_high *= 0.5 if count % 4 != 3 else 1.0
        else:
            high, at_high = x, value
            at_low *= 0.5 if count % 4 != 3 else 1.0
    return 0.5 * (low + high)
