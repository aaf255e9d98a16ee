"""Combinations, limits and named stations: do they ask for something that is there."""

from __future__ import annotations

from collections.abc import Iterator

from fishbelly.member.description import Limit
from fishbelly.member.draft import Draft, Path, Problem, one_of, within
from fishbelly.member.laws import Law


def question_problems(draft: Draft) -> Iterator[Problem]:
    """Find problems of stations, combinations, limits and the camber."""
    for i, station in enumerate(draft.stations):
        if station is not None:
            yield from within(draft, station.at, ("station", i, "at"))
    for i, combination in enumerate(draft.combinations):
        if combination is None:
            continue
        yield from one_of(combination.purpose, ("deflection", "strength"), ("combination", i, "for"))
        for case, share in combination.sustained.items():
            if not 0.0 <= share <= 1.0:
                yield Problem(("combination", i, "sustained", case), "a share from 0 to 1", f"{share:g}")
    spans = existing_spans(draft)
    if not draft.supports and any(_needs_span(limit) for limit in draft.limits if limit is not None):
        # the cause alone: what every such limit would say is its consequence
        yield Problem(("support",), "", "limits on spans need supports that hold down")
        spans = None
    for i, limit in enumerate(draft.limits):
        if limit is not None:
            yield from _limit(draft, limit, ("limit", i), spans)
            if limit.net and draft.camber is None:
                yield Problem(("limit", i, "net"), "a job with `camber`, which `net` subtracts", "none")
    if isinstance(draft.camber, Law) and draft.camber.knots.size:
        yield from within(draft, float(draft.camber.knots[0]), ("camber",), "ordinates")
        yield from within(draft, float(draft.camber.knots[-1]), ("camber",), "ordinates")


def existing_spans(draft: Draft) -> tuple[int | str, ...] | None:
    """Return the spans between supports that hold down and the overhangs; None where that is not known."""
    if draft.length is None or any(s is None for s in draft.supports):
        return None
    places: list[float] = []
    for x in sorted(s.at for s in draft.supports if s is not None and s.down > 0.0):
        if not places or x - places[-1] > draft.slack:
            places.append(x)
    if not places:
        return ()
    spans: list[int | str] = ["left"] if places[0] > draft.slack else []
    spans += range(1, len(places))
    return (*spans, "right") if places[-1] < draft.length - draft.slack else tuple(spans)


def _needs_span(limit: Limit) -> bool:
    """Whether a limit is one on spans or overhangs."""
    shares = limit.span_over is not None or limit.cantilever_over is not None
    return limit.at is None and (shares or limit.spans is not None)


def _limit(draft: Draft, limit: Limit, path: Path, spans: tuple[int | str, ...] | None) -> Iterator[Problem]:
    given = [k for k in ("span_over", "absolute", "slope") if getattr(limit, k) is not None]
    alone = not given and limit.cantilever_over is not None
    if len(given) != 1 and not alone:
        found = " and ".join(f"`{k}`" for k in given)
        yield Problem(path, "one of `span_over`, `absolute` and `slope`", found)
    for key in ("span_over", "absolute", "slope", "cantilever_over", "cap"):
        value = getattr(limit, key)
        if value is not None and value <= 0.0:
            yield Problem((*path, key), "a number above 0", f"{value:g}")
    if limit.cantilever_over is not None and ("absolute" in given or "slope" in given):
        yield Problem((*path, "cantilever_over"), "", "it goes with `span_over` only")
    if limit.cap is not None and limit.span_over is None and limit.cantilever_over is None:
        yield Problem((*path, "cap"), "", "it goes with `span_over` or `cantilever_over` only")
    yield from one_of(limit.of, ("down", "up", "across", "resultant"), (*path, "of"))
    if limit.at is not None:
        if limit.span_over is not None or limit.cantilever_over is not None:
            yield Problem((*path, "at"), "", "a limit at a station needs `absolute` or `slope`: a station has no span")
        if limit.spans is not None or limit.start is not None or limit.end is not None:
            yield Problem((*path, "at"), "", "either `at`, or `span`, or `from` and `to`")
    for key, x in (("from", limit.start), ("to", limit.end)):
        if x is not None:
            yield from within(draft, x, (*path, key))
    if limit.start is not None and limit.end is not None and limit.end < limit.start:
        yield Problem((*path, "to"), f"a place beyond the start at {limit.start:.6g} m", f"{limit.end:.6g} m")
    if spans is not None:
        yield from _spans(limit, path, spans)


def _spans(limit: Limit, path: Path, spans: tuple[int | str, ...]) -> Iterator[Problem]:
    known = ", ".join(f'"{s}"' if isinstance(s, str) else str(s) for s in spans) or "none"
    for span in limit.spans or ():
        if span not in spans:
            shown = f'"{span}"' if isinstance(span, str) else str(span)
            yield Problem((*path, "span"), f"a span of this member ({known})", shown)
    only_overhangs = limit.cantilever_over is not None and limit.span_over is None
    if only_overhangs and spans and not {"left", "right"} & set(limit.spans or spans):
        yield Problem(
            (*path, "cantilever_over"), "an overhang, or `span_over` beside it", "spans between supports only"
        )
    if not spans and limit.at is None and (limit.span_over is not None or limit.cantilever_over is not None):
        yield Problem(path, "supports that hold down, for a limit on spans", "none")
