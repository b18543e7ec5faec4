"""An instrument in its plant: its record, and what the other lists say of it."""

from __future__ import annotations

from dataclasses import dataclass, field

from instruments.area import Area
from instruments.kind import Kind
from instruments.marking import Marking
from instruments.origin import Cell
from instruments.quantity import Quantity
from instruments.record import DeviceType, Instrument
from instruments.tag import TagReading

NOT_LIVE = frozenset({"deleted", "void", "future", "spare", "demolished"})


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Installed:
    """One instrument as the rules and the sheets see it.

    Compared by identity: two rows that are alike are still two instruments.

    Attributes
    ----------
    record
        What its row (or rows, merged) says.
    name
        The subject's name: the tag; ``TAG (2)`` where rows share a tag and disagree; the sheet and
        the first filled value where there is no tag.
    tag
        How the tag was understood; None without one.
    kind, kind_from
        The kind, and whether the ``row``, the device ``type`` or the ``letters`` gave it; blank
        where it is not known.
    live
        False for deleted, void, future, spare and demolished rows.
    equipment_tag
        True where the tag names equipment (one letter and a number on an I/O row).
    listed_type
        The catalogue entry that the row names.
    type
        The limits that hold for it: the row's own where it states any, else the catalogue's.
    area
        The area of the area list, or the one its own classification makes.
    unclassified
        True where its row or area says that it stands in no hazardous area.
    marking
        Its Ex marking as understood (the row's, else the type's); None where there is none.
    loop, loop_from
        The loop's number, and whether the loop ``column`` or the ``tag`` gave it.
    signals
        The rows that give its signals, one a circuit; `record` itself where there is one.
    listed
        The I/O list's rows of its tag, where the index gives it no channel. They are not merged into
        the record: what the I/O list alone says is seen by the rules about channels, and no other.
    measuring_point
        True where the tag names a measuring point in the older manner: it may carry the
        transmitter's or the element's kind, and is its loop's measurement.
    body
        gauge, absolute, differential, or None.
    atmospheric_pa, default_reference
        The plant's, so that a value can be read without the plant at hand.
    """

    record: Instrument
    name: str
    tag: TagReading | None = None
    kind: Kind | None = None
    kind_from: str = ""
    live: bool = True
    equipment_tag: bool = False
    listed_type: DeviceType | None = None
    type: DeviceType | None = None
    area: Area | None = None
    unclassified: bool = False
    marking: Marking | None = None
    loop: str | None = None
    loop_from: str = ""
    signals: tuple[Instrument, ...] = ()
    listed: tuple[Instrument, ...] = ()
    measuring_point: bool = False
    body: str | None = None
    notes: tuple[str, ...] = ()
    merged_rows: int = field(default=1)

    @property
    def letters(self) -> str:
        """The tag's letters; empty without a parsed tag."""
        return self.tag.letters if self.tag and self.tag.letters else ""

    @property
    def channels(self) -> tuple[Instrument, ...]:
        """The rows that say on which channels it is: the I/O list's where the index says nothing of them."""
        return self.listed or self.signals

    @property
    def io_address(self) -> str | None:
        """Its first I/O address; None where no row gives one."""
        own = self.record.io_address
        return own if own is not None else next((row.io_address for row in self.channels if row.io_address), None)

    def reference(self, quantity: Quantity) -> str | None:
        """Return the reference of a pressure: its own, else its body's; None where neither says."""
        if quantity.reference and quantity.reference != "unstated":
            return quantity.reference
        return self.body

    def cells(self, name: str) -> tuple[Cell, ...]:
        """Return the cells of a field: plain for the row, ``type.`` for its limits, ``area.`` for its area."""
        owner, _, field_name = name.rpartition(".")
        if owner == "type":
            if self.type is None:
                return self.record.cells("device_type")
            return self.type.cells(field_name)
        if owner == "area":
            if self.area is None:
                return self.record.cells("area_classification") or self.record.cells("area")
            return self.area.cells(field_name)
        return self.record.cells(name)
