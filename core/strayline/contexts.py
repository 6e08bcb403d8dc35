"""A test's switching state -> Network: what is plugged, closed and running while the person looks or measures.

`setting` changes what is plugged into what (another installation); `switched` opens and closes in a network that a cause may
already have changed. Opening is removing branches, so a context never invents a conductor. `bare_blades` gives, for a state a
test leaves behind, every unmated male blade; the caller vetoes what would be live.
"""

from __future__ import annotations

import dataclasses

from strayline.aboard import opened_by_breaker, opened_by_main
from strayline.boat import own_parts
from strayline.components import LINES, SYSTEMS
from strayline.installation import build
from strayline.network import Branch, Network, with_branches, without_branches
from strayline.parts import Installation, Part, base, read
from strayline.wiring import nominal_volts

AS_FOUND = "as_found"
UNPLUGGED = ("cord_out", "cord_joined")
DEAD = (*UNPLUGGED, "cord_in_hand")  # nothing is energised: a meter brings the only source
ENERGISED = (
    AS_FOUND, "pedestal_alone", "cord_alone", "main_off", "branches_off", "one_load", "suspect_out", "test_load", "inverter_settled",
    "without_y", "other_pedestal", "light_load",
)  # fmt: skip
LIGHT_WATTS = 500.0
TEST_LOAD_WATTS = 1200.0
METER, METER_OHMS, METER_VOLTS = "meter", 1000.0, 1.0
LEAD_OHMS = 0.01


def expand(context: str, installation: Installation) -> tuple[str, ...]:
    """The single states behind a context: `one_load` is one state per own load."""
    if context == "one_load":
        return tuple(f"one_load:{part.id}" for part in own_parts(installation) if part.kind == "load")
    return (context,)


def setting(context: str, installation: Installation) -> Installation | None:
    """What is plugged into what in this state; None when the stated parts cannot make it."""
    if context != AS_FOUND and not installation.of_kind("panel"):
        return None  # a dock without a boat has no other state
    if context == "without_y":
        return _without_y(installation)
    if context == "other_pedestal":
        return _other_pedestal(installation)
    if context in UNPLUGGED:
        return _inverters_in("passing", "off", installation)  # switched off before anything is measured, its bond relay falls in
    if context == "inverter_settled":
        return _inverters_in("inverting", "passing", installation)
    return installation


def _inverters_in(before: str, after: str, installation: Installation) -> Installation:
    """The same parts, the own inverters that are in one state put into another."""
    found = [part.id for part in own_parts(installation) if part.kind == "inverter" and part.values["state"] == before]
    if not found:
        return installation
    rows = raw_rows(installation)
    for inverter in found:
        rows[inverter]["state"] = after
    return read({"parts": list(rows.values())})


def raw_rows(installation: Installation) -> dict[str, dict[str, object]]:
    """The parts as raw rows again, to be changed and read anew."""
    rows = {}
    for part in installation.parts:
        given = {key: value for key, value in part.values.items() if value is not None}
        rows[part.id] = {"id": part.id, "kind": part.kind, **given}
    return rows


def _without_y(installation: Installation) -> Installation | None:
    """The whole Y out, and one straight adapter in its place on one receptacle."""
    rows = raw_rows(installation)
    found = [part for part in own_parts(installation) if part.kind == "adapter" and len(part.parents) == 2]
    if not found:
        return None
    for part in found:
        rows[part.id] |= {"style": "straight_30_50", "from": [part.parents[0]], "wired": "straight"}
    return read({"parts": list(rows.values())})


def _other_pedestal(installation: Installation) -> Installation | None:
    """The same cord in a free receptacle of the same type at another pedestal."""
    rows = raw_rows(installation)
    mine = [part for part in own_parts(installation) if part.kind == "receptacle"]
    if len(mine) != 1:
        return None
    taken = {base(parent) for part in installation.parts for parent in part.parents}
    for part in installation.of_kind("receptacle"):
        if part.id not in taken and part.values["connector"] == mine[0].values["connector"] and part.parents != mine[0].parents:
            for child in installation.children(mine[0].id):
                rows[child.id]["from"] = [part.id] if child.kind == "adapter" else part.id
            return read({"parts": list(rows.values())})
    return None


def switched(context: str, installation: Installation, network: Network) -> Network:
    """The network in this state. `network` is the (possibly faulted) network of the context's own installation."""
    name, _, detail = context.partition(":")
    mine = own_parts(installation)
    if name == AS_FOUND:
        return network
    if name in ("pedestal_alone", "cord_alone"):
        kept = ("receptacle",) if name == "pedestal_alone" else ("receptacle", "cord")
        return _without_owners(network, {part.id for part in mine if part.kind not in kept})
    if name == "main_off":
        return _opened(network, {branch for part in mine if part.kind == "main" for branch in opened_by_main(part)})
    if name == "branches_off":
        return _breakers_open(network, installation, mine)
    if name == "one_load":
        return _breakers_open(network, installation, mine, running={detail})
    if name in ("light_load", "without_y", "other_pedestal"):
        light = {part.id for part in mine if part.kind == "load" and _watts(part) < LIGHT_WATTS}
        return _breakers_open(network, installation, mine, running=light)
    if name in ("test_load", "inverter_settled"):
        return _with_test_load(_breakers_open(network, installation, mine), installation, mine)
    if name == "suspect_out":
        return _without_owners(network, {part.id for part in mine if part.kind == "load" and part.flag("element")})
    if name in DEAD:
        return _dead(name, network, installation, mine)
    raise ValueError(f"no such context: {context}")


def _without_owners(network: Network, owners: set[str]) -> Network:
    return without_branches(network, lambda branch: branch.owner in owners)


def _watts(part: Part) -> float:
    watts = part.number("watts")
    return watts if watts is not None else LIGHT_WATTS


def _breakers_open(network: Network, installation: Installation, mine: tuple[Part, ...], running: set[str] | None = None) -> Network:
    """Every own branch breaker open, except those of the `running` loads; a load without a breaker is switched off instead."""
    opened: set[str] = set()
    for part in mine:
        if part.kind == "breaker" and not running_below(installation, part, running or set()):
            opened |= opened_by_breaker(part, installation)
        if part.kind == "load" and part.id not in (running or set()) and installation.part(base(part.parents[0])).kind != "breaker":
            opened |= {f"{part.id}.switch", f"{part.id}.switch2"}
    return _opened(network, opened)


def _opened(network: Network, branch_ids: set[str]) -> Network:
    return without_branches(network, lambda branch: branch.id in branch_ids)


def running_below(installation: Installation, breaker: Part, running: set[str]) -> bool:
    """Whether a breaker feeds one of the running loads."""
    return bool(running & installation.downstream(breaker.id))


def _with_test_load(network: Network, installation: Installation, mine: tuple[Part, ...]) -> Network:
    """One plain resistive load, line to neutral, on the panel's first line."""
    panel = next(part.id for part in mine if part.kind == "panel")
    supply = installation.of_kind("supply")[0]
    system = SYSTEMS[supply.text("system")]
    volts = nominal_volts("L1-N", system, supply.number("volts") or system.volts)
    return with_branches(
        network, Branch("test_load", f"{panel}.L1", f"{panel}.N", complex(volts**2 / TEST_LOAD_WATTS), "load", "test_load")
    )


def _dead(name: str, network: Network, installation: Installation, mine: tuple[Part, ...]) -> Network:
    """The unplugged boat, or the cord in the hand: no shore, no capacitor, no sensor; the meter is added where it is read."""
    cords = {part.id for part in mine if part.kind in ("cord", "adapter")}
    boat = {part.id for part in mine if part.kind not in ("cord", "adapter", "receptacle")}
    kept = cords if name == "cord_in_hand" else boat
    left = tuple(_to_a_meter(branch) for branch in network.branches if branch.owner in kept and branch.kind not in ("filter", "source"))
    alone = Network(network.hertz, network.reference, left)
    if name == "cord_in_hand":
        return alone
    panel = next(part for part in mine if part.kind == "panel")
    if name == "cord_out":
        return with_branches(_breakers_open(alone, installation, mine), meter_branch(panel.id))
    lines = [line for line in LINES if any(branch.to_node == f"{panel.id}.{line}" for branch in left)]
    leads = [Branch(f"lead.{line}", f"{panel.id}.{line}", f"{panel.id}.N", complex(LEAD_OHMS), "line", METER) for line in lines]
    return with_branches(alone, *leads, meter_branch(panel.id))


def _to_a_meter(branch: Branch) -> Branch:
    """A branch as a resistance meter's direct current sees it: conductors and windings are their copper."""
    return branch if branch.kind == "load" else dataclasses.replace(branch, impedance=complex(branch.impedance.real))


def meter_branch(panel: str) -> Branch:
    """A resistance meter from the ground bus to the neutral bus: an emf behind a known resistance."""
    return Branch(METER, f"{panel}.G", f"{panel}.N", complex(METER_OHMS), "source", METER, complex(METER_VOLTS))


def worst_for_blades(installation: Installation) -> Installation:
    """The same parts in the state against which bare blades are judged: all closed aboard, and of the loads those across two lines on.

    A switch that is off now is on a minute later, with the same plug out. A load from line to neutral only pulls a loose blade down
    towards neutral, so it counts as off; where the supply has no neutral it pulls towards another line, and counts as on.
    """
    rows = raw_rows(installation)
    neutral = SYSTEMS[installation.of_kind("supply")[0].text("system")].neutral
    for row in rows.values():
        if row["kind"] == "load":
            row["on"] = not (neutral and str(row["across"]).endswith("N"))
        if row["kind"] in ("breaker", "main"):
            row["closed"] = True
    return read({"parts": list(rows.values())})


def left_behind(context: str, installation: Installation) -> Network | None:
    """The healthy network of the state a test leaves, at its worst for bare blades; None when it cannot be made."""
    made = setting(context, installation)
    if made is None:
        return None
    loaded = worst_for_blades(made)
    return switched(AS_FOUND if context == "one_load" else context, loaded, build(loaded))
