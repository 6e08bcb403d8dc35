"""Installations drawn at random: boats as they are, whatever the tables of components allow, and ones in which one thing is wrong."""

from __future__ import annotations

import copy
import math
import random
import re
from typing import TYPE_CHECKING

from drawn import Row, load
from strayline.components import (
    ACROSS,
    ADAPTERS,
    CHOICE,
    CONNECTORS,
    EARTHINGS,
    FLAG,
    KINDS,
    MAY_BE_LOOSE,
    NUMBER,
    PARENTS,
    REFERENCES,
    REQUIRED,
    SYSTEMS,
    WIRED,
    Parameter,
)
from strayline.devices import DEVICES
from strayline.errors import CaseError
from strayline.installation import build
from strayline.parts import base, read

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


# --- whatever the tables allow -------------------------------------------------------------------------------------

ONE_PLUG = ("receptacle", "cord", "adapter", "inlet")  # take one plug
SIZES = ("ohms", "watts", "amperes")
BAND = ("non_operating_ma", "operating_ma")
BOUND = {"from", *BAND, *SIZES}  # parameters that are not free of each other or of other parts
# How often a kind is drawn: what stands near the loads needs much before it.
WEIGHTS = {"cord": 3, "inlet": 3, "main": 3, "panel": 3, "breaker": 3, "load": 6, "hull": 2}


def allowed(seed: int, *, any_ohms: bool = True) -> list[Row]:
    """Parts hung on whatever may carry them, in any number, with any value of any parameter in its range.

    What nothing brings conductors to is left out. `any_ohms` lets conductors have any resistance that a case may state, from a nanoohm to
    a megohm; else they are ordinary ones.
    """
    draw = random.Random(seed)
    system = draw.choice(list(SYSTEMS))
    rows: list[Row] = [{"id": "dock", "kind": "supply", "system": system}]
    stated = draw.choice((0.0, 0.05, 0.3))  # share of the parameters that are stated
    kinds = [kind for kind in KINDS if kind != "supply" for _ in range(WEIGHTS.get(kind, 1))]
    taken: set[str] = set()
    for number in range(draw.randint(8, 50)):
        kind = ("pedestal", "receptacle")[number] if number < 2 else draw.choice(kinds)
        row: Row = {"id": f"{kind}{number}", "kind": kind}
        if kind == "adapter":
            row["style"] = draw.choice(list(ADAPTERS))
        if kind == "receptacle":
            row["connector"] = draw.choice([name for name, connector in CONNECTORS.items() if system in connector.volts])
            row["leg"] = draw.choice(list(SYSTEMS[system].lines))
        if _hung(draw, row, rows, taken):
            _stated(draw, row, stated, any_ohms=any_ohms)
            rows.append(row)
    _stated(draw, rows[0], stated, any_ohms=any_ohms)
    return _brought(rows)


def _hung(draw: random.Random, row: Row, rows: list[Row], taken: set[str]) -> bool:
    """Hang a part on as many others as it wants; False where they are not there."""
    kind = row["kind"]
    hook = next((one for one in KINDS[kind] if one.name == "from"), None)
    if hook is None:
        return True
    wanted = {"transfer": 2, "panel": draw.choice((1, 1, 2)), "hull": draw.choice((1, 1, 2))}.get(kind, 1)
    if kind == "adapter":
        wanted = len(ADAPTERS[row["style"]].plugs) or draw.choice((1, 2))
    ends = [end for one in rows if one["kind"] in PARENTS[kind] for end in _ends(one) if end not in taken]
    loose = kind in MAY_BE_LOOSE and (len(ends) < wanted or draw.random() < 0.1)
    if len(ends) < wanted and not loose:
        return False
    chosen = draw.sample(ends, wanted) if len(ends) >= wanted else [""] * wanted
    if loose:
        chosen[0] = ""
    row["from"] = chosen if hook.type == REFERENCES else chosen[0]
    plugs = {one["id"] for one in rows if one["kind"] in ONE_PLUG}
    taken.update(end for end in chosen if base(end) in plugs)
    return True


def _ends(row: Row) -> list[str]:
    split = row["kind"] == "adapter" and ADAPTERS[row["style"]].wiring == "split"
    return [f"{row['id']}.a", f"{row['id']}.b"] if split else [row["id"]]


def _stated(draw: random.Random, row: Row, share: float, *, any_ohms: bool) -> None:
    """State some of a part's parameters, and one size of a load."""
    parameters = {one.name: one for one in KINDS[row["kind"]]}
    if row["kind"] == "load":
        size = draw.choice(SIZES)
        row[size] = math.exp(draw.uniform(math.log(parameters[size].low), math.log(parameters[size].high)))
        row["across"] = draw.choice(("L1-N", *ACROSS))
    for name, parameter in parameters.items():
        if name not in BOUND and name not in row and (parameter.default is REQUIRED or draw.random() < share):
            row[name] = _value(draw, parameter, any_ohms=any_ohms)
    if "device" in parameters and draw.random() < share:
        row.update(zip(BAND, sorted(10 ** draw.uniform(-1, 5) for _ in BAND), strict=True))


def _value(draw: random.Random, parameter: Parameter, *, any_ohms: bool) -> object:
    """Any value of a parameter; sizes evenly by their logarithm, now and then the least or the greatest, a range, or unknown."""
    if parameter.type == FLAG:
        return draw.random() < 0.6
    if parameter.type == CHOICE:
        return draw.choice(parameter.choices)
    assert parameter.type == NUMBER
    if parameter.whole:
        return draw.randint(int(parameter.low), int(parameter.high))
    if parameter.low <= 0:
        return draw.choice((parameter.low, draw.uniform(parameter.low, parameter.high)))
    low, high = parameter.low, parameter.high
    if low < 1e-6 and not (any_ohms and draw.random() < 0.3):  # a conductor's ohms
        low, high = 5e-4, 1.0
    low, high = math.log(low), math.log(high)
    one, other = sorted(min(max(math.exp(draw.uniform(low, high)), parameter.low), parameter.high) for _ in range(2))
    return draw.choice((one, one, one, other, parameter.high if any_ohms else one, [one, other] if one < other else one, "unknown"))


def _brought(rows: list[Row]) -> list[Row]:
    """The parts without those to which nothing brings the conductors they need, and without what hangs on these."""
    while True:
        try:
            build(read({"parts": rows}))
        except CaseError as error:
            if not re.search(r"nothing brings|this panel has no|a transformer takes one line or two", error.rule):
                raise
            number = int(error.where.partition("[")[2].partition("]")[0])
            gone = {rows[number]["id"]}
            for row in rows:  # a part always stands after what it hangs on
                if any(base(parent) in gone for parent in parents(row)):
                    gone.add(row["id"])
            rows = [row for row in rows if row["id"] not in gone]
        else:
            return rows


def parents(row: Row) -> list[str]:
    """What a row hangs on."""
    hung = row.get("from", [])
    return [hung] if isinstance(hung, str) else list(hung)


# --- one thing wrong -----------------------------------------------------------------------------------------------

# What a mutation did: the row that it broke (None: the list), the key of that row ("" where it is the row itself), and words of the rule.
Broken = tuple["Row | None", str, str]


def _some(draw: random.Random, rows: list[Row], *kinds: str) -> Row | None:
    found = [row for row in rows if not kinds or row["kind"] in kinds]
    return draw.choice(found) if found else None


def _hanging_on_one(draw: random.Random, rows: list[Row]) -> Row | None:
    found = [row for row in rows if isinstance(row.get("from"), str) and row["from"]]
    return draw.choice(found) if found else None


def _unknown_key(draw: random.Random, rows: list[Row]) -> Broken:
    row = draw.choice(rows)
    row["colour"] = "blue"
    return row, "colour", "unknown key for a"


def _without_key(draw: random.Random, rows: list[Row]) -> Broken:
    row = draw.choice([row for row in rows if "from" in row])
    del row["from"]
    return row, "from", "missing"


def _without_choice(draw: random.Random, rows: list[Row]) -> Broken:
    row, key = draw.choice([
        (row, one.name) for row in rows for one in KINDS[row["kind"]] if one.default is REQUIRED and one.type == CHOICE
    ])  # fmt: skip
    del row[key]
    return row, key, "missing"


def _quantity(draw: random.Random, rows: list[Row]) -> tuple[Row, Parameter]:
    return draw.choice([
        (row, one) for row in rows for one in KINDS[row["kind"]] if one.type == NUMBER and one.name not in BOUND
    ])  # fmt: skip


def _wrong_type(draw: random.Random, rows: list[Row]) -> Broken:
    row, parameter = _quantity(draw, rows)
    row[parameter.name] = draw.choice(["0.1 ohm", "", True, None, {}, "Unknown", 1j, b"1"])
    return row, parameter.name, "must be a number"


def _wrong_range(draw: random.Random, rows: list[Row]) -> Broken:
    row, parameter = _quantity(draw, rows)
    low, high = parameter.low, parameter.high
    row[parameter.name] = draw.choice([[low], [], [low, high, high], [high, low], [high, high], (low, low)])
    return row, parameter.name, "a range is"


def _out_of_range(draw: random.Random, rows: list[Row]) -> Broken:
    row, parameter = _quantity(draw, rows)
    low, high = parameter.low, parameter.high
    row[parameter.name] = draw.choice([float("nan"), float("inf"), -float("inf"), high * 1.01 + 1, low - abs(low) / 2 - 1e-12, 10**400])
    return row, parameter.name, "must be between"


def _not_whole(draw: random.Random, rows: list[Row]) -> Broken | None:
    row = _some(draw, rows, "main", "breaker", "load", "transfer")
    if row is None:
        return None
    key = {"load": "switch_poles", "transfer": "position"}.get(row["kind"], "poles")
    row[key] = draw.uniform(1.001, 1.999)
    return row, key, "must be a whole number"


def _not_a_flag(draw: random.Random, rows: list[Row]) -> Broken:
    row, key = draw.choice([(row, one.name) for row in rows for one in KINDS[row["kind"]] if one.type == FLAG])
    row[key] = draw.choice(["true", 1, 0, None, [True]])
    return row, key, "must be true or false"


def _zero_ohms(draw: random.Random, rows: list[Row]) -> Broken:
    row, key = draw.choice([(row, one.name) for row in rows for one in KINDS[row["kind"]] if one.unit == "ohm"])
    row[key] = draw.choice((0, 0.0, -0.0, [0, 1]))
    return row, key, "zero ohms"


def _named_twice(draw: random.Random, rows: list[Row]) -> Broken:
    first, second = sorted(draw.sample(range(len(rows)), 2))
    rows[second]["id"] = rows[first]["id"]
    return rows[second], "id", "named twice"


def _bad_name(draw: random.Random, rows: list[Row]) -> Broken:
    row = draw.choice(rows)
    row["id"] = draw.choice(["", "Cord", "9a", "a-b", "x" * 33, 7, None, "kabel å", "a.b", "a\n", ["a"]])
    return row, "id", "must be a name"


def _not_a_table(draw: random.Random, rows: list[Row]) -> Broken:
    number = draw.randrange(len(rows))
    rows[number] = draw.choice(["cord", 7.5, ["id", "kind"]])
    return rows[number], "", "must be a table"


def _wrong_choice(draw: random.Random, rows: list[Row]) -> Broken:
    row, key = draw.choice([(row, one.name) for row in rows for one in KINDS[row["kind"]] if one.type == CHOICE])
    if draw.random() < 0.1:
        key = "kind"
    row[key] = draw.choice(["gold", 3, None, ["L1"], "", {}])
    return row, key, "must be one of"


def _to_nowhere(draw: random.Random, rows: list[Row]) -> Broken | None:
    row = _hanging_on_one(draw, rows)
    if row is None:
        return None
    row["from"] = "nowhere"
    return row, "from", "no part has this id"


def _not_loose(draw: random.Random, rows: list[Row]) -> Broken | None:
    row = _some(draw, rows, *(kind for kind in PARENTS if PARENTS[kind] and kind not in MAY_BE_LOOSE and kind != "transfer"))
    if row is None:
        return None
    row["from"] = ""
    return row, "from", "must hang on something"


def _wrong_parent(draw: random.Random, rows: list[Row]) -> Broken | None:
    row = _hanging_on_one(draw, rows)
    others = [] if row is None else [one for one in rows if one["kind"] not in PARENTS[row["kind"]]]
    if row is None or not others:
        return None
    row["from"] = draw.choice(others)["id"]
    return row, "from", "hangs on a"


def _wrong_tail(draw: random.Random, rows: list[Row]) -> Broken | None:
    found = [row for row in rows if isinstance(row.get("from"), str) and row["from"]]
    row = draw.choice(found) if found else None
    if row is None:
        return None
    row["from"] = f"{base(row['from'])}.c"
    return row, "from", "tail"


def _mated_twice(draw: random.Random, rows: list[Row]) -> Broken | None:
    cord = _some(draw, [row for row in rows if row["kind"] == "cord" and row["from"]])
    if cord is None:
        return None
    rows.append({"id": "second_cord", "kind": "cord", "from": cord["from"]})
    return rows[-1], "from", "one plug fits"


def _cycle(draw: random.Random, rows: list[Row]) -> Broken | None:
    main = _some(draw, rows, "main")
    if main is None:
        return None
    inlet, cord = {"id": "round_inlet", "kind": "inlet", "from": "round_cord"}, {"id": "round_cord", "kind": "cord", "from": "round_cord2"}
    rows += [inlet, cord, {"id": "round_cord2", "kind": "cord", "from": "round_cord"}]
    main["from"] = "round_inlet"
    return None, "from", "hangs on itself"


def _wrong_supply(draw: random.Random, rows: list[Row]) -> Broken | None:
    supply, outlet = _some(draw, rows, "supply"), _some(draw, rows, "receptacle")
    if supply is None or outlet is None:
        return None
    outlet["connector"] = "16a_230v" if SYSTEMS[supply["system"]].region == "60" else "30a_125v"
    return outlet, "connector", "does not exist on a"


def _no_such_leg(draw: random.Random, rows: list[Row]) -> Broken | None:
    supply, outlet = _some(draw, rows, "supply"), _some(draw, rows, "receptacle")
    if supply is None or outlet is None or "L3" in SYSTEMS[supply["system"]].lines:
        return None
    outlet["leg"] = "L3"
    return outlet, "leg", "supply has"


def _supplies(draw: random.Random, rows: list[Row]) -> Broken:
    rows.append({"id": "grid", "kind": "supply", "system": draw.choice(list(SYSTEMS))})
    return None, "", "exactly one supply"


def _sizes(draw: random.Random, rows: list[Row]) -> Broken | None:
    row = _some(draw, rows, "load")
    if row is None:
        return None
    for size in SIZES:
        row.pop(size, None)
    row.update(draw.choice(({}, {"watts": 100, "ohms": 10}, {"amperes": 1, "ohms": 10, "watts": 9}, {"watts": "unknown"})))
    return row, "", "exactly one of ohms, watts and amperes"


def _not_brought(draw: random.Random, rows: list[Row]) -> Broken | None:
    lone = [
        row for row in rows if row["kind"] == "load" and base(str(row["from"])) in {one["id"] for one in rows if one["kind"] == "inverter"}
    ]
    row = _some(draw, lone)
    if row is None:
        return None
    row["across"] = draw.choice(("L2-N", "L1-L2"))
    return row, "across", "nothing brings"


def _band_upside_down(draw: random.Random, rows: list[Row]) -> Broken | None:
    row = _some(draw, [row for row in rows if row.get("device", "none") != "none"])
    if row is None:
        return None
    row.update({"non_operating_ma": 30.1, "operating_ma": 30})
    return row, "non_operating_ma", "at most the operating value"


def _supply_ends(draw: random.Random, rows: list[Row]) -> Broken | None:
    row = _some(draw, rows, "adapter")
    if row is None:
        return None
    row["from"] = ["", "", ""]
    return row, "from", "supply end"


def _the_same_twice(draw: random.Random, rows: list[Row]) -> Broken | None:
    row = _some(draw, rows, "panel", "hull", "transfer")
    if row is None:
        return None
    row["from"] = [parents(row)[0]] * 2
    return row, "from", "the same part twice"


MUTATIONS: tuple[Callable[[random.Random, list[Row]], Broken | None], ...] = (
    _unknown_key, _without_key, _without_choice, _wrong_type, _wrong_range, _out_of_range, _not_whole, _not_a_flag, _zero_ohms,
    _named_twice, _bad_name, _not_a_table, _wrong_choice, _to_nowhere, _not_loose, _wrong_parent, _wrong_tail, _mated_twice, _cycle,
    _wrong_supply, _no_such_leg, _supplies, _sizes, _not_brought, _band_upside_down, _supply_ends, _the_same_twice,
)  # fmt: skip


def invalid(seed: int) -> tuple[list[Row], str, str]:
    """The parts of a valid installation with one thing made wrong, the key path that an error must name, and words of its rule.

    Each mutation has its turn: seeds apart by the number of mutations have the same one.
    """
    mutation = MUTATIONS[seed % len(MUTATIONS)]
    draw = random.Random(seed)
    while True:
        rows = copy.deepcopy(valid(draw.randrange(10**9)))
        broken = mutation(draw, rows)
        if broken is not None:
            row, key, rule = broken
            number = next((f"[{place}]" for place, one in enumerate(rows) if one is row), r"\[\d+\]" if key else "")
            where = re.escape(f"installation.parts{number}") if row is not None else f"installation.parts{number}"
            return rows, where + (f"\\.{key}" if key else ""), rule
