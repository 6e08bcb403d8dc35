"""The parts of an installation: a checked list, in order from supply to load.

`read` turns the raw `installation` section of a case into parts, or says which rule of the table it breaks.
"""

from __future__ import annotations

import heapq
import math
import re
from collections.abc import Mapping
from dataclasses import dataclass, field

from strayline.components import (
    ADAPTERS,
    CHOICE,
    CONNECTORS,
    FLAG,
    KINDS,
    MAY_BE_LOOSE,
    NUMBER,
    PARENTS,
    REFERENCE,
    REQUIRED,
    SYSTEMS,
    Parameter,
)
from strayline.devices import DEVICES, USUAL_WAVEFORM, operating_band_ma, usual_curve
from strayline.errors import CaseError

MOST_PARTS = 8000  # a dock of 250 boats with thirty parts each
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
        """A yes-or-no parameter."""
        return bool(self.values[name])

    def text(self, name: str) -> str:
        """A choice or an id."""
        return str(self.values[name])


@dataclass(frozen=True, slots=True)
class Installation:
    """Checked parts in order from supply to load, and what was assumed because nobody said: (part.key, value, unit)."""

    parts: tuple[Part, ...]
    assumed: tuple[tuple[str, object, str], ...] = ()
    index: Mapping[str, Part] = field(default_factory=dict, compare=False)
    below: Mapping[str, tuple[Part, ...]] = field(default_factory=dict, compare=False)  # part id -> what hangs on it
    paths: Mapping[str, str] = field(default_factory=dict, compare=False)  # part id -> its key path in the case
    zones: dict[str, frozenset[str]] = field(default_factory=dict, compare=False)  # filled by `zone_parts`

    def part(self, part_id: str) -> Part:
        """The part of this id."""
        return self.index[part_id]

    def of_kind(self, *kinds: str) -> tuple[Part, ...]:
        """The parts of these kinds, in order from supply to load."""
        return tuple(part for part in self.parts if part.kind in kinds)

    def children(self, part_id: str) -> tuple[Part, ...]:
        """The parts that hang on this one."""
        return self.below.get(part_id, ())

    def downstream(self, part_id: str) -> frozenset[str]:
        """The ids fed from this part, its own among them."""
        found = {part_id}
        waiting = [part_id]
        while waiting:
            new = [part.id for part in self.children(waiting.pop()) if part.id not in found]
            found.update(new)
            waiting += new
        return frozenset(found)


def breaker_rating_a(part: Part) -> float | None:
    """Rated amperes of the breaker a part holds: stated, or by the type of an outlet; None without one."""
    if part.kind == "receptacle":
        return part.number("rated_a") or CONNECTORS[part.text("connector")].rated_a
    return part.number("rated_a") if "rated_a" in part.values else None


def breaker_curve(part: Part, hertz: float) -> str:
    """The release curve of the breaker a part holds, a key of `devices.CURVES`: stated, or usual at this frequency."""
    stated = part.values.get("curve")
    return usual_curve(hertz) if stated is None else str(stated)


def waveform(part: Part) -> str:
    """The type of the residual device a part holds, a key of `devices.WAVEFORMS`: stated, or usual."""
    stated = part.values["waveform"]
    return USUAL_WAVEFORM if stated is None else str(stated)


def waits(part: Part) -> bool:
    """Whether the device a part holds waits on purpose for one below it: by its stated delay, else by its kind."""
    stated = part.number("delay_s")
    return (DEVICES[part.text("device")].delay_s if stated is None else stated) > 0


def splits(part: Part) -> bool:
    """Whether a part is an adapter with two outlets, its tails `.a` and `.b`."""
    return part.kind == "adapter" and ADAPTERS[part.text("style")].wiring == "split"


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
    if len(rows) > MOST_PARTS:
        raise CaseError(f"{where}.parts", f"at most {MOST_PARTS} parts", len(rows))
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
        _check_band(part, paths[part.id])
    ordered = _in_order(parts, paths)
    _check_mated_once(ordered, paths)
    _check_supply(ordered, where)
    _check_systems(ordered, paths)
    below: dict[str, list[Part]] = {}
    for part in ordered:
        for parent in {base(parent) for parent in part.parents if parent}:
            below.setdefault(parent, []).append(part)
    hanging = {name: tuple(children) for name, children in below.items()}
    return Installation(ordered, tuple(assumed), {part.id: part for part in ordered}, hanging, paths)


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
            if raw == "unknown" or (isinstance(raw, (list, tuple)) and parameter.type == NUMBER):
                assumed.append((f"{part_id}.{parameter.name}", values[parameter.name], parameter.unit))
    listed = values.get("from", "")
    parents = tuple(listed) if isinstance(listed, tuple) else (str(listed),) if "from" in known else ()
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
    if isinstance(raw, bool) or not isinstance(raw, (int, float)):
        raise CaseError(path, f"must be a number in {parameter.unit}" if parameter.unit else "must be a number", raw)
    if raw == 0 and parameter.unit == "ohm":
        raise CaseError(path, "zero ohms in a conductor; give its real resistance", raw)
    if not parameter.low <= raw <= parameter.high:  # refuses not-a-number too
        raise CaseError(path, f"must be between {parameter.low:g} and {parameter.high:g} {parameter.unit}".rstrip(), raw)
    if parameter.whole and raw != int(raw):
        raise CaseError(path, "must be a whole number", raw)
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
        splitting = splits(owner)
        if splitting != ("." in parent) or (splitting and parent.partition(".")[2] not in ("a", "b")):
            rule = "a splitting Y is named with its tail, .a or .b" if splitting else "only a splitting Y has tails"
            raise CaseError(f"{path}.from", rule, parent)
    hung_on = [parent for parent in part.parents if parent]  # two loose plugs are no contradiction
    if len(set(hung_on)) != len(hung_on):
        raise CaseError(f"{path}.from", "the same part twice", ", ".join(part.parents))
    if part.kind == "adapter":
        plugs = len(ADAPTERS[part.text("style")].plugs)
        wanted = (plugs,) if plugs else (1, 2)
        if len(part.parents) not in wanted:
            raise CaseError(
                f"{path}.from", f"a {part.values['style']} adapter has {' or '.join(map(str, wanted))} supply end", ", ".join(part.parents)
            )
    if part.kind == "load":
        given = [name for name in ("ohms", "watts", "amperes") if part.values[name] is not None]
        if len(given) != 1:
            raise CaseError(path, "a load needs exactly one of ohms, watts and amperes", ", ".join(given) or "none")
    if part.kind in ("panel", "hull") and len(part.parents) > 2:
        raise CaseError(f"{path}.from", "at most two", len(part.parents))
    if part.kind == "transfer" and len(part.parents) != 2:
        raise CaseError(f"{path}.from", "a transfer switch has two sources", len(part.parents))


def _check_band(part: Part, path: str) -> None:
    """A stated operating band is one: its non-operating value does not exceed its operating value."""
    if "device" in part.values and part.values["device"] != "none":
        try:
            operating_band_ma(DEVICES[part.text("device")], part.number("non_operating_ma"), part.number("operating_ma"))
        except CaseError as error:
            raise CaseError(f"{path}.non_operating_ma", error.rule, error.value) from None


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
