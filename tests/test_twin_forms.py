"""The same lists in another form: another order, other units, one flat sheet. What is found stays the same."""

import re
from collections import Counter
from collections.abc import Callable, Mapping
from fractions import Fraction
from pathlib import Path

import pytest

from tests.marrowbeck import (
    INDEX,
    PACKAGE,
    Rows,
    Sheets,
    audit_of,
    demo_rows,
    found,
    headings,
    look_of,
    nears,
    reviews,
    shuffled,
    with_changes,
    without_dittos,
    write_files,
)
from tests.twin import batches, twin
from validation.audit import Audit

INSIDE = [batch for batch in batches(near.change for near in nears()) if len(batch) > 4]


def identities(result: Audit) -> Counter[tuple[object, ...]]:
    """Return what is found by outcome, rule, subject, part and fields: neither texts nor cells."""
    return Counter((each.outcome, *each.identity) for each in result.findings)


def nearly_broken(batch: int = 1) -> Sheets:
    """Return the twin with many changes that stay just inside a rule."""
    return with_changes(twin().rows, INSIDE[batch])


# A full vacuum counts as it is written, with as many digits.
AS_WRITTEN = ("PG-5027",)


# ------------------------------------------------------------------------------------------------------- order


@pytest.mark.parametrize(("rows", "seed"), [(demo_rows, 2), (demo_rows, 3), (demo_rows, 4), (nearly_broken, 5)])
def test_the_order_of_rows_columns_and_sheets_changes_nothing(rows: Callable[[], Sheets], seed: int) -> None:
    moved = shuffled(rows(), seed)
    assert list(moved) != list(rows())
    assert identities(twin().audit(moved)) == identities(twin().audit(rows()))


@pytest.mark.parametrize("seed", [6, 7])
def test_no_order_changes_what_is_said(seed: int) -> None:
    moved = shuffled(demo_rows(), seed)
    said = [(each.identity, each.message, each.found, each.working) for each in twin().audit(demo_rows()).findings]
    other = [(each.identity, each.message, each.found, each.working) for each in twin().audit(moved).findings]
    assert other == said


# ------------------------------------------------------------------------------------------------------- units

# NIST SP 811 (2008), appendix B: factors to the SI unit, exact where the definition is: the inch 0.0254 m, the
# pound-force 4.448 221 615 260 5 N, the pound 0.453 592 37 kg, the US gallon 231 cubic inches, the bar 10^5 Pa.
INCH = Fraction("0.0254")
POUND = Fraction("0.45359237")
PSI = Fraction("4.4482216152605") / INCH**2
SI: Mapping[str, Fraction] = {
    "Pa": Fraction(1),
    "mbar": Fraction(100),
    "kPa": Fraction(1000),
    "bar": Fraction(10**5),
    "MPa": Fraction(10**6),
    "psi": PSI,
    "m": Fraction(1),
    "mm": Fraction(1, 1000),
    "in": INCH,
    "ft": 12 * INCH,
    "m3/h": Fraction(1, 3600),
    "m³/h": Fraction(1, 3600),
    "l/h": Fraction(1, 3600 * 1000),
    "l/s": Fraction(1, 1000),
    "l/min": Fraction(1, 60 * 1000),
    "GPM": 231 * INCH**3 / 60,
    "kg/h": Fraction(1, 3600),
    "t/h": Fraction(1000, 3600),
    "lb/h": POUND / 3600,
    "kg": Fraction(1),
    "t": Fraction(1000),
    "lb": POUND,
    "mm/s": Fraction(1, 1000),
    "in/s": INCH,
}  # fmt: skip
# By convention: a column of water of 1000 kg/m3 at 9.806 65 m/s2.
SI = {**SI, "inH2O": Fraction("9.80665") * 1000 * INCH}

METRIC = {
    "bar": "kPa", "mbar": "Pa", "kPa": "bar", "MPa": "bar", "Pa": "mbar", "psi": "bar", "inH2O": "mbar",
    "m": "mm", "mm": "m", "in": "mm", "m3/h": "l/s", "m³/h": "l/min", "l/h": "m3/h", "GPM": "m3/h",
    "kg/h": "t/h", "t/h": "kg/h", "kg": "t", "mm/s": "in/s", "in/s": "mm/s", "°C": "°F", "degC": "°F", "°F": "°C",
}  # fmt: skip
CUSTOMARY = {
    "bar": "psi", "mbar": "inH2O", "kPa": "psi", "MPa": "psi", "Pa": "mbar", "psi": "kPa", "inH2O": "Pa",
    "m": "ft", "mm": "in", "in": "m", "m3/h": "GPM", "m³/h": "GPM", "l/h": "GPM", "GPM": "l/s",
    "kg/h": "lb/h", "t/h": "lb/h", "kg": "lb", "mm/s": "in/s", "in/s": "mm/s", "°C": "°F", "degC": "degF", "°F": "degC",
}  # fmt: skip

_PRESSURE = re.compile(r"(mbar|bar|MPa|kPa|Pa|psi)(?:\(([ga])\)|([ga]))?")
_VALUE = re.compile(r"(?P<number>-?\d+(?:\.\d+)?)(?: ?(?P<unit>[^\d\s.,].*))?")
_RANGE = re.compile(r"(?P<low>-?\d+(?:\.\d+)?) ?(?P<between>-|…|to) ?(?P<high>-?\d+(?:\.\d+)?) (?P<unit>[^\d\s.,].*)")
OPERATING = [f"{what} {end}" for what in ("Oper. Press. (barg)", "Oper. Temp. (°C)") for end in ("Min", "Norm", "Max")]
UNIT_IN_HEADING = {
    **{heading: "barg" if "barg" in heading else "°C" for heading in OPERATING},
    "Design Press. (barg)": "barg",
    "Design Temp. (°C)": "°C",
    "Temp. at Device (°C)": "°C",
    "Set Press. (barg)": "barg",
}
OF_THE_RANGE = (
    "Operating Value Min", "Operating Value Norm", "Operating Value Max", "Alarms LL", "Alarms L", "Alarms H",
    "Alarms HH", "Trip",
)  # fmt: skip
LIMITS = ("LRL", "URL", "Min. span", "Over-range limit", "Static limit")
TYPE_TEMPERATURES = (
    "Process T min (°C)", "Process T max (°C)", "Seal temp. min (°C)", "Seal temp. max (°C)", "Ambient min (°C)",
    "Ambient max (°C)",
)  # fmt: skip


def parts(unit: str) -> tuple[str, str]:
    """Return a unit and the reference behind it: ``mbar(g)`` is mbar and g."""
    pressure = _PRESSURE.fullmatch(unit.replace(" ", ""))
    return (pressure[1], pressure[2] or pressure[3] or "") if pressure else (unit, "")


def in_other_unit(unit: str, units: Mapping[str, str]) -> str | None:
    """Return the unit that takes a unit's place, None where it keeps it."""
    bare, reference = parts(unit)
    other = units.get(bare)
    if other is None:
        return None
    if other == "inH2O" and reference:
        return f"psi{reference}"  # nobody writes a column of water with its reference
    return f"{other}{reference}"


def number_in(number: str, unit: str, other: str) -> str:
    """Write a number of a unit in another, to twelve digits."""
    bare, _ = parts(unit)
    target, _ = parts(other)
    value = Fraction(number)
    if bare in ("°C", "degC", "°F", "degF"):
        value = value * Fraction(9, 5) + 32 if bare.endswith("C") else (value - 32) * Fraction(5, 9)
    else:
        value = value * SI[bare] / SI[target]
    text = f"{float(value):.12g}"
    return f"{float(value):.12f}".rstrip("0") if "e" in text else text


def value_in(text: str, unit: str | None, units: Mapping[str, str]) -> str:
    """Write a cell's value in another unit and with it; a cell that is no plain value is left."""
    told = _VALUE.fullmatch(text)
    if told is None:
        return text
    own = told["unit"] or unit
    other = in_other_unit(own, units) if own else None
    return f"{number_in(told['number'], own, other)} {other}" if own and other else text


def range_in(text: str, units: Mapping[str, str]) -> str:
    """Write a cell's range in another unit."""
    told = _RANGE.fullmatch(text)
    other = in_other_unit(told["unit"], units) if told else None
    if told is None or other is None:
        return text
    low, high = (number_in(told[end], told["unit"], other) for end in ("low", "high"))
    return f"{low} to {high} {other}"


def test_the_converter_says_what_the_tables_say() -> None:
    # NIST SP 811, appendix B.8: psi 6.894 757 kPa, gal/min 6.309 020 x 10^-5 m3/s, inch of water 249.0889 Pa.
    assert number_in("1", "psig", "kPag") == "6.89475729317"
    assert number_in("1", "GPM", "l/s") == "0.0630901964"
    assert number_in("1", "inH2O", "Pa") == "249.08891"
    assert number_in("1", "ft", "m") == "0.3048"
    assert (number_in("100", "°C", "°F"), number_in("-40", "°F", "°C")) == ("212", "-40")
    assert value_in("12 mbarg", "barg", METRIC) == "1200 Pag"
    assert value_in("8", "barg", CUSTOMARY) == "116.030190184 psig"
    assert range_in("-20…60 °C", METRIC) == "-4 to 140 °F"
    assert range_in("0-1600 kPa(g)", METRIC) == "0 to 16 barg"
    assert range_in("-134.8 to -12.3 mbar", METRIC) == "-13480 to -1230 Pa"
    assert [range_in(text, METRIC) for text in ("0-2", "#REF!", "700-900 °Bé")] == ["0-2", "#REF!", "700-900 °Bé"]


def unit_of_values(field: str, system: str) -> str | None:
    """Return the unit of what stands beside a range without its own: the range's, the system's of another dimension."""
    told = [match["unit"] for match in map(_RANGE.fullmatch, (field, system)) if match]
    if len(told) < 2:
        return told[0] if told and not (field and not _RANGE.fullmatch(field)) else None
    return told[0] if _dimension(told[0]) == _dimension(told[1]) else told[1]


def _dimension(unit: str) -> object:
    bare, _ = parts(unit)
    for alike in (("Pa", "mbar", "kPa", "bar", "MPa", "psi", "inH2O"), ("m", "mm", "in", "ft"),
                  ("m3/h", "m³/h", "l/h", "l/s", "GPM"), ("kg/h", "t/h"), ("°C", "degC", "°F", "degF")):  # fmt: skip
        if bare in alike:
            return alike
    return bare


def index_in(rows: Rows, units: Mapping[str, str]) -> Rows:
    names = headings(INDEX, rows)
    at = {name: names.index(name) for name in names}
    changed = [list(row) for row in without_dittos(INDEX, rows)]
    for row in changed[look_of(INDEX).heading + 1 :]:
        if sum(1 for each in row if each) < 2:
            continue
        unit = unit_of_values(row[at["Calibrated Range"]], row[at["DCS Range"]])
        for name in OF_THE_RANGE:
            row[at[name]] = value_in(row[at[name]], unit, units)
        for name, of_heading in UNIT_IN_HEADING.items():
            row[at[name]] = value_in(row[at[name]], of_heading, units)
        for name in ("Calibrated Range", "DCS Range"):
            row[at[name]] = range_in(row[at[name]], units)
    return changed


def package_in(rows: Rows, units: Mapping[str, str]) -> Rows:
    names = headings(PACKAGE, rows)
    at = {name: names.index(name) for name in names}
    changed = [list(row) for row in rows]
    for row in changed[look_of(PACKAGE).heading :]:
        unit = row[at["Unit"]]
        system = _RANGE.fullmatch(row[at["PLC Range"]])
        other = in_other_unit(unit, units) if unit else None
        beside = system["unit"] if system and _dimension(system["unit"]) != _dimension(unit) else unit
        for name in ("Normal", "Op. Max", "Alarm L", "Alarm H", "Alarm HH", "Trip"):
            row[at[name]] = value_in(row[at[name]], beside or None, units)
        for name in names:
            if name.endswith(("(psig)", "(°F)")):
                row[at[name]] = value_in(row[at[name]], "psig" if name.endswith("(psig)") else "°F", units)
        if other:
            for name in ("Range Min", "Range Max"):
                row[at[name]] = number_in(row[at[name]], unit, other) if row[at[name]] else ""
            row[at["Unit"]] = other
    return changed


def types_in(rows: Rows, units: Mapping[str, str]) -> Rows:
    names = headings("Device types", rows)
    at = {name: names.index(name) for name in names}
    changed = [list(row) for row in rows]
    for row in changed[look_of("Device types").heading :]:
        unit = row[at["Limit unit"]]
        other = in_other_unit(unit, units) if unit else None
        for name in TYPE_TEMPERATURES:
            row[at[name]] = value_in(row[at[name]], "°C", units)
        if not other:
            continue
        for name in LIMITS:
            told = _VALUE.fullmatch(row[at[name]])
            # A span with its own unit, 10 K, is left; those of a temperature are differences.
            if told is None or (told["unit"] is not None and told["unit"].endswith("K")):
                continue
            if told["unit"]:
                row[at[name]] = value_in(row[at[name]], None, units)
            elif name == "Min. span" and unit.startswith("°"):
                row[at[name]] = f"{row[at[name]]} {'K' if unit == '°C' else unit}"
            else:
                row[at[name]] = number_in(told["number"], unit, other)
        row[at["Limit unit"]] = other
    return changed


def in_units(rows: Sheets, units: Mapping[str, str]) -> Sheets:
    """Return the lists with their values in other units, each written with its unit."""
    return {
        **rows,
        INDEX: index_in(rows[INDEX], units),
        PACKAGE: package_in(rows[PACKAGE], units),
        "Device types": types_in(rows["Device types"], units),
    }


@pytest.mark.parametrize("units", [METRIC, CUSTOMARY], ids=["metric", "customary"])
def test_most_values_are_written_otherwise(units: Mapping[str, str]) -> None:
    rows = demo_rows()
    changed = in_units(rows, units)
    differing = {
        title: sum(
            one != other
            for row, line in zip(without_dittos(title, rows[title]), changed[title], strict=True)
            for one, other in zip(row, line, strict=True)
        )
        for title in (INDEX, PACKAGE, "Device types")
    }
    assert differing[INDEX] > 1500
    assert differing[PACKAGE] > 300
    assert differing["Device types"] > 400


@pytest.mark.parametrize("units", [METRIC, CUSTOMARY], ids=["metric", "customary"])
def test_the_unit_in_which_a_value_is_written_changes_nothing(units: Mapping[str, str]) -> None:
    as_written = twin().audit(demo_rows())
    assert identities(twin().audit(in_units(demo_rows(), units))) == identities(as_written)


@pytest.mark.parametrize("batch", range(len(INSIDE)))
def test_what_is_just_inside_a_rule_is_so_in_any_unit(batch: int) -> None:
    rows = with_changes(twin().rows, [change for change in INSIDE[batch] if change.row not in AS_WRITTEN])
    for units in (METRIC, CUSTOMARY):
        assert found(twin().audit(in_units(rows, units))) == reviews()


def test_the_unit_in_a_heading_changes_nothing() -> None:
    rows = demo_rows()
    changed = {**rows, INDEX: [list(row) for row in without_dittos(INDEX, rows[INDEX])]}
    look, names = look_of(INDEX), headings(INDEX, rows[INDEX])
    for column, name in enumerate(names):
        unit = UNIT_IN_HEADING.get(name)
        if unit is None:
            continue
        other = in_other_unit(unit, CUSTOMARY)
        assert other is not None
        above = changed[INDEX][look.heading - 1]
        above[column] = above[column].replace(f"({unit})", f"({other})")
        for row in changed[INDEX][look.heading + 1 :]:
            if re.fullmatch(r"-?\d+(?:\.\d+)?", row[column]):
                row[column] = number_in(row[column], unit, other)
    assert "Oper. Press. (psig)" in changed[INDEX][look.heading - 1]
    assert identities(twin().audit(changed)) == identities(twin().audit(rows))


# ------------------------------------------------------------------------------------------------- one flat sheet

# What the package's sheet calls the index's columns; of those with a unit in their heading the cell gets it.
INDEX_NAMES = {
    "Tag Number": "Tag No.", "Description": "Service Description", "Type": "Instrument Type",
    "Device Code": "Type Code", "PLC Range": "DCS Range", "Normal": "Operating Value Norm",
    "Op. Max": "Operating Value Max", "Alarm L": "Alarms L", "Alarm H": "Alarms H", "Alarm HH": "Alarms HH",
    "Trip": "Trip", "Trip on": "Trip Dir.", "Set Press. (psig)": "Set Press. (barg)",
    "Oper. Press. Min (psig)": "Oper. Press. (barg) Min", "Oper. Press. Norm (psig)": "Oper. Press. (barg) Norm",
    "Oper. Press. Max (psig)": "Oper. Press. (barg) Max", "Oper. Temp. Min (°F)": "Oper. Temp. (°C) Min",
    "Oper. Temp. Norm (°F)": "Oper. Temp. (°C) Norm", "Oper. Temp. Max (°F)": "Oper. Temp. (°C) Max",
    "Design Press. (psig)": "Design Press. (barg)", "Design Temp. (°F)": "Design Temp. (°C)",
    "Mounting": "Mounting", "Sqrt Tx": "Sqrt Tx", "Sqrt PLC": "Sqrt DCS", "Burnout": "Fail Dir.",
    "Fail Action": "Fail Pos.", "Contact": "Contact", "Output Signal": "Signal Type", "Wires": "Wires",
    "I/O Type": "I/O Type", "PLC Address": "I/O Address", "Module": "Card", "System": "System",
    "Power": "Power Supply", "Area": "Area", "Elec. Area Class": "Haz. Area Class.", "Ex Rating": "Ex Marking",
    "Listing": "Certificate No.", "Enclosure": "IP", "Loc.": "Location", "P&ID": "P&ID No.", "Line No.": "Line No.",
    "Equipment": "Equip.", "Loop": "Loop No.", "Cable No.": "Cable No.", "SIF": "SIF", "Voting": "Voting",
    "Furnished By": "Scope", "Notes": "Remarks",
}  # fmt: skip
# What a device type says that the index has a column for.
OF_THE_ROW = {
    "Signal": "Signal Type", "Wires": "Wires", "Ex marking": "Ex Marking", "Certificate No.": "Certificate No.",
    "IP": "IP", "Manufacturer": "Manufacturer", "Model": "Model", "Kind": "Instrument Type",
}  # fmt: skip
# On an index these would be the process's own temperatures.
IN_FULL = {
    "Process T min (°C)": "Process temperature limit min (°C)",
    "Process T max (°C)": "Process temperature limit max (°C)",
}
IN_CABINETS = ("Isolator", "Barrier", "Card", "Power supply")


def flat(rows: Sheets) -> Sheets:
    """Return the lists with the package's rows in the index, and each row with the limits of its type."""
    names, package, types = (headings(title, rows[title]) for title in (INDEX, PACKAGE, "Device types"))
    of_code = {}
    for entry in reversed(rows["Device types"][look_of("Device types").heading :]):
        of_code[entry[0].casefold()] = dict(zip(types, entry, strict=True))
    limits = [name for name in types if name not in OF_THE_ROW and name not in ("Code", "Description")]
    head = [*(name for name in names if name != "Type Code"), *limits]
    named = names.index("Tag No."), names.index("Service Description")
    body = [
        dict(zip(names, line, strict=True))
        for line in without_dittos(INDEX, rows[INDEX])[look_of(INDEX).heading + 1 :]
        if any(line[at] for at in named)
    ]
    for line in rows[PACKAGE][look_of(PACKAGE).heading :]:
        cells = dict(zip(package, line, strict=True))
        if not cells["Description"]:
            continue
        made = {}
        for name, text in cells.items():
            if name in INDEX_NAMES:
                unit = re.search(r"\((psig|°F)\)$", name)
                made[INDEX_NAMES[name]] = f"{text} {unit[1]}" if unit and re.fullmatch(r"-?[\d.]+", text) else text
        if cells["Range Min"] and cells["Range Max"]:
            made["Calibrated Range"] = f"{cells['Range Min']} to {cells['Range Max']} {cells['Unit']}"
        body.append(made)
    for row in body:
        entry = of_code.get(row.get("Type Code", "").casefold(), {})
        for of_type, of_row in OF_THE_ROW.items():
            row[of_row] = row.get(of_row) or entry.get(of_type, "")
        row |= {name: entry.get(name, "") for name in limits}
    sheet = [[IN_FULL.get(name, name) for name in head], *([row.get(name, "") for name in head] for row in body)]
    catalogue = rows["Device types"]
    start = look_of("Device types").heading
    kept = [entry for entry in catalogue[start:] if entry[types.index("Kind")] in IN_CABINETS]
    return {
        title: each
        for title, each in {**rows, INDEX: sheet, "Device types": [*catalogue[:start], *kept]}.items()
        if title != PACKAGE
    }


def in_words(area: Mapping[str, str]) -> str:
    """Return an area's classification as people write it into a row."""
    if area["System"] == "None":
        return "Safe"
    group = area["Gas group"] or area["Dust group"]
    if area["Class"]:
        return f"Class {area['Class']} Div {area['Division']} Group {group} {area['T class']}"
    hottest = area["Max. dust surface temp. (°C)"]
    return f"Zone {area['Zone']} {group} {area['T class'] or (f'T{hottest}°C' if hottest else '')}".strip()


def without_areas(rows: Sheets) -> Sheets:
    """Return flat lists with each row's area in words of its own, and no list of areas."""
    names = headings("Areas", rows["Areas"])
    listed = [dict(zip(names, line, strict=True)) for line in rows["Areas"][look_of("Areas").heading :]]
    words = {area["Area"]: in_words(area) for area in listed}
    head, *body = rows[INDEX]
    area, own = head.index("Area"), head.index("Haz. Area Class.")
    lines = [list(line) for line in body]
    for line in lines:
        line[own] = line[own] or words.get(line[area], "")
        del line[area]
    changed = {**rows, INDEX: [[name for name in head if name != "Area"], *lines]}
    return {title: each for title, each in changed.items() if title != "Areas"}


def found_in(rows: Sheets, folder: Path) -> Counter[str]:
    return Counter(
        line.replace("instrument-index:", f"{INDEX}:") for line in found(audit_of(*write_files(folder, rows)))
    )


@pytest.mark.parametrize(
    ("rows", "gained"),
    # Without its type, which is not listed, PT-4018 has no marking.
    [(demo_rows, ["HAZ02 PT-4018"]), (nearly_broken, [])],
)
def test_one_flat_sheet_gives_what_several_give(rows: Callable[[], Sheets], gained: list[str], tmp_path: Path) -> None:
    several, one = Counter(found(twin().audit(rows()))), found_in(flat(rows()), tmp_path)
    # Where every row states its own limits no type can be missing, or say otherwise.
    lost = [line for line in several if "(device type)" in line or line.startswith("DAT11")]
    assert one == several - Counter(lost) + Counter(gained)


def test_an_area_in_words_on_each_row_gives_what_the_list_of_areas_gives_but_for_what_words_cannot_say(
    tmp_path: Path,
) -> None:
    one = found_in(flat(demo_rows()), tmp_path / "areas")
    words = found_in(without_areas(flat(demo_rows())), tmp_path / "words")
    lost = [
        # The ambient.
        "HAZ08 JB-201",
        "HAZ08 MOV-3044",
        "PRO06 AIT-1010 (minimum)",
        # The gases by name.
        "HAZ17 10A (hydrogen sulfide)",
        # The areas' codes.
        "HAZ20 30B",
        "HAZ20 40D",
        "DAT10 GD-1085 (area)",
    ]
    gained = [
        "HAZ20 Zone 2 IIA",
        "HAZ20 Zone 22 IIIC",
        # 40C states ignition temperatures, which nobody writes into a row.
        "HAZ20 Zone 22 IIIB",
        "HAZ01 GD-1085",
        # IIB+H2 serves hydrogen, which the words do not name.
        "review HAZ04 AIT-2014A",
        "review HAZ04 AIT-2014B",
        "review HAZ04 AIT-2015",
    ]
    assert one - words == Counter(lost)
    assert words - one == Counter(gained)
