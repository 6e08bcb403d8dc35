"""What is plugged into what: a list of parts -> the healthy Network.

`read` turns the raw `installation` section of a case into checked parts; `build` wires them up. Each part owns the nodes
at its load end, named `<part>.<conductor>`; its branches lead there from the load end of the part it hangs on. A plug
that hangs on nothing (`from = ""`) has bare blades, named `<part>.plug.<conductor>`.
"""

from __future__ import annotations

import cmath
import heapq
import math
import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

from strayline.components import (
    ASHORE,
    CHOICE,
    CONNECTORS,
    FLAG,
    KINDS,
    MAY_BE_LOOSE,
    NUMBER,
    PARENTS,
    REFERENCE,
    REFERENCES,
    REQUIRED,
    SYSTEMS,
    Parameter,
)
from strayline.errors import CaseError
from strayline.network import Blade, Branch, Network, Sensor, checked
from strayline.units import awg_area_mm2, copper_ohms

EARTH = "earth"
ELEMENT_TAPS = (0.1, 0.5, 0.9)  # positions along a heating element, as a share of its length from the line end
SWITCH_OHMS = 0.002
_ID = re.compile(r"[a-z][a-z0-9_]{0,31}")


@dataclass(frozen=True, slots=True)
class Part:
    """One part: id, kind, every parameter of its kind (None where left to the rule), and the ids it hangs on."""

    id: str
    kind: str
    values: Mapping[str, object]
    parents: tuple[str, ...]

    def number(self, name: str) -> float | None:
        """A numeric parameter in its own unit, or None where it was left to the rule of its kind."""
        value = self.values[name]
        return None if value is None else float(value)  # type: ignore[arg-type]

    def flag(self, name: str) -> bool:
        return bool(self.values[name])

    def text(self, name: str) -> str:
        return str(self.values[name])


@dataclass(frozen=True, slots=True)
class Installation:
    """Checked parts in order from supply to load, and what was assumed because nobody said: (part.key, value, unit)."""

    parts: tuple[Part, ...]
    assumed: tuple[tuple[str, object, str], ...] = ()
    index: Mapping[str, Part] = field(default_factory=dict, compare=False)
    zones: dict[str, frozenset[str]] = field(default_factory=dict, compare=False)  # filled by `zone_parts`

    def part(self, part_id: str) -> Part:
        return self.index[part_id]

    def of_kind(self, *kinds: str) -> tuple[Part, ...]:
        return tuple(part for part in self.parts if part.kind in kinds)

    def children(self, part_id: str) -> tuple[Part, ...]:
        return tuple(part for part in self.parts if part_id in (base(parent) for parent in part.parents))

    def downstream(self, part_id: str) -> tuple[str, ...]:
        """The ids fed from this part, itself first, in order from supply to load."""
        found = {part_id}
        for part in self.parts:
            if any(base(parent) in found for parent in part.parents):
                found.add(part.id)
        return tuple(part.id for part in self.parts if part.id in found)


def base(reference: str) -> str:
    """The part id in a reference: `y1` in both `y1` and `y1.a`."""
    return reference.partition(".")[0]


# --- reading -------------------------------------------------------------------------------------------------------


def read(raw: object, where: str = "installation") -> Installation:
    """Check a raw `installation` section (a mapping with `parts`) and return its parts in order from supply to load.

    Raises CaseError naming the key path, the rule and the value.
    """
    if not isinstance(raw, Mapping):
        raise CaseError(where, "must be a table with a list of parts", raw)
    for key in raw:
        if key != "parts":
            raise CaseError(f"{where}.{key}", "unknown key")
    rows = raw.get("parts")
    if not isinstance(rows, (list, tuple)) or not rows:
        raise CaseError(f"{where}.parts", "must be a list of at least one part", rows)
    if len(rows) > 4000:
        raise CaseError(f"{where}.parts", "at most 4000 parts", len(rows))
    parts: dict[str, Part] = {}
    assumed: list[tuple[str, object, str]] = []
    paths: dict[str, str] = {}
    for number, row in enumerate(rows):
        path = f"{where}.parts[{number}]"
        part, left_out = _read_part(row, path)
        if part.id in parts:
            raise CaseError(f"{path}.id", "named twice; every part needs an id of its own", part.id)
        parts[part.id] = part
        paths[part.id] = path
        assumed += left_out
    for part in parts.values():
        _check_parents(part, parts, paths[part.id])
    ordered = _in_order(parts, paths)
    _check_mated_once(ordered, paths)
    _check_supply(ordered, where)
    _check_systems(ordered, paths)
    return Installation(ordered, tuple(assumed), {part.id: part for part in ordered})


def _read_part(row: object, path: str) -> tuple[Part, list[tuple[str, object, str]]]:
    if not isinstance(row, Mapping):
        raise CaseError(path, "must be a table", row)
    part_id = row.get("id")
    if not isinstance(part_id, str) or not _ID.fullmatch(part_id):
        raise CaseError(f"{path}.id", "must be a name of small letters, digits and _ that starts with a letter, at most 32 long", part_id)
    kind = row.get("kind")
    if not isinstance(kind, str) or kind not in KINDS:
        raise CaseError(f"{path}.kind", f"must be one of {', '.join(KINDS)}", kind)
    known = {parameter.name: parameter for parameter in KINDS[kind]}
    for key in row:
        if key not in known and key not in ("id", "kind"):
            raise CaseError(f"{path}.{key}", f"unknown key for a {kind}; known are {', '.join(known)}")
    values: dict[str, object] = {}
    assumed: list[tuple[str, object, str]] = []
    for parameter in KINDS[kind]:
        if parameter.name not in row:
            if parameter.default is REQUIRED:
                raise CaseError(f"{path}.{parameter.name}", f"missing; a {kind} needs it")
            values[parameter.name] = parameter.default
            if parameter.type == NUMBER and parameter.default is not None:
                assumed.append((f"{part_id}.{parameter.name}", parameter.default, parameter.unit))
        else:
            raw = row[parameter.name]
            values[parameter.name] = _read_value(raw, parameter, f"{path}.{parameter.name}")
            if raw == "unknown" or isinstance(raw, (list, tuple)) and parameter.type == NUMBER:
                assumed.append((f"{part_id}.{parameter.name}", values[parameter.name], parameter.unit))
    listed = values.get("from", "")
    parents = tuple(listed) if isinstance(listed, tuple) else (str(listed),) if kind != "supply" else ()
    return Part(part_id, kind, values, parents), assumed


def _read_value(raw: object, parameter: Parameter, path: str) -> object:
    if parameter.type == NUMBER:
        return _read_quantity(raw, parameter, path)
    if raw == "unknown" and parameter.default is not REQUIRED and parameter.type in (CHOICE, FLAG):
        return parameter.default
    if parameter.type == FLAG:
        if not isinstance(raw, bool):
            raise CaseError(path, "must be true or false", raw)
        return raw
    if parameter.type == CHOICE:
        if not isinstance(raw, str) or raw not in parameter.choices:
            raise CaseError(path, f"must be one of {', '.join(parameter.choices)}", raw)
        return raw
    if parameter.type == REFERENCE:
        if not isinstance(raw, str):
            raise CaseError(path, "must be the id of one part, or empty for a loose plug", raw)
        return raw
    items = [raw] if isinstance(raw, str) else raw
    if not isinstance(items, (list, tuple)) or not items or not all(isinstance(item, str) for item in items):
        raise CaseError(path, "must be a list of part ids", raw)
    return tuple(items)


def _read_quantity(raw: object, parameter: Parameter, path: str) -> float | None:
    if raw == "unknown":
        if parameter.default is REQUIRED:
            raise CaseError(path, "must be a number", raw)
        return None if parameter.default is None else float(parameter.default)  # type: ignore[arg-type]
    if isinstance(raw, (list, tuple)):
        if len(raw) != 2:
            raise CaseError(path, "a range is [low, high]", raw)
        low, high = (_read_number(item, parameter, path) for item in raw)
        if not low < high:
            raise CaseError(path, "a range is [low, high] with low below high", raw)
        return math.sqrt(low * high) if low > 0 else (low + high) / 2
    return _read_number(raw, parameter, path)


def _read_number(raw: object, parameter: Parameter, path: str) -> float:
    if isinstance(raw, bool) or not isinstance(raw, (int, float)) or not math.isfinite(raw):
        raise CaseError(path, f"must be a number in {parameter.unit}" if parameter.unit else "must be a number", raw)
    if raw == 0 and parameter.unit == "ohm":
        raise CaseError(path, "zero ohms in a conductor; give its real resistance", raw)
    if not parameter.low <= raw <= parameter.high:
        raise CaseError(path, f"must be between {parameter.low:g} and {parameter.high:g} {parameter.unit}".rstrip(), raw)
    return float(raw)


def _check_parents(part: Part, parts: Mapping[str, Part], path: str) -> None:
    allowed = PARENTS[part.kind]
    for parent in part.parents:
        if parent == "":
            if part.kind not in MAY_BE_LOOSE:
                raise CaseError(f"{path}.from", f"a {part.kind} must hang on something", parent)
            continue
        owner = parts.get(base(parent))
        if owner is None:
            raise CaseError(f"{path}.from", "no part has this id", parent)
        if owner.kind not in allowed:
            raise CaseError(f"{path}.from", f"a {part.kind} hangs on a {' or '.join(allowed)}, not on a {owner.kind}", parent)
        splitting = owner.kind == "adapter" and owner.values["style"] == "splitting_y"
        if splitting != ("." in parent) or (splitting and parent.partition(".")[2] not in ("a", "b")):
            rule = "a splitting Y is named with its tail, .a or .b" if splitting else "only a splitting Y has tails"
            raise CaseError(f"{path}.from", rule, parent)
    if len(set(part.parents)) != len(part.parents):
        raise CaseError(f"{path}.from", "the same part twice", ", ".join(part.parents))
    if part.kind == "adapter":
        wanted = {"combining_y": (2,), "homemade": (1, 2)}.get(part.text("style"), (1,))
        if len(part.parents) not in wanted:
            raise CaseError(f"{path}.from", f"a {part.values['style']} adapter has {' or '.join(map(str, wanted))} supply end", ", ".join(part.parents))
    if part.kind == "load":
        given = [name for name in ("ohms", "watts", "amperes") if part.values[name] is not None]
        if len(given) != 1:
            raise CaseError(path, "a load needs exactly one of ohms, watts and amperes", ", ".join(given) or "none")
    if part.kind in ("panel", "hull") and len(part.parents) > 2:
        raise CaseError(f"{path}.from", "at most two", len(part.parents))


def _in_order(parts: Mapping[str, Part], paths: Mapping[str, str]) -> tuple[Part, ...]:
    """Parts from supply to load, in file order where the circuit leaves a choice."""
    place = {part_id: number for number, part_id in enumerate(parts)}
    below: dict[str, list[str]] = {part_id: [] for part_id in parts}
    waits: dict[str, int] = {}
    for part in parts.values():
        owners = {base(parent) for parent in part.parents if parent}
        waits[part.id] = len(owners)
        for owner in owners:
            below[owner].append(part.id)
    ready = [place[part_id] for part_id, count in waits.items() if count == 0]
    names = list(parts)
    ordered: list[Part] = []
    while ready:
        part_id = names[heapq.heappop(ready)]
        ordered.append(parts[part_id])
        for child in below[part_id]:
            waits[child] -= 1
            if waits[child] == 0:
                heapq.heappush(ready, place[child])
    if len(ordered) < len(parts):
        stuck = next(part_id for part_id in parts if waits[part_id])
        raise CaseError(f"{paths[stuck]}.from", "hangs on itself through other parts", stuck)
    return tuple(ordered)


def _check_mated_once(parts: tuple[Part, ...], paths: Mapping[str, str]) -> None:
    """A receptacle, a cord end, an adapter outlet or an inlet takes one plug."""
    kinds = {part.id: part.kind for part in parts}
    taken: dict[str, str] = {}
    for part in parts:
        for parent in part.parents:
            if parent and kinds[base(parent)] in ("receptacle", "cord", "adapter", "inlet"):
                if parent in taken:
                    raise CaseError(f"{paths[part.id]}.from", f"already taken by {taken[parent]}; one plug fits", parent)
                taken[parent] = part.id


def _check_supply(parts: tuple[Part, ...], where: str) -> None:
    supplies = [part.id for part in parts if part.kind == "supply"]
    if len(supplies) != 1:
        raise CaseError(f"{where}.parts", "exactly one supply", ", ".join(supplies) or "none")


def _check_systems(parts: tuple[Part, ...], paths: Mapping[str, str]) -> None:
    system = next(part for part in parts if part.kind == "supply").text("system")
    lines = SYSTEMS[system].lines
    for part in parts:
        if part.kind == "receptacle":
            connector = CONNECTORS[part.text("connector")]
            if system not in connector.volts:
                raise CaseError(f"{paths[part.id]}.connector", f"does not exist on a {system} supply", part.values["connector"])
            if part.values["leg"] not in lines:
                raise CaseError(f"{paths[part.id]}.leg", f"a {system} supply has {', '.join(lines)}", part.values["leg"])


# --- building ------------------------------------------------------------------------------------------------------

Conductors = dict[str, str]  # conductor name -> node


@dataclass(slots=True)
class _Wiring:
    """What has been wired so far: branches, and the load-end nodes of every part (and of each tail)."""

    system: str
    branches: list[Branch] = field(default_factory=list)
    ends: dict[str, Conductors] = field(default_factory=dict)
    blades: list[Blade] = field(default_factory=list)

    def add(self, branch_id: str, start: str, end: str, ohms: complex, kind: str, owner: str, emf: complex = 0j) -> None:
        self.branches.append(Branch(branch_id, start, end, complex(ohms), kind, owner, emf))


def build(installation: Installation) -> Network:
    """The healthy Network of an installation: one branch per conductor and part, one sensor per device position."""
    supply = installation.of_kind("supply")[0]
    wiring = _Wiring(supply.text("system"))
    for part in installation.parts:
        _BUILDERS[part.kind](part, installation, wiring)
    present = {branch.id for branch in wiring.branches}
    nodes = {node for branch in wiring.branches for node in (branch.from_node, branch.to_node)}
    sensors = tuple(_sensor(part, installation, present, nodes) for part in installation.of_kind("feeder", "receptacle", "main"))
    hulls = tuple((part.id, f"{part.id}.metal") for part in installation.of_kind("hull"))
    hertz = SYSTEMS[wiring.system].hertz
    return checked(Network(hertz, EARTH, tuple(wiring.branches), sensors, tuple(wiring.blades), hulls))


def _sensor(part: Part, installation: Installation, present: set[str], nodes: set[str]) -> Sensor:
    enclosed = tuple(f"{part.id}.{conductor}" for conductor in ("L1", "L2", "N") if f"{part.id}.{conductor}" in present)
    owners = zone_parts(installation, part)
    return Sensor(part.id, enclosed, part.text("device"), frozenset(node for node in nodes if base(node) in owners))


def zone_parts(installation: Installation, part: Part) -> frozenset[str]:
    """The parts inside a sensor's zone.

    A feeder's and a main's zone is all that hangs on it. A receptacle's is its cord and everything aboard, up to the
    terminals of every other shore receptacle that also reaches this boat.
    """
    if part.id not in installation.zones:
        installation.zones[part.id] = _zone_parts(installation, part)
    return installation.zones[part.id]


def _zone_parts(installation: Installation, part: Part) -> frozenset[str]:
    found = set(installation.downstream(part.id))
    if part.kind != "receptacle":
        return frozenset(found)
    grown = True
    while grown:
        before = len(found)
        for member in installation.parts:
            parents = {base(parent) for parent in member.parents if parent}
            if member.id in found and member.kind != "receptacle":
                found |= {parent for parent in parents if installation.part(parent).kind not in ASHORE}
            elif parents & found and member.kind not in ASHORE:
                found.add(member.id)
        grown = len(found) > before
    return frozenset(found)


def _wire_ohms(part: Part) -> dict[str, float]:
    """Ohms per conductor of a wired part: explicit where given, else from length and gauge (copper at 20 degrees C)."""
    awg = part.number("awg")
    area = awg_area_mm2(round(awg)) if awg is not None else part.number("area_mm2")
    ohms = copper_ohms(part.number("length_m") or 0.0, area or 1.0)
    return {
        "line": part.number("line_ohms") or ohms,
        "neutral": part.number("neutral_ohms") or part.number("line_ohms") or ohms,
        "ground": part.number("ground_ohms") or ohms,
    }


def _short_ohms(part: Part) -> dict[str, float]:
    line = part.number("line_ohms") or SWITCH_OHMS
    return {"line": line, "neutral": part.number("neutral_ohms") or line, "ground": part.number("ground_ohms") or line}


def _role(conductor: str) -> str:
    return {"N": "neutral", "G": "ground"}.get(conductor[0], "line")


_BRANCH_KIND = {"line": "line", "neutral": "neutral", "ground": "protective"}


def _supply(part: Part, installation: Installation, wiring: _Wiring) -> None:
    system = SYSTEMS[part.text("system")]
    volts = part.number("volts") or system.volts
    star = f"{part.id}.star"
    ends: Conductors = {}
    for line, degrees in system.lines.items():
        ends[line] = f"{part.id}.{line}"
        wiring.add(f"{part.id}.{line}", star, ends[line], part.number("line_ohms") or 0, "source", part.id, cmath.rect(volts, math.radians(degrees)))
    ends["N"], ends["G"] = f"{part.id}.N", f"{part.id}.G"
    wiring.add(f"{part.id}.N", star, ends["N"], part.number("neutral_ohms") or 0, "neutral", part.id)
    wiring.add(f"{part.id}.bond", ends["N"], ends["G"], part.number("bond_ohms") or 0, "bond", part.id)
    wiring.add(f"{part.id}.earth", ends["G"], EARTH, part.number("earth_ohms") or 0, "water", part.id)
    wiring.ends[part.id] = ends


def _through(part: Part, source: Conductors, wiring: _Wiring, ohms: Mapping[str, float], conductors: Iterable[str] | None = None) -> None:
    """One branch per conductor, from the load end of the part before to this part's own load end."""
    ends: Conductors = {}
    for conductor in conductors if conductors is not None else source:
        ends[conductor] = f"{part.id}.{conductor}"
        role = _role(conductor)
        wiring.add(f"{part.id}.{conductor}", source[conductor], ends[conductor], ohms[role], _BRANCH_KIND[role], part.id)
    wiring.ends[part.id] = ends


def _source(part: Part, number: int, installation: Installation, wiring: _Wiring) -> Conductors:
    """The conductors a part hangs on, or the bare blades of its loose plug."""
    parent = part.parents[number]
    if parent:
        return wiring.ends[parent]
    tail = "plug" if len(part.parents) == 1 else f"plug_{'ab'[number]}"
    conductors = ("L1", "L2", "N", "G") if _carries_two_lines(part, number, installation) else ("L1", "N", "G")
    blades = {conductor: f"{part.id}.{tail}.{conductor}" for conductor in conductors}
    wiring.blades += [Blade(node, node) for node in blades.values()]
    return blades


def _carries_two_lines(part: Part, number: int, installation: Installation) -> bool:
    """Whether a loose plug has two line blades: what hangs on it needs the second line and it is no combining Y tail."""
    if part.kind == "adapter":
        return part.text("style") in ("splitting_y", "straight_50_30")
    below = [installation.part(part_id) for part_id in installation.downstream(part.id)]
    styles = {child.text("style") for child in below if child.kind == "adapter"}
    if styles & {"splitting_y", "straight_50_30"}:
        return True
    return not styles and any("L2" in load.text("across") for load in below if load.kind == "load")


def _feeder(part: Part, installation: Installation, wiring: _Wiring) -> None:
    _through(part, wiring.ends[part.parents[0]], wiring, _wire_ohms(part))


def _cord(part: Part, installation: Installation, wiring: _Wiring) -> None:
    _through(part, _source(part, 0, installation, wiring), wiring, _wire_ohms(part))


def _pedestal(part: Part, installation: Installation, wiring: _Wiring) -> None:
    _through(part, wiring.ends[part.parents[0]], wiring, _short_ohms(part))


def _inlet(part: Part, installation: Installation, wiring: _Wiring) -> None:
    _through(part, _source(part, 0, installation, wiring), wiring, _short_ohms(part))


def _receptacle(part: Part, installation: Installation, wiring: _Wiring) -> None:
    connector = CONNECTORS[part.text("connector")]
    shore = wiring.ends[part.parents[0]]
    lines = {"L1": shore[part.text("leg")]} if connector.lines == 1 else {"L1": shore["L1"], "L2": shore["L2"]}
    _through(part, {**lines, "N": shore["N"], "G": shore["G"]}, wiring, _short_ohms(part))
    if not part.flag("closed"):
        opened = {f"{part.id}.{line}" for line in lines} | ({f"{part.id}.N"} if connector.opens == "all" else set())
        wiring.branches = [branch for branch in wiring.branches if branch.id not in opened]


def _adapter(part: Part, installation: Installation, wiring: _Wiring) -> None:
    sources = [_source(part, number, installation, wiring) for number in range(len(part.parents))]
    ohms = _short_ohms(part)
    style = part.text("style")
    if len(sources) == 2:
        ends = {conductor: f"{part.id}.{conductor}" for conductor in ("L1", "L2", "N", "G")}
        for tail, line, source in zip("ab", ("L1", "L2"), sources, strict=True):
            wiring.add(f"{part.id}.{line}", source["L1"], ends[line], ohms["line"], "line", part.id)
            wiring.add(f"{part.id}.{tail}.N", source["N"], ends["N"], ohms["neutral"], "neutral", part.id)
            wiring.add(f"{part.id}.{tail}.G", source["G"], ends["G"], ohms["ground"], "protective", part.id)
        wiring.ends[part.id] = ends
    elif style == "splitting_y":
        source = sources[0]
        for tail, line in zip("ab", ("L1", "L2" if "L2" in source else "L1"), strict=True):
            ends = {conductor: f"{part.id}.{tail}.{conductor}" for conductor in ("L1", "N", "G")}
            for conductor, end in ends.items():
                role = _role(conductor)
                start = source[line] if conductor == "L1" else source[conductor]
                wiring.add(end, start, end, ohms[role], _BRANCH_KIND[role], part.id)
            wiring.ends[f"{part.id}.{tail}"] = ends
    else:
        source = dict(sources[0])
        if style == "straight_50_30":
            source.pop("L2", None)
        elif style == "straight_30_50":
            source = {"L1": source["L1"], "L2": source["L1"], "N": source["N"], "G": source["G"]}
        _through(part, source, wiring, ohms)


def _main(part: Part, installation: Installation, wiring: _Wiring) -> None:
    _through(part, wiring.ends[part.parents[0]], wiring, _short_ohms(part))
    if not part.flag("closed"):
        opened = opened_by_main(part)
        wiring.branches = [branch for branch in wiring.branches if branch.id not in opened]


def opened_by_main(part: Part) -> frozenset[str]:
    """Branches a boat's main switch opens: the lines, and the neutral too when it has two poles."""
    lines = {f"{part.id}.L1", f"{part.id}.L2"}
    return frozenset(lines | {f"{part.id}.N"} if part.number("poles") == 2 else lines)


def _panel(part: Part, installation: Installation, wiring: _Wiring) -> None:
    sources = [wiring.ends[parent] for parent in part.parents]
    ohms = _short_ohms(part)
    if len(sources) == 1:
        _through(part, sources[0], wiring, ohms)
        return
    ends = {conductor: f"{part.id}.{conductor}" for conductor in ("L1", "L2", "N", "G")}
    for tail, line, source in zip("ab", ("L1", "L2"), sources, strict=True):
        wiring.add(f"{part.id}.{line}", source["L1"], ends[line], ohms["line"], "line", part.id)
        wiring.add(f"{part.id}.{tail}.N", source["N"], ends["N"], ohms["neutral"], "neutral", part.id)
        wiring.add(f"{part.id}.{tail}.G", source["G"], ends["G"], ohms["ground"], "protective", part.id)
    wiring.ends[part.id] = ends


def _fed(part: Part, installation: Installation) -> list[str]:
    """The live conductors a breaker feeds, in order L1, L2, N."""
    wanted = {conductor for child in installation.children(part.id) for conductor in child.text("across").split("-")}
    return [conductor for conductor in ("L1", "L2", "N") if conductor in wanted]


def _breaker(part: Part, installation: Installation, wiring: _Wiring) -> None:
    source = wiring.ends[part.parents[0]]
    fed = _fed(part, installation)
    for conductor in fed:
        if conductor not in source:
            raise CaseError(part.id, f"its panel has no {conductor}", part.parents[0])
    _through(part, source, wiring, _short_ohms(part), fed)
    wiring.ends[part.id]["G"] = source["G"]
    if not part.flag("closed"):
        opened = opened_by_breaker(part, installation)
        wiring.branches = [branch for branch in wiring.branches if branch.id not in opened]


def opened_by_breaker(part: Part, installation: Installation) -> frozenset[str]:
    """Branches a branch breaker opens: its first line with one pole, all it feeds with two."""
    fed = _fed(part, installation)
    return frozenset(f"{part.id}.{conductor}" for conductor in (fed if part.number("poles") == 2 else fed[:1]))


def load_ohms(part: Part, volts: float, hertz: float) -> complex:
    """Impedance of a load from ohms, watts or amperes at the nominal voltage across it; an inductive power factor lags."""
    power_factor = part.number("power_factor") or 1.0
    if part.values["ohms"] is not None:
        size = part.number("ohms") or 0.0
    elif part.values["watts"] is not None:
        size = volts**2 * power_factor / (part.number("watts") or 1.0)
    else:
        size = volts / (part.number("amperes") or 1.0)
    return size * complex(power_factor, math.sqrt(1 - power_factor**2))


def _load(part: Part, installation: Installation, wiring: _Wiring) -> None:
    source = wiring.ends[part.parents[0]]
    first, second = part.text("across").split("-")
    for conductor in (first, second):
        if conductor not in source:
            raise CaseError(part.id, f"nothing brings {conductor} to it", part.text("across"))
    system = SYSTEMS[wiring.system]
    supply = installation.of_kind("supply")[0]
    phase = supply.number("volts") or system.volts
    volts = phase if second == "N" else abs(cmath.rect(phase, math.radians(system.lines["L1"])) - cmath.rect(phase, math.radians(system.lines["L2"])))
    near, frame = f"{part.id}.in", f"{part.id}.frame"
    wiring.add(f"{part.id}.G", frame, source["G"], part.number("ground_ohms") or SWITCH_OHMS, "protective", part.id)
    if part.flag("on"):
        wiring.add(f"{part.id}.switch", source[first], near, SWITCH_OHMS, "line", part.id)
    ohms = load_ohms(part, volts, system.hertz)
    if part.flag("element"):
        cuts = (0.0, *ELEMENT_TAPS, 1.0)
        nodes = (near, *(tap_node(part.id, tap) for tap in ELEMENT_TAPS), source[second])
        for number, (start, end) in enumerate(zip(nodes, nodes[1:], strict=False)):
            wiring.add(f"{part.id}.element{number}", start, end, ohms * (cuts[number + 1] - cuts[number]), "load", part.id)
    else:
        wiring.add(f"{part.id}.load", near, source[second], ohms, "load", part.id)
    farads = (part.number("filter_nf") or 0.0) * 1e-9
    if farads:
        reactance = -1j / (2 * math.pi * system.hertz * farads)
        wiring.add(f"{part.id}.filter", near, frame, reactance, "filter", part.id)
        if second != "N":
            wiring.add(f"{part.id}.filter2", source[second], frame, reactance, "filter", part.id)


def tap_node(part_id: str, position: float) -> str:
    """The node at a tap of a heating element, `position` from 0 (line end) to 1."""
    return f"{part_id}.tap{round(position * 1000):d}"


def _hull(part: Part, installation: Installation, wiring: _Wiring) -> None:
    metal = f"{part.id}.metal"
    for number, parent in enumerate(part.parents):
        branch_id = f"{part.id}.bond" if number == 0 else f"{part.id}.bond{number + 1}"
        wiring.add(branch_id, wiring.ends[parent]["G"], metal, part.number("bond_ohms") or SWITCH_OHMS, "protective", part.id)
    if part.flag("afloat"):
        wiring.add(f"{part.id}.water", metal, EARTH, part.number("water_ohms") or 1.0, "water", part.id)


_BUILDERS = {
    "supply": _supply,
    "feeder": _feeder,
    "pedestal": _pedestal,
    "receptacle": _receptacle,
    "adapter": _adapter,
    "cord": _cord,
    "inlet": _inlet,
    "main": _main,
    "panel": _panel,
    "breaker": _breaker,
    "load": _load,
    "hull": _hull,
}
