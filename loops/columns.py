"""The columns of the sheets that wire instruments together: loops, cables, cable types, terminations."""

from __future__ import annotations

from instruments.column import Column, Reads, SheetKind
from loops.record import Cable, CableType, LoopRow, Termination

# Headings are lists of words, several a line: one a line, the formatter would make three thousand of them.
# fmt: off
PER = {
    "conductor": ("conductor", "core", "per conductor", "single"),
    "loop": ("loop", "per loop", "pair", "loop ohm"),
}


def _text(field: str, title: str, *headings: str) -> Column:
    return Column(field=field, title=title, headings=headings)


def _number(field: str, title: str, unit: str, *headings: str) -> Column:
    return Column(field=field, title=title, reads=Reads.NUMBER, unit=unit, headings=headings)


LOOPS = SheetKind(
    name="Loops",
    names=("loop", "loops", "loop list", "circuits", "circuit list", "kreise", "loop schedule"),
    key=(
        ("number", "supply_nominal_v"),
        ("number", "supply_min_v"),
        ("number", "kind"),
        ("number", "card"),
        ("number", "cable_length_m"),
        ("number", "range_resistor_ohm"),
        ("number", "supply_max_v"),
        ("number", "circuit", "barrier"),
        ("number", "circuit", "hart"),
        ("number", "circuit", "intrinsically_safe"),
        ("number", "circuit", "parent_loop"),
        ("number", "circuit", "drawing"),
    ),
    record=LoopRow,
    columns=(
        _text(
            "number", "number", "number", "loop", "loop no", "loop number", "no", "regelkreis", "loop id", "loop nr",
        ),
        _text(
            "circuit", "circuit or tag", "circuit or tag", "circuit", "tag", "circuit tag", "device", "circuit / tag",
            "instrument", "tag no",
        ),
        _text(
            "service", "service", "service", "description", "loop service", "loop description", "benennung"
        ),
        _text(
            "kind", "kind", "kind", "type", "io type", "i/o type", "loop type", "signal", "circuit kind",
            "signal type", "i/o",
        ),
        _number(
            "supply_min_v", "supply V min", "V", "supply v min", "supply min", "min supply", "supply min v",
            "supply voltage min", "vmin", "supply volts min",
        ),
        _number(
            "supply_nominal_v", "supply V nominal", "V", "supply v nominal", "supply nominal", "supply", "supply v",
            "supply voltage", "nominal supply", "supply v nom", "supply nom", "supply volts nominal", "supply nom v",
            "vnom",
        ),
        _number(
            "supply_max_v", "supply V max", "V", "supply v max", "supply max", "max supply", "supply max v",
            "supply voltage max", "vmax", "supply volts max",
        ),
        _text("card", "card", "card", "i/o card", "io card", "module", "card type"),
        _text(
            "barrier", "barrier", "barrier", "isolator", "barrier / isolator", "barrier type", "barrier tag"
        ),
        _number(
            "range_resistor_ohm", "range resistor", "ohm", "range resistor ohm", "range resistor", "receiver ohm",
            "load ohm", "resistor", "burden", "load resistor", "receiver",
        ),
        Column(field="hart", title="HART", reads=Reads.YES_NO, headings=("hart", "hart y/n")),
        Column(
            field="intrinsically_safe",
            title="intrinsically safe",
            reads=Reads.YES_NO,
            headings=("intrinsically safe", "is", "ex i", "exi", "is loop", "is circuit", "is y/n"),
        ),
        _text("cable_type", "cable type", "cable type", "cable code", "cable spec", "type of cable"),
        _number(
            "cable_length_m", "cable length", "m", "cable length", "length", "cable length m", "length m",
            "total cable length", "loop cable length", "route length",
        ),
        _text("parent_loop", "parent loop", "parent loop", "parent", "cascade from", "master loop"),
        _text(
            "drawing", "drawing", "drawing", "loop drawing", "drawing no", "loop dwg", "dwg", "loop diagram"
        ),
    ),
)

TERMINATIONS = SheetKind(
    name="Terminations",
    names=("termination", "terminations", "wiring", "termination schedule", "klemmenplan", "connections"),
    key=(("from_item", "to_item", "from_terminal"), ("circuit", "from_terminal", "to_terminal")),
    record=Termination,
    columns=(
        _text(
            "circuit", "circuit or tag", "circuit or tag", "circuit", "tag", "loop", "circuit tag", "tag no",
            "signal",
        ),
        _text(
            "from_item", "from item", "from item", "from", "from device", "from strip", "von", "from equipment",
        ),
        _text(
            "from_terminal", "from terminal", "from terminal", "from term", "terminal from", "from terminal no",
        ),
        _text("to_item", "to item", "to item", "to", "to device", "to strip", "nach", "to equipment"),
        _text("to_terminal", "to terminal", "to terminal", "to term", "terminal to", "to terminal no"),
        _text("cable", "cable", "cable", "cable no", "cable tag", "cable number", "kabel"),
        _text("pair", "pair", "pair", "pair no", "pair number", "triad"),
        _text("core", "core", "core", "core no", "conductor", "ader", "wire"),
        _text("colour", "colour", "colour", "color", "core colour", "farbe", "core color"),
        _text(
            "screen_earthed_at", "screen earthed at", "screen earthed at", "screen", "shield", "shield earthed at",
            "screen earth",
        ),
        _text(
            "wire_mark", "wire mark", "wire mark", "wire no", "ferrule", "marker", "wire number", "wire label"
        ),
        Column(
            field="common",
            title="common or bridged",
            reads=Reads.YES_NO,
            headings=("common or bridged", "common", "bridged", "bridge", "link"),
        ),
    ),
)

CABLES = SheetKind(
    name="Cables",
    names=("cable", "cables", "cable schedule", "cable list", "kabelliste", "kabel"),
    key=(("number", "from_item", "to_item"), ("number", "length_m"), ("number", "type", "to_item")),
    record=Cable,
    columns=(
        _text(
            "number", "number", "number", "cable", "cable no", "cable number", "cable tag", "no", "kabel nr",
            "cable id", "kabel", "kabelnummer",
        ),
        _text("type", "type", "type", "cable type", "cable code", "spec", "typ", "cable spec", "kabeltyp"),
        _text(
            "from_item", "from", "from", "from item", "from device", "source", "von", "from equipment", "start",
        ),
        _text("to_item", "to", "to", "to item", "to device", "destination", "nach", "to equipment", "end"),
        _number(
            "length_m", "length", "m", "length", "length m", "cable length", "route length", "länge", "est length",
            "estimated length", "cable length m", "laenge",
        ),
        Column(
            field="pairs",
            title="pairs",
            reads=Reads.COUNT,
            headings=("pairs", "no of pairs", "number of pairs", "paare", "pair count", "prs", "cores pairs"),
        ),
    ),
)

CABLE_TYPES = SheetKind(
    name="Cable types",
    names=("cable type", "cable types", "cable catalogue", "cable catalog", "kabeltypen", "cable spec"),
    key=(("code", "conductor"), ("code", "ohm_per_km"), ("code", "capacitance_pf_per_m")),
    record=CableType,
    columns=(
        _text("code", "code", "code", "cable type", "type", "type code", "cable code", "id", "typ", "spec"),
        _text(
            "conductor", "conductor size", "conductor", "conductor mm2", "conductor mm²", "conductor size", "csa",
            "awg", "size", "conductor mm2 or awg", "mm2", "cross section", "querschnitt", "core size",
        ),
        _text("class_", "class", "class", "conductor class", "stranding", "strand class"),
        Column(
            field="tinned", title="tinned", reads=Reads.YES_NO, headings=("tinned", "tinned y/n", "verzinnt")
        ),
        _number(
            "ohm_per_km", "ohm per km", "ohm/km", "ohm per km", "ohm/km", "resistance ohm/km", "resistance",
            "ohm/1000ft", "ohm/kft", "loop resistance", "loop ohm/km",
            "r ohm/km", "dc resistance", "resistance per km",
        ),
        Column(
            field="resistance_per",
            title="per conductor or per loop",
            reads=Reads.WORD,
            words=PER,
            headings=(
                "per conductor or per loop", "resistance per", "per", "conductor or loop", "basis", "ohm per",
            ),
        ),
        _number(
            "capacitance_pf_per_m", "capacitance", "pF/m", "capacitance", "capacitance pf/m", "c pf/m",
            "capacitance nf/km", "c nf/km", "kapazität", "pf/m", "nf/km", "pf/ft", "cable capacitance", "c",
        ),
        _number(
            "inductance_uh_per_m", "inductance", "uH/m", "inductance", "inductance uh/m", "l uh/m",
            "inductance mh/km", "l mh/km", "inductance µh/m", "induktivität", "uh/m", "mh/km",
            "cable inductance", "l",
        ),
        _number(
            "lr_uh_per_ohm", "inductance/resistance", "uH/ohm", "inductance/resistance", "l/r", "l/r uh/ohm",
            "l/r ratio", "inductance resistance",
        ),
        _text(
            "extension_type", "extension type", "extension type", "tc extension", "extension", "thermocouple type",
            "tc type", "compensating type",
        ),
        _number(
            "insulation_temperature_c", "insulation temperature", "degC", "insulation temperature", "max temperature",
            "temperature rating", "insulation temp", "temp rating",
        ),
    ),
)

SHEETS = (LOOPS, TERMINATIONS, CABLES, CABLE_TYPES)
