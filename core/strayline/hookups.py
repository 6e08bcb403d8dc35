"""Every way to connect one boat to one dock with the cords and adapters at hand: what may be plugged into what. It knows no ohms.

A feed leads from receptacles through at most two adapters and exactly one cord to an inlet, and every mating in it exists: the plug is
one that the outlet takes (components.CONNECTORS, `accepts`). A combining Y takes two feeds, a splitting Y gives two. Parts that are alike
in all but their name are not exchanged for each other, so that no way comes twice.
"""

from __future__ import annotations

import heapq
import itertools
from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.components import ADAPTERS, ASHORE, CONNECTORS, LINES, SYSTEMS
from strayline.contexts import raw_rows
from strayline.parts import Installation, Part, base, read

if TYPE_CHECKING:
    from collections.abc import Iterator

MAX_ADAPTERS = 2  # in one feed
MAX_COUNTED = 100_000  # ways counted before the count is called a least number
LOOSE_ENDS = ("cord", "adapter")
HOMEMADE = "homemade"

Links = dict[str, tuple[str, ...]]  # plugged part -> the ends it hangs on


@dataclass(frozen=True, slots=True)
class Hookup:
    """One way to connect: each plugged part with the ends it hangs on, in order from shore to boat.

    present -- the boat is connected like this now
    forced  -- the parts whose plug does not belong where it is (only ever the present way)
    """

    links: tuple[tuple[str, tuple[str, ...]], ...]
    present: bool = False
    forced: tuple[str, ...] = ()

    def receptacles(self, installation: Installation) -> tuple[Part, ...]:
        """The shore receptacles this way draws on."""
        ends = [end for _, parents in self.links for end in parents if end]
        return tuple(part for part in installation.of_kind("receptacle") if part.id in ends)


@dataclass(frozen=True, slots=True)
class Kit:
    """What one boat brings and finds.

    aboard      -- the ids of the boat's fixed parts, inlets among them
    inlets      -- the parts with a plug of the boat's own
    loose       -- the cords and adapters that may be re-plugged
    receptacles -- the shore receptacles that are free, or taken by this boat now
    plugs       -- part id -> the connector of each of its plugs
    outlets     -- part id -> the connector of each of its outlets
    assumed     -- part id -> the connector taken for it because nobody said and nothing shows it
    """

    aboard: frozenset[str]
    inlets: tuple[Part, ...]
    loose: tuple[Part, ...]
    receptacles: tuple[Part, ...]
    plugs: dict[str, tuple[str, ...]]
    outlets: dict[str, tuple[str, ...]]
    assumed: dict[str, str]


# --- whose is what -------------------------------------------------------------------------------------------------


def kit(installation: Installation) -> Kit:
    """The kit of the first panel's boat (of the first inlet's where no boat has a panel)."""
    aboard = _aboard(installation)
    inlets = tuple(part for part in installation.parts if part.id in aboard and _has_own_plug(part, installation))
    loose = tuple(part for part in installation.of_kind(*LOOSE_ENDS) if _is_ours(part, installation, aboard))
    ours = {part.id for part in loose} | aboard
    receptacles = tuple(
        part for part in installation.of_kind("receptacle") if all(child.id in ours for child in installation.children(part.id))
    )
    plugs: dict[str, tuple[str, ...]] = {}
    outlets: dict[str, tuple[str, ...]] = {part.id: (part.text("connector"),) for part in installation.of_kind("receptacle")}
    assumed: dict[str, str] = {}
    for part in (*loose, *inlets):
        if part.kind == "adapter" and part.text("style") != HOMEMADE:
            adapter = ADAPTERS[part.text("style")]
            plugs[part.id], outlets[part.id] = adapter.plugs, adapter.outlets
    for part in (*loose, *inlets):
        if part.kind != "adapter":
            found, sure = _connector(part, installation, plugs, outlets)
            plugs[part.id] = outlets[part.id] = (found,)
            if not sure:
                assumed[part.id] = found
    for part in loose:
        if part.kind == "adapter" and part.id not in plugs:
            _fit_homemade(part, installation, plugs, outlets)
    return Kit(aboard, inlets, loose, receptacles, plugs, outlets, assumed)


def _aboard(installation: Installation) -> frozenset[str]:
    """The fixed parts of the boat, and of no other: all that hangs together without the dock, by her own cords too."""
    panels = installation.of_kind("panel") or installation.of_kind("inlet")
    if not panels:
        return frozenset()
    found, waiting = {panels[0].id}, [panels[0].id]
    while waiting:
        part = installation.part(waiting.pop())
        near = [*installation.children(part.id), *(installation.part(base(parent)) for parent in part.parents if parent)]
        new = [one.id for one in near if one.kind not in ("receptacle", *ASHORE) and one.id not in found]
        found.update(new)
        waiting += new
    return frozenset(part_id for part_id in found if installation.part(part_id).kind not in LOOSE_ENDS)


def _has_own_plug(part: Part, installation: Installation) -> bool:
    """Whether a fixed part is where the boat is plugged in: an inlet, or what hangs on a cord in its place."""
    return part.kind == "inlet" or any(parent and installation.part(base(parent)).kind in LOOSE_ENDS for parent in part.parents)


def _is_ours(part: Part, installation: Installation, aboard: frozenset[str]) -> bool:
    """Whether a cord or adapter is this boat's: nobody else's inlet hangs on it."""
    below = [one for one in installation.downstream(part.id) if installation.part(one).kind not in LOOSE_ENDS]
    return all(one in aboard for one in below)


def _connector(
    part: Part, installation: Installation, plugs: dict[str, tuple[str, ...]], outlets: dict[str, tuple[str, ...]]
) -> tuple[str, bool]:
    """The connector of a cord or inlet, and whether it is known: stated, else of what it hangs on, else of what it feeds."""
    if part.values.get("connector") is not None:
        return part.text("connector"), True
    for parent in part.parents:
        if base(parent) in outlets:
            offered = outlets[base(parent)]
            return offered[-1 if parent.endswith(".b") else 0], True
    for child in installation.children(part.id):
        if child.id in plugs:
            return plugs[child.id][[base(parent) for parent in child.parents].index(part.id)], True
        if child.values.get("connector") is not None:
            return child.text("connector"), True
    return _usual(part, installation), False


def _usual(part: Part, installation: Installation) -> str:
    """The commonest connector that brings the lines which the loads behind a part need."""
    system = SYSTEMS[installation.of_kind("supply")[0].text("system")]
    below = [installation.part(part_id) for part_id in installation.downstream(part.id)]
    wide = any(line in one.text("across") for one in below if one.kind == "load" for line in LINES[1:])
    if system.hertz == 50.0:
        return "32a_400v" if wide else "16a_230v"
    return "50a_125_250v" if wide else "30a_125v"


def _fit_homemade(part: Part, installation: Installation, plugs: dict[str, tuple[str, ...]], outlets: dict[str, tuple[str, ...]]) -> None:
    """A home-made adapter has the ends that it now shows by being plugged; one in the locker shows none and fits nowhere."""
    children = installation.children(part.id)
    if not children or not all(part.parents):
        return
    plugs[part.id] = tuple(outlets[base(parent)][-1 if parent.endswith(".b") else 0] for parent in part.parents if base(parent) in outlets)
    outlets[part.id] = tuple(plugs[child.id][0] for child in children if child.id in plugs)


# --- what goes into what -------------------------------------------------------------------------------------------


def mates(plug: str, outlet: str) -> bool:
    """Whether a plug goes into an outlet without force."""
    return plug in CONNECTORS[outlet].accepts


@dataclass(frozen=True, slots=True)
class _Feed:
    """An end that is fed: its links, the ends that are taken by it, and how many cords and adapters lie before it."""

    end: str
    links: Links
    taken: frozenset[str]
    cords: int
    adapters: int


class _Search:
    """The feeds that the parts of a kit can make, in a fixed order: fewest adapters first, parts in the order of the installation."""

    def __init__(self, own: Kit, marked: frozenset[str]) -> None:
        self.kit = own
        self.cords = [part for part in own.loose if part.kind == "cord"]
        self.adapters = [part for part in own.loose if part.kind == "adapter" and part.id in own.plugs]
        self.alike = {part.id: part.id if part.id in marked else _likeness(part, own) for part in (*own.loose, *own.receptacles)}
        self.place = {part.id: number for number, part in enumerate(own.receptacles)}

    def _distinct(self, parts: list[Part] | tuple[Part, ...], taken: frozenset[str]) -> list[Part]:
        """The free parts, and of those that are alike only the first."""
        seen: set[object] = set()
        free = []
        for part in parts:
            if part.id not in taken and self.alike[part.id] not in seen:
                seen.add(self.alike[part.id])
                free.append(part)
        return free

    def feeds(self, plug: str, before: _Feed, cords: int, adapters: int) -> Iterator[_Feed]:
        """Every feed for a plug, given what `before` has taken, with at most so many cords and adapters still to come."""
        taken, links = before.taken, before.links
        for part in self._distinct(self.kit.receptacles, taken):
            if mates(plug, self.kit.outlets[part.id][0]):
                yield _Feed(part.id, links, taken | {part.id}, 0, 0)
        for part in self._distinct(self.cords, taken) if cords else ():
            if mates(plug, self.kit.outlets[part.id][0]):
                for feed in self.feeds(self.kit.plugs[part.id][0], _Feed("", links, taken | {part.id}, 0, 0), cords - 1, adapters):
                    yield _Feed(part.id, {**feed.links, part.id: (feed.end,)}, feed.taken, feed.cords + 1, feed.adapters)
        yield from self._second_tails(plug, before, cords, adapters)
        for part in self._distinct(self.adapters, taken) if adapters else ():
            for tail, outlet in zip(_tails(part.id, self.kit), self.kit.outlets[part.id], strict=True):
                if mates(plug, outlet):
                    start = _Feed("", links, taken | {part.id, tail}, 0, 0)
                    for feed in self._joined(part, start, cords, adapters - 1):
                        yield _Feed(tail, feed.links, feed.taken, feed.cords, feed.adapters + 1)

    def _second_tails(self, plug: str, before: _Feed, cords: int, adapters: int) -> Iterator[_Feed]:
        """The free tail of a splitting Y that is in use already."""
        for part in self.adapters:
            if part.id in before.links and len(self.kit.outlets[part.id]) > 1:
                depth = self._depth(part.id, before.links)
                for tail, outlet in zip(_tails(part.id, self.kit), self.kit.outlets[part.id], strict=True):
                    if tail not in before.taken and mates(plug, outlet) and depth[0] <= cords and depth[1] <= adapters:
                        yield _Feed(tail, before.links, before.taken | {tail}, *depth)

    def _joined(self, part: Part, before: _Feed, cords: int, adapters: int) -> Iterator[_Feed]:
        """Every way to feed all plugs of an adapter; two receptacles that are exchanged under one Y are one way."""
        plugs = self.kit.plugs[part.id]
        for first in self.feeds(plugs[0], before, cords, adapters):
            if len(plugs) == 1:
                yield _Feed("", {**first.links, part.id: (first.end,)}, first.taken, first.cords, first.adapters)
                continue
            for second in self.feeds(plugs[1], first, cords, adapters):
                if first.cords != second.cords or (
                    first.end in self.place and second.end in self.place and self.place[second.end] < self.place[first.end]
                ):
                    continue
                links = {**second.links, part.id: (first.end, second.end)}
                yield _Feed("", links, second.taken, first.cords, max(first.adapters, second.adapters))

    def _depth(self, part_id: str, links: Links) -> tuple[int, int]:
        """How many cords and adapters lie on the longest way from the dock to a plugged part's outlet, its own included."""
        above = [self._depth(base(end), links) for end in links.get(part_id, ()) if base(end) in links]
        cords, adapters = max((one[0] for one in above), default=0), max((one[1] for one in above), default=0)
        is_cord = any(part.id == part_id for part in self.cords)
        return (cords + 1, adapters) if is_cord else (cords, adapters + 1)

    def shape(self, links: Links) -> object:
        """What is plugged into what, in terms of likeness: equal for two ways that differ only in which of two like parts they use."""

        def shape_of(end: str) -> object:
            part_id, _, tail = end.partition(".")
            return self.alike.get(part_id, part_id), tail, tuple(shape_of(above) for above in links.get(part_id, ()))

        return tuple((inlet.id, shape_of(inlet.id)) for inlet in self.kit.inlets if inlet.id in links)

    def ways(self, inlets: tuple[Part, ...], before: _Feed) -> Iterator[Links]:
        """Every way to feed these inlets, each used or left out."""
        if not inlets:
            if before.links:
                yield before.links
            return
        first, rest = inlets[0], inlets[1:]
        for feed in self.feeds(self.kit.plugs[first.id][0], before, 1, MAX_ADAPTERS):
            if feed.cords == 1:
                yield from self.ways(rest, _Feed("", {**feed.links, first.id: (feed.end,)}, feed.taken, 0, 0))
        if first.kind == "inlet":
            yield from self.ways(rest, before)


def _likeness(part: Part, own: Kit) -> object:
    """What makes two parts one and the same for whoever plugs: all but the name, and of a receptacle its pedestal too."""
    values = tuple((name, value) for name, value in part.values.items() if part.kind == "receptacle" or name != "from")
    return part.kind, values, own.plugs.get(part.id), own.outlets.get(part.id)


def _tails(part_id: str, own: Kit) -> tuple[str, ...]:
    return (part_id,) if len(own.outlets[part_id]) == 1 else (f"{part_id}.a", f"{part_id}.b")


def _present(installation: Installation, own: Kit) -> Hookup | None:
    """How the boat is connected now; None where no inlet of it reaches a receptacle."""
    plugged = [part for part in (*own.loose, *own.inlets) if part.parents and all(part.parents) and _on_shore(part, installation)]
    if not any(part in own.inlets for part in plugged):
        return None
    above: set[str] = set()
    waiting = [part.id for part in plugged if part in own.inlets]
    while waiting:
        part_id = waiting.pop()
        above.add(part_id)
        waiting += [base(parent) for parent in installation.part(part_id).parents]
    used = [part for part in plugged if part.id in above]
    forced = [part.id for part in used if not _fits(part, own)]
    return Hookup(tuple((part.id, part.parents) for part in used), present=True, forced=tuple(forced))


def _on_shore(part: Part, installation: Installation) -> bool:
    return part.kind == "receptacle" or (
        bool(part.parents) and all(p and _on_shore(installation.part(base(p)), installation) for p in part.parents)
    )


def _fits(part: Part, own: Kit) -> bool:
    """Whether each plug of a part belongs where it is; a home-made adapter's own ends fit wherever it was made to fit."""
    if part.id not in own.plugs or len(own.plugs[part.id]) != len(part.parents):
        return False
    offered = [own.outlets.get(base(parent), ())[-1 if parent.endswith(".b") else 0 :] for parent in part.parents]
    return all(offer and mates(plug, offer[0]) for plug, offer in zip(own.plugs[part.id], offered, strict=True))


@dataclass(frozen=True, slots=True)
class Hookups:
    """The ways that were kept, best guesses first, and how many there are in all (at least so many where `more`)."""

    kept: tuple[Hookup, ...]
    counted: int
    more: bool


def hookups(installation: Installation, own: Kit, most: int, marked: frozenset[str] = frozenset()) -> Hookups:
    """At most `most` ways to connect, the present one first, then those with fewer adapters and more inlets in use.

    `marked` are parts that are like no other although they look it: those that a fault is in.
    """
    search = _Search(own, marked)
    now = _present(installation, own)
    shape = search.shape(dict(now.links)) if now else None
    counted = 0

    def found() -> Iterator[tuple[tuple[int, int, int], Links]]:
        nonlocal counted
        for links in itertools.islice(search.ways(own.inlets, _Feed("", {}, frozenset(), 0, 0)), MAX_COUNTED + 1):
            if search.shape(links) == shape:
                continue  # the present way stands first, with the very parts it uses
            counted += 1
            adapters = sum(installation.part(part_id).kind == "adapter" for part_id in links)
            inlets = sum(inlet.id in links for inlet in own.inlets)
            yield (adapters, -inlets, counted), links

    best = heapq.nsmallest(most - bool(now), found(), key=lambda pair: pair[0])
    ways = [Hookup(tuple(links.items())) for _, links in best]
    return Hookups((*((now,) if now else ()), *ways), counted + bool(now), counted > MAX_COUNTED - 1)


def connected(installation: Installation, own: Kit, hookup: Hookup) -> Installation:
    """The installation with the boat connected in this way, every switch and breaker of hers and of her outlets closed and every load on.

    What is not used lies in the locker; an inlet that is not used has bare pins.
    """
    links = dict(hookup.links)
    stowed = {part.id for part in own.loose if part.id not in links}
    outlets = {part.id for part in hookup.receptacles(installation)}
    changed = []
    for part_id, row in raw_rows(installation).items():
        part = installation.part(part_id)
        if part_id in stowed:
            continue
        if part_id in links:
            row["from"] = list(links[part_id]) if part.kind == "adapter" else links[part_id][0]
        elif part.kind == "inlet" and part_id in own.aboard:
            row["from"] = ""
        if part_id in own.aboard and part.kind == "load":
            row["on"] = True
        if (part_id in own.aboard or part_id in outlets) and "closed" in row:
            row["closed"] = True
        changed.append(row)
    return read({"parts": changed})
