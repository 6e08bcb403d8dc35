"""Installations drawn at random from the component tables: valid ones, and ones in which one thing is wrong."""

from __future__ import annotations

import copy
import random
from typing import TYPE_CHECKING

from drawn import Row, load
from strayline.components import ADAPTERS, CONNECTORS, EARTHINGS, SYSTEMS, WIRED
from strayline.devices import DEVICES

if TYPE_CHECKING:
    from collections.abc import Callable

SHORT = ("line_ohms", "neutral_ohms", "ground_ohms")


class _Boat:
    """One boat being drawn: rows so far, what the next part hangs on, how many lines are there, and a mark for its ids."""

    def __init__(self, draw: random.Random, source: str, lines: int, mark: str) -> None:
        self.draw, self.source, self.lines, self.mark = draw, source, lines, mark
        self.rows: list[Row] = []

    def chance(self, share: float) -> bool:
        return self.draw.random() < share

    def add(self, name: str, kind: str, **values: object) -> str:
        """Hang a part on the last one."""
        made = {"id": f"{name}{self.mark}", "kind": kind, "from": self.source, **values}
        if kind in ("cord", "inlet", "main", "panel", "breaker") and self.chance(0.3):
            made[self.draw.choice(SHORT)] = 10 ** self.draw.uniform(-3.3, -1)
        self.rows.append(made)
        self.source = str(made["id"])
        return self.source

    def across(self) -> str:
        """Two conductors that are there."""
        there = [f"L{number}" for number in range(1, self.lines + 1)]
        pairs = [f"{line}-N" for line in there] + [pair for pair in ("L1-L2", "L2-L3", "L1-L3") if set(pair.split("-")) <= set(there)]
        return self.draw.choice(pairs)

    def load(self, name: str, source: str, across: str) -> None:
        """A load of any kind."""
        size = self.draw.choice(
            [{"watts": self.draw.uniform(20, 3000)}, {"ohms": self.draw.uniform(8, 2000)}, {"amperes": self.draw.uniform(0.1, 20)}]
        )
        more: Row = {"power_factor": self.draw.uniform(0.3, 1), "filter_nf": self.draw.uniform(0.5, 200)} if self.chance(0.4) else {}
        made = load(f"{name}{self.mark}", across=across, element=self.chance(0.4), on=self.chance(0.8), **size, **more)
        self.rows.append(made | {"from": source, "switch_poles": self.draw.choice((1, 2))})

    def aboard(self) -> None:
        """Inlet to hull, with anything that may stand between."""
        self.add("cord", "cord", length_m=self.draw.uniform(3, 40))
        self.add("inlet", "inlet")
        if self.chance(0.25):
            self.add(
                "block", "isolator", style=self.draw.choice(("diode", "capacitor")), state=self.draw.choice(("auto", "blocks", "conducts"))
            )
        if self.lines < 3 and self.chance(0.25):
            secondary = self.draw.choice(("same", "split"))
            style = self.draw.choice(("isolation", "polarization"))
            self.add("winding", "transformer", style=style, secondary=secondary, shield=self.chance(0.7), bonded=self.chance(0.8))
            self.lines = 2 if self.lines == 2 or secondary == "split" else 1
        main = self.add("main", "main", device=self.draw.choice(list(DEVICES)), poles=self.draw.choice((1, 2)), closed=self.chance(0.9))
        if self.lines < 3 and self.chance(0.2):
            genset = {
                "id": f"genset{self.mark}",
                "kind": "generator",
                "lines": self.lines,
                "running": self.chance(0.5),
                "bonded": self.chance(0.7),
            }
            self.rows.append(genset)
            self.source = ""
            position = 2 if genset["running"] and self.chance(0.5) else 1
            self.add("switch", "transfer", position=position, switched_neutral=self.chance(0.5))
            self.rows[-1]["from"] = [main, genset["id"]]
        panel = self.add("panel", "panel")
        for number in range(self.draw.randint(1, 4)):
            across = self.across()
            source = panel
            if self.chance(0.6):
                self.source = panel
                device = self.draw.choice(list(DEVICES)) if self.chance(0.2) else "none"
                source = self.add(f"breaker{number}_", "breaker", poles=self.draw.choice((1, 2)), closed=self.chance(0.9), device=device)
            self.load(f"load{number}_", source, across)
        if self.chance(0.3):
            self.source = panel
            state = self.draw.choice(("passing", "inverting", "welded", "off"))
            unit = self.add("unit", "inverter", state=state, common_neutral=self.chance(0.6))
            self.load("oven", unit, "L1-N")
        self.source = panel
        self.add(
            "hull",
            "hull",
            afloat=self.chance(0.8),
            water=self.draw.choice(("fresh", "brackish", "salt")),
            material=self.draw.choice(("grp", "metal")),
        )


def valid(seed: int) -> list[Row]:
    """The parts of a valid installation: one to three boats on a dock of any supply."""
    draw = random.Random(seed)
    system = draw.choice(list(SYSTEMS))
    facts = SYSTEMS[system]
    rows: list[Row] = [{"id": "dock", "kind": "supply", "system": system}]
    if draw.random() < 0.4:
        rows[0]["earthing"] = draw.choice(EARTHINGS)
    shore = "dock"
    if draw.random() < 0.8:
        rows.append(
            {"id": "feeder", "kind": "feeder", "from": "dock", "device": draw.choice(list(DEVICES)), "length_m": draw.uniform(5, 200)}
        )
        shore = "feeder"
    fitting = [name for name, connector in CONNECTORS.items() if system in connector.volts]
    rows += [{"id": f"post{number}", "kind": "pedestal", "from": shore} for number in range(draw.randint(1, 2))]
    outlets: list[tuple[str, int]] = []
    for number in range(draw.randint(2, 4)):
        connector = draw.choice(fitting)
        rows.append({
            "id": f"outlet{number}", "kind": "receptacle", "from": draw.choice([row["id"] for row in rows if row["kind"] == "pedestal"]),
            "connector": connector, "leg": draw.choice(list(facts.lines)), "device": draw.choice(list(DEVICES)),
            "closed": draw.random() < 0.9, "reversed": draw.random() < 0.1,
        })  # fmt: skip
        outlets.append((f"outlet{number}", CONNECTORS[connector].lines))
    boats = draw.randint(1, 2)
    for number in range(boats):
        if outlets:
            rows += _plugged(draw, outlets, str(number))
    if draw.random() < 0.3:
        across = "L1-N" if facts.neutral else "L1-L2"
        rows.append(load("ashore", across=across, watts=draw.uniform(50, 900), filter_nf=20) | {"from": "post0"})
    draw.shuffle(rows)
    return rows


def _plugged(draw: random.Random, outlets: list[tuple[str, int]], mark: str) -> list[Row]:
    """One boat on one outlet, or on two through an adapter; the outlets it takes are gone."""
    first, lines = outlets.pop()
    if draw.random() < 0.5:
        return _hanging(draw, first, lines, mark)
    style = draw.choice(list(ADAPTERS))
    wiring, plugs = ADAPTERS[style].wiring, len(ADAPTERS[style].plugs) or 1
    if plugs > 1 and not outlets:
        return _hanging(draw, first, lines, mark)
    ends = [first, *([outlets.pop()[0]] if plugs > 1 else [])]
    made = {"id": f"adapter{mark}", "kind": "adapter", "style": style, "from": ends, "wired": draw.choice(WIRED)}
    lines = {"join": 2, "isolated": 2, "both": 2, "first": 1, "split": 1}.get(wiring, lines)
    source = f"adapter{mark}.{draw.choice('ab')}" if wiring == "split" else f"adapter{mark}"
    return [made, *_hanging(draw, source, lines, mark)]


def _hanging(draw: random.Random, source: str, lines: int, mark: str) -> list[Row]:
    boat = _Boat(draw, "" if draw.random() < 0.05 and "." not in source else source, lines, mark)
    if not boat.source:
        boat.lines = 1  # a loose plug has as many blades as its loads need
    boat.aboard()
    return boat.rows


# --- one thing wrong -----------------------------------------------------------------------------------------------


def _some(draw: random.Random, rows: list[Row], *kinds: str, key: str | None = None) -> Row | None:
    found = [row for row in rows if (not kinds or row["kind"] in kinds) and (key is None or key in row)]
    return draw.choice(found) if found else None


def _unknown_key(draw: random.Random, rows: list[Row]) -> bool:
    _some(draw, rows)["colour"] = "blue"  # type: ignore[index]
    return True


def _without_key(draw: random.Random, rows: list[Row]) -> bool:
    row = _some(draw, rows, "cord", "main", "panel", "breaker", "load", "receptacle", "feeder")
    if row is None:
        return False
    del row["from"]
    return True


def _wrong_type(draw: random.Random, rows: list[Row]) -> bool:
    row = _some(draw, rows, "cord", "pedestal", "inlet", "main", "panel")
    if row is None:
        return False
    row["line_ohms"] = draw.choice(["0.1 ohm", True, None, [1], [2, 1], {}, float("nan"), float("inf"), -1.0, 1e9])
    return True


def _zero_ohms(draw: random.Random, rows: list[Row]) -> bool:
    row = _some(draw, rows, "cord", "pedestal", "inlet", "main", "panel", "breaker", "receptacle")
    if row is None:
        return False
    row[draw.choice(SHORT)] = 0
    return True


def _named_twice(draw: random.Random, rows: list[Row]) -> bool:
    one, other = draw.sample(rows, 2)
    one["id"] = other["id"]
    return True


def _bad_name(draw: random.Random, rows: list[Row]) -> bool:
    _some(draw, rows)["id"] = draw.choice(["", "Cord", "9a", "a-b", "x" * 33, 7, None, "kabel å"])  # type: ignore[index]
    return True


def _to_nowhere(draw: random.Random, rows: list[Row]) -> bool:
    row = _some(draw, rows, "cord", "inlet", "main", "breaker")
    if row is None:
        return False
    row["from"] = "nowhere"
    return True


def _wrong_parent(draw: random.Random, rows: list[Row]) -> bool:
    row = _some(draw, rows, "main", "panel", "receptacle", "feeder")
    if row is None:
        return False
    hull = _some(draw, rows, "hull")
    row["from"] = hull["id"] if hull else "dock_"
    return True


def _mated_twice(draw: random.Random, rows: list[Row]) -> bool:
    cord = _some(draw, rows, "cord")
    if cord is None or not cord["from"]:
        return False
    rows.append({"id": "second_cord", "kind": "cord", "from": cord["from"]})
    return True


def _cycle(draw: random.Random, rows: list[Row]) -> bool:
    main = _some(draw, rows, "main")
    if main is None:
        return False
    main["from"] = main["id"]
    return True


def _wrong_choice(draw: random.Random, rows: list[Row]) -> bool:
    row, key = draw.choice(
        [(row, key) for row in rows for key in ("system", "connector", "style", "device", "across", "state", "kind") if key in row]
    )
    row[key] = draw.choice(["gold", 3, None, ["L1"], ""])
    return True


def _wrong_supply(draw: random.Random, rows: list[Row]) -> bool:
    supply, outlet = _some(draw, rows, "supply"), _some(draw, rows, "receptacle")
    if supply is None or outlet is None:
        return False
    region = SYSTEMS[supply["system"]].region
    outlet["connector"] = "16a_230v" if region == "60" else "30a_125v"
    return True


def _two_supplies(draw: random.Random, rows: list[Row]) -> bool:
    rows.append({"id": "grid", "kind": "supply", "system": draw.choice(list(SYSTEMS))})
    return True


def _two_sizes(draw: random.Random, rows: list[Row]) -> bool:
    row = _some(draw, rows, "load")
    if row is None:
        return False
    row.update({"watts": 100, "ohms": 10})
    return True


MUTATIONS: tuple[Callable[[random.Random, list[Row]], bool], ...] = (
    _unknown_key, _without_key, _wrong_type, _zero_ohms, _named_twice, _bad_name, _to_nowhere, _wrong_parent, _mated_twice, _cycle,
    _wrong_choice, _wrong_supply, _two_supplies, _two_sizes,
)  # fmt: skip


def invalid(seed: int) -> list[Row]:
    """The parts of a valid installation with one thing made wrong."""
    draw = random.Random(seed)
    while True:
        rows = copy.deepcopy(valid(draw.randrange(10**9)))
        if draw.choice(MUTATIONS)(draw, rows):
            return rows
