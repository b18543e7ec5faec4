"""Which loops have a sheet, in which order, and which have none."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final

from instruments.installed import Installed
from instruments.kind import Kind
from instruments.tag import natural_key
from loops.circuit import Circuit, Loop
from loops.plant import Plant, name_key

AREA_NOT_GIVEN: Final = "Area not given"


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class LoopOnPaper:
    """A loop that has a sheet: at least one electrical signal.

    Attributes
    ----------
    name
        The loop's number; of a circuit that belongs to no loop, the circuit's.
    area
        The area that it is filed under, with its name: its first circuit's device's.
    members
        Its live instruments, and those of other loops that stand on its circuits.
    """

    name: str
    area: str
    members: tuple[Installed, ...]
    circuits: tuple[Circuit, ...]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class NoSheet:
    """A loop, or an instrument in no loop, without an electrical signal; why it has no sheet."""

    name: str
    members: tuple[Installed, ...]
    why: str


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Sheets:
    """All loops that have a sheet, in the order of the file, and all that have none.

    Every live instrument is a member of one of them.
    """

    drawn: tuple[LoopOnPaper, ...]
    left_out: tuple[NoSheet, ...]


def sheets_of(plant: Plant) -> Sheets:
    """Return which loops of the plant have a sheet: by area, then by loop, in natural order.

    A circuit stands on the sheet of its own loop; where the loop list files it under a number that
    no instrument bears, on the sheet of its device's loop; where there is none, on one of its own.
    """
    return plant.once("loop sheets", _sheets_of)  # type: ignore[no-any-return]


def _sheets_of(plant: Plant) -> Sheets:
    loops: dict[str, Loop] = {name_key(loop.name): loop for loop in plant.loops}
    circuits: dict[str, list[Circuit]] = defaultdict(list)
    names: dict[str, str] = {}
    for circuit in plant.circuits:
        name = circuit.loop or circuit.name
        for candidate in (circuit.loop, circuit.device.loop):
            if candidate and name_key(candidate) in loops:
                name = loops[name_key(candidate)].name
                break
        circuits[name_key(name)].append(circuit)
        names.setdefault(name_key(name), name)
    drawn: list[LoopOnPaper] = []
    shown: set[int] = set()
    for key, found in circuits.items():
        members: dict[int, Installed] = {}
        if key in loops:
            members = {id(each): each for each in loops[key].members}
        for circuit in found:
            for each in (*circuit.members, circuit.device):
                members.setdefault(id(each), each)
        shown.update(members)
        drawn.append(
            LoopOnPaper(
                name=names[key],
                area=area_title(found[0].device) or filed_under(found[0].device),
                members=tuple(sorted(members.values(), key=lambda each: natural_key(each.name))),
                circuits=tuple(sorted(found, key=lambda circuit: natural_key(circuit.name))),
            )
        )
    left_out: list[NoSheet] = []
    for key, loop in loops.items():
        if key not in circuits:
            shown.update(id(each) for each in loop.members)
            left_out.append(NoSheet(name=loop.name, members=loop.members, why=_why(loop.members)))
    left_out.extend(
        NoSheet(name=each.name, members=(each,), why=_why((each,)))
        for each in plant.instruments
        if each.live and id(each) not in shown
    )
    drawn.sort(key=lambda each: (each.area == AREA_NOT_GIVEN, natural_key(each.area), natural_key(each.name)))
    left_out.sort(key=lambda each: natural_key(each.name))
    return Sheets(drawn=tuple(drawn), left_out=tuple(left_out))


def filed_under(device: Installed) -> str:
    """Return the code of the area that a device stands in, as the list names it."""
    if device.area is not None and device.area.code:
        return device.area.code
    return device.record.area or device.record.area_classification or AREA_NOT_GIVEN


def area_title(device: Installed) -> str | None:
    """Return the area that a device stands in, with its name where the area list has one; None where none is named."""
    area = device.area
    if area is not None and area.code and not area.from_row_cell:
        return f"{area.code} {area.name}" if area.name and area.name != area.code else area.code
    return device.record.area


_IN_CABINETS: Final = frozenset(
    {Kind.JUNCTION_BOX, Kind.PANEL, Kind.BARRIER, Kind.ISOLATOR, Kind.CARD, Kind.POWER_SUPPLY}
)


def _why(members: Iterable[Installed]) -> str:
    kinds = {each.kind for each in members}
    if None in kinds:
        return "kind not known, no signal given"
    if kinds <= {Kind.SOFT_FUNCTION}:
        return "in the control system only"
    if kinds <= _IN_CABINETS:
        return "box, panel or supply"
    return "local only"
