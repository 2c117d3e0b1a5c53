"""Reviews sources one by one or over several processes; one bad file never stops the others."""

from __future__ import annotations

import os
from typing import TYPE_CHECKING

from soplint.commands.messages import fault, say
from soplint.commands.sources import Source, Unopened, content
from soplint.findings.model import Review
from soplint.reports.outcome import NotReviewed

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from soplint.settings import Settings

MANY = 30  # files; below that, starting processes costs more than it saves


def review_source(source: Source, settings: Settings) -> Review | NotReviewed:
    """The review of one source, or why there is none."""
    try:
        data = content(source)
    except Unopened as refused:
        return NotReviewed(source.name, str(refused))
    try:
        from soplint.intake import Unreadable
        from soplint.review import review_bytes

        try:
            return review_bytes(data, source.name, settings)
        except Unreadable as refused:
            return NotReviewed(source.name, str(refused))
    except Exception as error:
        return NotReviewed(source.name, fault(error, source.name), fault=True)


def review_all(
    sources: list[Source], settings: Settings, workers: int | None
) -> Iterator[Review | NotReviewed]:
    """The reviews in the order of the sources.

    ``workers`` None: one process up to ``MANY`` files, above that one per core.  Standard input is
    read here, since other processes have another one.
    """
    if workers is None:
        workers = _cores() if len(sources) > MANY else 1
    workers = min(workers, len(sources))
    if workers <= 1 or any(source.path is None for source in sources):
        for source in sources:
            yield review_source(source, settings)
    else:
        yield from _spread(review_source, sources, settings, workers)


def _spread(
    function: Callable[[Source, Settings], Review | NotReviewed],
    sources: list[Source],
    settings: Settings,
    workers: int,
) -> Iterator[Review | NotReviewed]:
    """``function`` of each source over ``workers`` processes, results in order."""
    from concurrent.futures import ProcessPoolExecutor
    from multiprocessing import get_context

    with ProcessPoolExecutor(workers, mp_context=get_context("spawn")) as pool:
        try:
            waiting = [pool.submit(function, source, settings) for source in sources]
            for source, future in zip(sources, waiting, strict=True):
                try:
                    yield future.result()
                except Exception as error:  # the process ended, or its result cannot travel
                    yield NotReviewed(source.name, fault(error, source.name), fault=True)
        finally:
            pool.shutdown(wait=False, cancel_futures=True)


def say_missed(missed: NotReviewed) -> None:
    """The message for a path that was not reviewed; a fault has had its own already."""
    if not missed.fault:
        say(missed.reason, missed.path)


def _cores() -> int:
    if hasattr(os, "sched_getaffinity"):
        return len(os.sched_getaffinity(0))
    return os.cpu_count() or 1
