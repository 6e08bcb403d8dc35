"""Whose boat it is: the parts of one boat, and of what it is plugged into."""

from __future__ import annotations

from typing import TYPE_CHECKING

from strayline.errors import CaseError
from strayline.installation import zone_parts
from strayline.parts import base

if TYPE_CHECKING:
    from collections.abc import Iterator

    from strayline.parts import Installation, Part


def own_parts(installation: Installation, panel_id: str | None = None) -> tuple[Part, ...]:
    """The parts of one boat and of what it is plugged into, receptacles included: of the stated panel's, else the first panel's."""
    panels = installation.of_kind("panel")
    if not panels:
        return ()
    panel = installation.part(panel_id) if panel_id else panels[0]
    found = {panel.id}
    for receptacle in installation.of_kind("receptacle"):
        zone = zone_parts(installation, receptacle)
        if panel.id in zone:
            found |= zone
    if len(found) == 1:  # nothing plugged in
        found |= set(installation.downstream(panel.id))
    return tuple(part for part in installation.parts if part.id in found)


def panel_of(installation: Installation, load: Part) -> Part:
    """The panel a load hangs on, through whatever stands between (an inverter counts as one where there is no other).

    Raises CaseError for a load ashore.
    """
    for kind in ("panel", "inverter"):
        for part in _above(installation, load):
            if part.kind == kind:
                return part
    raise CaseError("at", "must be a load aboard", load.id)


def other_panel(installation: Installation, load: Part) -> Part | None:
    """Another panel of the boat that a load is on, None where its own is the only one."""
    own = panel_of(installation, load)
    return next((part for part in own_parts(installation, own.id) if part.kind == "panel" and part.id != own.id), None)


def main_of(installation: Installation, load: Part) -> Part:
    """What a load's panel hangs behind: the boat's main, else the last part before the panel."""
    before = list(_above(installation, panel_of(installation, load)))
    return next((part for part in before if part.kind == "main"), before[0])


def _above(installation: Installation, part: Part) -> Iterator[Part]:
    """The parts that feed this one, nearest first, by the first supply end of each."""
    while part.parents and part.parents[0]:
        part = installation.part(base(part.parents[0]))
        yield part
