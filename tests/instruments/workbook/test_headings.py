from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from instruments.workbook.heading_words import heading_words
from instruments.workbook.headings import match_sheet
from instruments.workbook.sheet import Sheet
from tests.instruments.workbook.sheets import BY_NAME, KINDS, columns_of, matched, sheet

# A heading beside "Tag No.", the cells below it, and the field they are read into.
ONE_COLUMN = [
    # text that says itself
    ("Service Description", "Feed pressure;Feed temperature", "service"),
    ("SERVICE", "Feed pressure;Feed temperature", "service"),
    ("Desc.", "Feed pressure;Feed temperature", "service"),
    ("Benennung", "Zulaufdruck;Zulauftemperatur", "service"),
    ("Equip. No.", "V-101;V-102", "equipment"),
    ("Plant Item", "CLR-1;CLR-2", "equipment"),
    ("Line No.", '6"-P-1001;6"-P-1002', "line"),
    ("P & ID", "D-12-01;D-12-02", "pid"),
    ("P&I.D. No", "D-12-01;D-12-02", "pid"),
    ("R&I Nr.", "RI-1;RI-2", "pid"),
    ("Mfr.", "Kestrix;Ardwell", "maker"),
    ("Manufacturer", "Kestrix;Ardwell", "maker"),
    ("Hersteller", "Kestrix;Ardwell", "maker"),
    ("Typ", "P-30;TT-4", "model"),
    ("Rev.", "A;B", "revision"),
    ("SafetyNotes", "Trips the pump;Trips the pump", "remarks"),
    ("JB No.", "JB-101;JB-102", "junction_box"),
    ("Klemmenkasten", "KK1;KK2", "junction_box"),
    ("PLC Address", "R1.S03.C00;R1.S03.C01", "io_address"),
    ("Zündschutzart", "Ex ia IIC T4;Ex d IIB T6", "ex_marking"),
    # what the contents decide
    ("Type", "Pressure transmitter;Gauge", "kind"),
    ("Type", "AI;DI", "io_type"),
    ("Type", "Analog Input;Digital Output", "io_type"),
    ("Type", "MF-300;P-30", "model"),
    ("Signal", "4-20mA HART;dry contact", "signal"),
    ("Signal", "AI;DO", "io_type"),
    ("Signal Type", "AI;DO", "io_type"),
    ("Set Point High", "8;9", "setting_h"),
    ("Low Alarm Setting", "8;9", "setting_l"),
    ("Limit value HH", "8;9", "setting_hh"),
    ("Manufacturer Name", "Kestrix;Ardwell", "maker"),
    ("Désignation / Service", "Pression;Niveau", "service"),
    ("Position de sécurité / Fail position", "Ouverte;Fermée", "failure_position"),
    ("Haz. Cert.", "Ex ia IIC T4 Ga;Ex d IIB T6", "ex_marking"),
    ("Haz. Cert.", "BVX 15 ATEX 1012X;IECEx BVX 16.0001", "certificate"),
    ("Certificate No.", "BVX 15 ATEX 1012X;BVX 15 ATEX 1013X", "certificate"),
    ("Typ", "AI;DO", "io_type"),
    ("Kommentar", "Druck Zulauf;Temperatur Zulauf", "service"),
    ("Alarm settings", "H=8 HH=9 barg;L=2", "settings"),
    ("Location", "Field;Control room", "location"),
    ("Location", "Filter gallery;Sample room 1", "place"),
    ("Unit", "10;20", "unit"),
    ("Hazardous Area", "Zone 1 IIB T3;Zone 2 IIB T3", "area_classification"),
    ("Hazardous Area", "Z1-A;Z2-B", "area"),
    ("Class", "Cl I Div 2 Gr D;Cl I Div 1 Gr D", "area_classification"),
    ("Class", "Transmitter;Gauge", "kind"),
    ("Item", "V-101;V-102", "equipment"),
    ("Set point", "440 psig;450 psig", "set_pressure"),
    ("Alarm H", "400;850", "setting_h"),
    ("Hi Hi", "425;900", "setting_hh"),
    ("LO-LO", "425;900", "setting_ll"),
    ("HART", "Y;N", "hart"),
    ("Wires", "2-wire;4-wire", "wires"),
    ("Fail Pos.", "FC;FO", "failure_position"),
    ("Air fail", "shut;stays", "failure_position"),
    ("Air fail", "shuts;opens", "failure_position"),
    ("Transmission", "3-15 lb.;mV", "signal"),
    ("Position", "Still house;Tar yard", "place"),
    ("Sich.-Stellung", "auf;zu", "failure_position"),
    ("Device Type", "Pressure transmitter;Temperature transmitter", "kind"),
    ("Device Type", "P-30;TT-4", "device_type"),
    ("Schaltpunkt", "4 bar;60 °C", "trip"),
    ("Electrical", "4-20 mA;Pt100", "signal"),
    ("R+I Blatt", "RI-1;RI-2", "pid"),
    ("Service Fluid", "Steam;Water", "fluid"),
    ("Haz.", "Zone 2 IIB T3;safe", "area_classification"),
    ("Zone / Group / Temp. class", "1 / IIC / T4;2 / IIB / T3", "area_classification"),
    ("Ex protection / certificate", "Ex ia IIC T4 Ga, EKX 12 ATEX 1001X;Ex db IIC T4 Gb, EKX 13 ATEX 2", "ex_marking"),
    ("Spring position", "closes;opens", "failure_position"),
    ("SYS", "DCS;ESD", "system"),
    ("BMK", "P101.M01;B101.L01", "equipment"),
    ("Signal", "Feed pressure;Reactor temperature", "service"),
    ("Signal", "4-20 mA;24 VDC", "signal"),
    ("Signal", "3-15 lb.;see note", "signal"),
    ("Elec. Class.", "Cl I Div 2 Gr D;GP", "area_classification"),
    ("Range & Units", "0-10 barg;0-100 °C", "range"),
    ("Fail mode", "FC;FO", "failure_position"),
    ("Fail mode", "High;Low", "failure_direction"),
    ("Line or Vessel", "V-101;V-102", "line"),
    ("Mtg. Loc.", "Field;Panel", "location"),
    ("Node/Slot/Pt", "1/2/3;1/2/4", "io_address"),
    ("S/D setpoint", "5;6", "trip"),
    ("0%", "0;5", "lrv"),
    ("EU High", "10;5", "urv"),
    ("Process Min. temp. °C", "5;10", "operating_temperature_min"),
    ("Des. press. barg", "16;10", "design_pressure"),
]


@pytest.mark.parametrize(("heading", "cells", "field"), ONE_COLUMN)
def test_a_heading_and_its_cells_tell_the_field(heading: str, cells: str, field: str) -> None:
    first, second = cells.split(";")
    found = matched(f"Tag No.|{heading}\nPT-1001|{first}\nTT-1002|{second}")
    assert columns_of(found) == {"tag": 0, field: 1}


# A heading with a unit in it: field, and the unit.
WITH_UNIT = [
    ("Range Min (barg)", "lrv", "barg"),
    ("Min Range [bar(g)]", "lrv", "barg"),
    ("URV, m3/h", "urv", "m³/h"),
    ("Design Press. [barg]", "design_pressure", "barg"),
    ("DESIGN TEMP DEG F", "design_temperature", "°F"),
    ("Oper. Press. Max (psig)", "operating_pressure_max", "psig"),
    ("Max. Oper. Temp. °C", "operating_temperature_max", "°C"),
    ("Alarm H (mbar)", "setting_h", "mbar"),
    ("Betriebsdruck [bar(ü)]", "operating_pressure", "barg"),
    ("Cable length, m", "cable_length_m", "m"),
    ("Cable Length (ft)", "cable_length_m", "ft"),
    ("Lift-off V", "lift_off_v", "V"),
    ("Ci (pF)", "ci_nf", "pF"),
    ("Li mH", "li_uh", "mH"),
    ("Max. load (kohm)", "maximum_load_ohm", "kohm"),
]


@pytest.mark.parametrize(("heading", "field", "unit"), WITH_UNIT)
def test_a_unit_in_the_heading_is_the_columns(heading: str, field: str, unit: str) -> None:
    found = matched(f"Tag|{heading}\nPT-1001|1.5\nPT-1002|3").columns[field]
    assert (found.index, str(found.unit) if found.unit else found.unit_text) == (1, unit)


@pytest.mark.parametrize(
    ("heading", "unit"),
    [
        ("Design Press. (degC)", ""),  # no pressure
        ("Range Min (Note 3)", ""),
        ("Alarm (L)", ""),  # low, not litres
    ],
)
def test_a_bracket_that_is_no_unit_of_the_column_is_none(heading: str, unit: str) -> None:
    found = matched(f"Tag|Service|{heading}\nPT-1001|Feed|1.5\nPT-1002|Feed|3")
    assert [each.unit_text for each in found.columns.values()] == ["", "", unit][: len(found.columns)]


HEADER_ROWS = [
    ("Tag|Service\nPT-1|Feed\nPT-2|Feed", (0,), 1),
    ("WORKS|\nDoc. No.|X-1\n|\nTag|Service\nPT-1|Feed\nPT-2|Feed", (3,), 4),
    # two rows, the upper over the blanks behind it
    ("Tag|Range|||Alarms|||\n|Min|Max|Units|LL|L|H|HH\nPT-1|0|10|bar|||8|9\nPT-2|0|10|bar|||8|9", (0, 1), 2),
    # a band over headings that say themselves
    ("GENERAL||PROCESS|\nTag|Service|Fluid|Phase\nPT-1|Feed|gas|gas\nPT-2|Feed|oil|liquid", (1,), 2),
    # three rows with units in the third
    ("Tag|Oper. Press.||Oper. Temp.\n|Norm|Max|Norm\n|barg|barg|°C\nPT-1|5|8|40\nPT-2|5|8|40", (0, 1, 2), 3),
    # numbered columns
    ("Tag|Service|Fluid\n1|2|3\nPT-1|Feed|gas\nPT-2|Feed|gas", (0, 1), 2),
    ("Tag|Service|Fluid\n(a)|(b)|(c)\nPT-1|Feed|gas\nPT-2|Feed|gas", (0, 1), 2),
    # two languages
    ("Tag|Service|Maker\nMessstelle|Benennung|Hersteller\nPT-1|Feed|X\nPT-2|Feed|X", (0, 1), 2),
    # a title in pieces, and the name of a section below the headings
    (
        "WORKS|||Instrument list, issue 11/87\nTag|Service|Unit|Alarm L\nBoilers|||\nPT-1|Feed|bar|1\nPT-2|Feed|bar|2",
        (1,),
        2,
    ),
    # the first row is data, though it holds a unit
    ("Code|LRL|URL|Unit|Ui V\nP1|0|10|bar|\nP1||||30", (0,), 1),
    # two languages, one of them not known
    (
        "Mesto|Nazev|Spin\nTag No.|Description|Set point\nPlyn / Gas||\nPSL-1|Feed|4 bar\nPSL-2|Feed|5 bar",
        (1,),
        2,
    ),
    # a legend before the list
    (
        "PT|Pressure transmitter\nTT|Temperature transmitter\n|\nTag|Service|Type\nPT-1|Feed|Gauge\nPT-2|a|Gauge",
        (3,),
        4,
    ),
]


@pytest.mark.parametrize(("text", "rows", "first"), HEADER_ROWS)
def test_the_headings_rows_are_found(text: str, rows: tuple[int, ...], first: int) -> None:
    found = matched(text)
    assert (found.header_rows, found.first_row) == (rows, first)


TWO_ROWS = [
    (
        "Tag|Range|||Operating||Alarms|||\n|Min|Max|Units|Normal|Max|LL|L|H|HH\nPT-1|0|10|bar|4|6|1|2|8|9",
        {
            "tag": 0,
            "lrv": 1,
            "urv": 2,
            "range_unit": 3,
            "operating_value_normal": 4,
            "operating_value_max": 5,
            "setting_ll": 6,
            "setting_l": 7,
            "setting_h": 8,
            "setting_hh": 9,
        },
    ),
    (
        "Tag|Design||Operating|\n|Press|Temp|Press|Temp\nPT-1|10|90|5|40",
        {"tag": 0, "design_pressure": 1, "design_temperature": 2, "operating_pressure": 3, "operating_temperature": 4},
    ),
    (
        "Messstelle|Grenzwerte||Schaltpunkt\nTag|L|H|Set point\nPSL-1|1|5|4 bar",
        {"tag": 0, "setting_l": 1, "setting_h": 2, "trip": 3},
    ),
    # bounds that nothing above them explains are nobody's
    ("Tag|Vibration limit||Range|\n|Min|Max|Min|Max\nPT-1|3|4|0|10", {"tag": 0, "lrv": 3, "urv": 4}),
    ("Tag|Ambient|\n|Min|Max\nPT-1|-20|40", {"tag": 0, "ambient_min": 1, "ambient_max": 2}),
    ("Tag|Calibration details||\n|Min|Max|Unit\nPT-1|0|10|bar", {"tag": 0, "lrv": 1, "urv": 2, "range_unit": 3}),
    (
        (
            "INST|CALIBRATED|||ALARM / TRIP SETTINGS|||\nTAG NO.|RANGE||UNITS|LL|L|H|HH\n|MIN|MAX|||||\nPT-1|0|"
            "9|PSIG|1|2|7|8"
        ),
        {
            "tag": 0,
            "lrv": 1,
            "urv": 2,
            ("range_unit"): 3,
            "setting_ll": 4,
            "setting_l": 5,
            "setting_h": 6,
            "setting_hh": 7,
        },
    ),
]


@pytest.mark.parametrize(("text", "columns"), TWO_ROWS)
def test_a_heading_above_belongs_to_those_below(text: str, columns: dict[str, int]) -> None:
    last = text.rsplit("\n", 1)[1]
    assert columns_of(matched(f"{text}\n{last.replace('-1', '-2', 1)}")) == columns


def test_a_merged_heading_stands_over_its_columns_only() -> None:
    made = sheet(
        "Tag|Range|||Limit\n|Min|Max||Max\nPT-1|0|10||12\nPT-2|0|10||12",
        merged=((0, 0, 1, 0), (0, 1, 0, 2)),
    )
    assert columns_of(matched(made)) == {"tag": 0, "lrv": 1, "urv": 2, "url": 4}


UNIT_COLUMNS = [
    # what a column headed Unit speaks for
    ("Tag|Min|Max|Unit\nPT-1|0|10|bar\nPT-2|0|9|bar", {"range_unit": 3}, {}),
    ("Tag|Unit|Min|Max|Unit\nPT-1|10|0|10|bar\nPT-2|10|0|9|bar", {"unit": 1, "range_unit": 4}, {}),
    ("Tag|E.U.|Range Min|Range Max\nPT-1|bar|0|10\nPT-2|bar|0|9", {"range_unit": 1}, {}),
    ("Tag|Low|High|Unit\nPT-1|2|8|bar\nPT-2|2|8|bar", {"settings_unit": 3}, {}),
    ("Tag|DCS Min|DCS Max|Unit\nPT-1|2|8|bar\nPT-2|2|8|bar", {"system_unit": 3}, {}),
    (
        "Tag|Oper. Press.|Unit|Oper. Temp.|Unit|LRV|URV|Unit\nPT-1|5|bar|40|°C|0|10|bar\nPT-2|5|bar|40|°C|0|9|bar",
        {"range_unit": 7},
        {"operating_pressure": 2, "operating_temperature": 4},
    ),
    ("Tag|Range|Unité / Unit\nPT-1|0-10|bar\nPT-2|0-9|bar", {"range_unit": 2}, {}),
    ("Tag|LRV|URV|H|Unit\nPT-1|0|10|8|bar\nPT-2|0|9|8|bar", {"range_unit": 4}, {}),
    # the only one belongs to the range, though alarms stand beside it, unless the range has its units in its cells
    ("Tag|Alarm H|Unit|Maker|Range\nPT-1|8|bar|X|0 to 10\nPT-2|8|bar|X|0 to 9", {"range_unit": 2}, {}),
    ("Tag|Alarm H|Unit|Maker|Range\nPT-1|8|bar|X|0-10 bar\nPT-2|8|bar|X|0-9 bar", {"settings_unit": 2}, {}),
    ("Tag|Alarm H|Unit|Maker|Range (bar)\nPT-1|8|bar|X|0-10\nPT-2|8|bar|X|0-9", {"settings_unit": 2}, {}),
    (
        ("Tag|LRV|URV|DCS Min|DCS Max|Unit\nPT-1|0|9|0|9|bar\nPT-2|0|9|0|9|bar"),
        {"range_unit": 5},
        {"system_lrv": 5, "system_urv": 5},
    ),
]


@pytest.mark.parametrize(("text", "named", "beside"), UNIT_COLUMNS)
def test_a_unit_column_speaks_for_its_neighbours(text: str, named: dict[str, int], beside: dict[str, int]) -> None:
    found = matched(text)
    units = {name: each.index for name, each in found.columns.items() if name.endswith("unit")}
    assert (units, {name: each.unit_index for name, each in found.columns.items() if each.unit_index is not None}) == (
        named,
        beside,
    )
    assert found.unknown == ()


def test_a_likeness_counts_only_where_the_contents_fit_and_is_named() -> None:
    fits = matched("Tag|Desing Presure (barg)\nPT-1|16\nPT-2|25")
    assert columns_of(fits) == {"tag": 0, "design_pressure": 1}
    assert fits.columns["design_pressure"].how == "likeness"
    assert fits.notes == ("heading 'Desing Presure (barg)' is taken for design pressure by likeness",)
    does_not = matched("Tag|Service|Desing Presure\nPT-1|Feed|see data sheet\nPT-2|Feed|see calculation")
    assert does_not.unknown == ((2, "Desing Presure"),)


@pytest.mark.parametrize("heading", ["Line size", "Design flow code", "Old tag colour", "Weight (kg)", "Price"])
def test_what_only_resembles_a_heading_stays_unknown(heading: str) -> None:
    found = matched(f"Tag|Service|{heading}\nPT-1|Feed|4\nPT-2|Feed|6")
    assert found.unknown == ((2, heading),)


def test_two_columns_of_one_heading_are_told_apart() -> None:
    found = matched("Tag|Rev|Service|Rev\nPT-1|A|Feed|1\nPT-2|A|Feed|2")
    assert columns_of(found) == {"tag": 0, "revision": 1, "service": 2}
    assert found.unknown == ((3, "Rev (2)"),)


def test_a_running_number_is_no_tag_and_no_equipment() -> None:
    found = matched("Item|Tag No.|Service\n1|PT-1|Feed\n2|PT-2|Feed\n3|PT-3|Feed")
    assert (columns_of(found), found.unknown) == ({"tag": 1, "service": 2}, ((0, "Item"),))


def test_an_item_column_of_tags_is_the_tag() -> None:
    assert columns_of(matched("Item|Service\nPT-1|Feed\nTT-2|Feed\nFT-3|Feed")) == {"tag": 0, "service": 1}


def test_a_column_of_tags_under_a_heading_nobody_knows_is_the_tag_and_named() -> None:
    found = matched("Bezug XY|Service|Hersteller\nPT-101|Feed|X\nTT-102|Feed|X")
    assert columns_of(found)["tag"] == 0
    assert found.notes == ("column 'Bezug XY' is taken for the tag: its cells look like tags",)


def test_tags_tell_more_than_a_heading_that_is_usually_another() -> None:
    found = matched("Signal|Description|Type|Wire\nCIP1_TT01|Feed|AI|W1\nCIP1_PU01_RUN|Pump|DI|W2\nXV7_OPN|Valve|DI|W3")
    assert {"tag": 0, "service": 1, "io_type": 2}.items() <= columns_of(found).items()
    assert found.notes == ("column 'Signal' is taken for the tag: its cells look like tags",)


@pytest.mark.parametrize(
    ("text", "columns"),
    [
        # an I/O map's scale
        ("Tag|Type|Low|High|EU\nTT-1|AI|0|50|°C", {"tag": 0, "io_type": 1, "lrv": 2, "urv": 3, "range_unit": 4}),
        # beside a range they are alarms, and so they are with another alarm
        ("Tag|Range|Low|High\nTT-1|0-50 °C|5|40", {"tag": 0, "range": 1, "setting_l": 2, "setting_h": 3}),
        ("Tag|Low|High|High High\nTT-1|5|40|45", {"tag": 0, "setting_l": 1, "setting_h": 2, "setting_hh": 3}),
        ("Tag|L|H\nTT-1|5|40", {"tag": 0, "setting_l": 1, "setting_h": 2}),
        # beside Normal, the bounds are the operating value's
        (
            "Tag|Range Lo|Range Hi|Normal|Max\nTT-1|0|50|20|30",
            {"tag": 0, "lrv": 1, "urv": 2, "operating_value_normal": 3, "operating_value_max": 4},
        ),
        ("Tag|Min|Max|Normal\nTT-1|0|50|20", {"tag": 0, "lrv": 1, "urv": 2, "operating_value_normal": 3}),
        # numbers of wires are no count of wires
        ("Tag|Service|Wire no.\nTT-1|Feed|W1", {"tag": 0, "service": 1}),
    ],
)
def test_neighbours_tell_what_an_everyday_word_means(text: str, columns: dict[str, int]) -> None:
    last = text.rsplit("\n", 1)[1]
    assert columns_of(matched(f"{text}\n{last.replace('-1', '-2', 1)}")) == columns


def test_a_catalogue_and_a_cable_list_in_two_languages() -> None:
    kinds = [
        matched(text).kind.name
        for text in (
            "Device|Description|LRL|URL|Unit\nP-1|Transmitter|0|10|bar\nP-2|Transmitter|0|40|bar",
            "Kabel Nr. / Cable no.|Typ / Type|Von / From|Nach / To|Länge / Length [m]\nW1|2x1|JB1|PT-1|8\n"
            "W2|2x1|JB1|PT-2|9",
        )
    ]
    assert kinds == ["Device types", "Cables"]


def test_headings_of_a_database_are_put_together_of_abbreviations() -> None:
    found = matched(
        "TAGNUMBR|SERVDESC|INSTTYPE|LOOPNMBR|PIDNUMBR|RANGEMIN|RANGEMAX|ENGUNITS|NORMOPER|ALRMHIHI|IOADDRSS|RECID\n"
        "FT-1|FEED|FLOW TRANSMITTER|F-1|D-1|0|120|M3/H|70|110|N1-01|1\n"
        "PT-2|TOP|PRESSURE TRANSMITTER|P-2|D-1|0|6|BARG|4|5|N1-02|2"
    )
    assert columns_of(found) == {
        "tag": 0, "service": 1, "kind": 2, "loop": 3, "pid": 4, "lrv": 5, "urv": 6, "range_unit": 7,
        "operating_value_normal": 8, "setting_hh": 9, "io_address": 10,
    }  # fmt: skip


def test_headings_of_a_list_in_french() -> None:
    found = matched(
        "Repère|Libellé|Nature de l'instrument|Type E/S|Automate|Carte|Voie|Échelle basse|Échelle haute|Unité|"
        "Seuil haut|Boîte de jonction|N° de câble|Longueur (m)|Alim.|Position de repli\n"
        "LT-1|Niveau bac|Transmetteur de niveau|EA|API-1|A01|0|0|3,2|m|2,8|BJ-1|C-1|85|24 V|\n"
        "LV-2|Vidange bac|Vanne de régulation|SA|API-1|A02|1|0|100|%||BJ-1|C-2|86|24 V|fermée"
    )
    assert columns_of(found) == {
        "tag": 0, "service": 1, "kind": 2, "io_type": 3, "io_address": 4, "lrv": 7, "urv": 8, "range_unit": 9,
        "setting_h": 10, "junction_box": 11, "cable": 12, "cable_length_m": 13, "power_supply": 14,
        "failure_position": 15,
    }  # fmt: skip


def test_a_tag_in_columns_of_its_own_is_joined() -> None:
    found = matched("Function|Loop No.|Suffix|Service\nPT|1001|A|Feed\nTT|1002||Feed\nFT|1003|B|Feed")
    assert (found.columns["tag"].index, found.columns["tag"].parts) == (0, ((1, "-"), (2, "")))


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        # Unit, function, number and suffix under one heading
        (
            "Tag||||Service\nUnit|Function|No.|Sfx|\n31|PIT|1001||Feed\n31|TIT|1002|A|Feed\n32|FT|1003||Feed",
            (0, ((1, "-"), (2, "-"), (3, ""))),
        ),
        # a unit that is not said to be part of the tag
        ("Unit|Func.|Tag No.|Service\n31|PIT|1001|Feed\n31|TIT|1002|Feed\n32|FT|1003|Feed", (1, ((2, "-"),))),
        # the names of areas stand over the rows, in the column of the letters
        (
            "Tag Func|Tag No.|Tag Sfx|Service\nAREA 20 - IN|||\nPT|1|A|Feed\nUNIT 30|||\nTT|3001||Feed\nFT|3002||x",
            (0, ((1, "-"), (2, ""))),
        ),
        ("Function|No.|Service\nUnit 10 feed||\nPT|1|Feed\nTT|2|Feed\nUnit 20 steam||\nFT|3|Feed", (0, ((1, "-"),))),
        # a whole tag beside them is the tag; I/O types are no letters of one
        ("Tag|Function|No.|Service\nPIT-1|PIT|1|Feed\nTIT-2|TIT|2|Feed\nFT-3|FT|3|Feed", (0, ())),
        ("Tag|Type|No.|Service\nPIT-1|AI|1|Feed\nTIT-2|AI|2|Feed\nFT-3|DO|3|Feed", (0, ())),
    ],
)
def test_a_tag_may_be_parted(text: str, parts: tuple[int, tuple[tuple[int, str], ...]]) -> None:
    found = matched(text).columns["tag"]
    assert (found.index, found.parts) == parts


@pytest.mark.parametrize(
    ("heading", "names"),
    [
        ("Alarms (LL / L / H / HH)", ("ll", "l", "h", "hh")),
        ("Alarm L/H (barg)", ("l", "h")),
        ("HH/H/L/LL", ("hh", "h", "l", "ll")),
        ("Set points Lo / Hi", ("l", "h")),
    ],
)
def test_a_heading_says_in_which_order_its_cells_hold_the_alarms(heading: str, names: tuple[str, ...]) -> None:
    cell = " / ".join("12345"[: len(names)])
    found = matched(f"Tag|Service|{heading}\nPT-1|Feed|{cell}\nPT-2|Feed|{cell}").columns
    pieces = {name: each.piece for name, each in found.items() if each.piece}
    assert pieces == {f"setting_{name}": (place, len(names)) for place, name in enumerate(names)}
    unit = "barg" if "barg" in heading else ""
    assert {each.unit_text for each in found.values() if each.piece} == {unit}


def test_units_of_a_pair_may_stand_at_the_end() -> None:
    found = matched("Tag|Design P/T barg/°C\nPT-1|20 / 90\nPT-2|20/90").columns
    assert {name: str(each.unit) for name, each in found.items() if each.piece} == {
        "design_pressure": "barg",
        "design_temperature": "°C",
    }


def test_pressure_and_temperature_in_one_column() -> None:
    found = matched("Tag|Design P/T (barg/°C)\nPT-1|20 / 90\nPT-2|20/90").columns
    pieces = {name: (each.index, each.piece, str(each.unit)) for name, each in found.items() if each.piece}
    assert pieces == {"design_pressure": (1, (0, 2), "barg"), "design_temperature": (1, (1, 2), "°C")}


PARTS = [
    ("Tag|Zone|Gas Group|T Class\nPT-1|2|IIB|T3\nPT-2|1|IIB|T3", "area_classification", 1, ((2, "Group"), (3, ""))),
    (
        ("Tag|Class|Division|Group|T Code\nPT-1|I|2|D|T3\nPT-2|I|1|C|T3"),
        "area_classification",
        1,
        ((2, "Div"), (3, "Group"), (4, "")),
    ),
    (
        ("Tag|Ex Protection|Gas Group|T Class\nPT-1|Ex ia|IIC|T4\nPT-2|Ex d|IIB|T6"),
        "ex_marking",
        1,
        ((2, "Group"), (3, "")),
    ),
]


@pytest.mark.parametrize(("text", "field", "index", "parts"), PARTS)
def test_the_rest_of_a_marking_in_columns_of_its_own(
    text: str, field: str, index: int, parts: tuple[tuple[int, str], ...]
) -> None:
    found = matched(text).columns[field]
    assert (found.index, found.parts) == (index, parts)


KINDS_OF_SHEETS = [
    ("Code|Kind|LRL|URL|Limit unit\nA-1|transmitter|0|10|bar\nA-2|transmitter|0|10|bar", "Sheet1", "Device types"),
    ("Area|Zone|Gas group|T class\nA1|2|IIB|T3\nA2|1|IIB|T3", "Sheet1", "Areas"),
    ("Loop|Tag|Supply V|Card|Barrier\nP-1|PT-1|24|C1|B1\nP-2|PT-2|24|C1|B1", "Loops", "Loops"),
    ("Tag|From|From terminal|To|To terminal\nPT-1|PT-1|+|JB-1|TB1:1\nPT-1|PT-1|-|JB-1|TB1:2", "X", "Terminations"),
    ("Cable No.|Type|From|To|Length m\nC-1|1P|PT-1|JB-1|40\nC-2|1P|PT-2|JB-1|50", "X", "Cables"),
    ("Code|Conductor mm2|Ohm/km\n1P|1.5|12.1\n2P|1.5|12.1", "X", "Cable types"),
    ("Tag|I/O Type|Address|Card\nPT-1|AI|1.1|C1\nPT-2|AI|1.2|C1", "IO list", "IO list"),
    ("Tag|I/O Type|Address|Card\nPT-1|AI|1.1|C1\nPT-2|AI|1.2|C1", "Sheet1", "IO list"),
    ("Tag|LL|L|H|HH|Unit|Priority\nPT-1|1|2|8|9|bar|1\nPT-2|1|2|8|9|bar|2", "Alarms", "Alarm and trip list"),
    (
        ("Tag|Service|P&ID|LRV|URV|Unit|I/O Type|Address\nPT-1|a|D-1|0|9|bar|AI|1.1\nPT-2|a|D-1|0|9|bar|AI|1.2"),
        "Area 10",
        "Instruments",
    ),
    ("Tag|Service|Loop|Card|Barrier\nPT-1|Feed|P-1|C1|B1\nPT-2|Feed|P-2|C1|B1", "Index", "Instruments"),
    ("Name|Marrowbeck\nJurisdiction|ATEX\nNumbering|parallel", "Plant", "Plant"),
    ("Name|Jurisdiction|Numbering\nMarrowbeck|ATEX|parallel", "Plant", "Plant"),
]


@pytest.mark.parametrize(("text", "name", "kind"), KINDS_OF_SHEETS)
def test_the_kind_of_a_sheet(text: str, name: str, kind: str) -> None:
    assert matched(text, name=name).kind.name == kind


@pytest.mark.parametrize(
    ("name", "text"),
    [
        ("Cover", "INSTRUMENT INDEX|\nDocument No.|AB-1\nRev|2"),
        ("Revision History", "Rev|Date|Description|By\nA|01/02/24|Issued for review|AB\nB|01/03/24|Revised|AB"),
        ("Legend", "PT|Pressure transmitter\nTT|Temperature transmitter"),
        ("Notes", "1. All ranges in barg.\n2. See sheet 2."),
        ("Sheet1", "1|2\n3|4"),
    ],
)
def test_a_sheet_that_is_no_list_is_of_no_kind(name: str, text: str) -> None:
    assert match_sheet(sheet(text, name=name), KINDS) is None


def test_a_heading_says_in_which_order_its_cells_hold_their_values() -> None:
    found = matched("Tag|Op. Press Norm/Max (barg)|Op. Temp. Max/Min (°C)\nPT-1|12/16|90/10\nPT-2|12/16|90/10").columns
    assert {name: (each.index, each.piece, str(each.unit)) for name, each in found.items() if each.piece} == {
        "operating_pressure_normal": (1, (0, 2), "barg"),
        "operating_pressure_max": (1, (1, 2), "barg"),
        "operating_temperature_max": (2, (0, 2), "°C"),
        "operating_temperature_min": (2, (1, 2), "°C"),
    }


ADDRESSES = [
    ("Tag|Rack|Slot|Ch|I/O\nPT-1|1|1|0|AI\nPT-2|1|1|1|AI", 1, "Rack", ((2, "Slot"), (3, "Ch"))),
    ("Tag|Card|Channel|Service\nPT-1|C1|0|Feed\nPT-2|C2|0|Feed", 1, "Slot", ((2, "Ch"),)),
    ("Tag|Address|Channel|Service\nPT-1|1.0|0|Feed\nPT-2|2.0|0|Feed", 1, "", ()),
    ("Tag|Rack/Slot/Ch|Service\nPT-1|1/1/0|Feed\nPT-2|1/1/1|Feed", 1, "", ()),
    ("Tag|Channel|Service\nPT-1|1.01|Feed\nPT-2|1.02|Feed", 1, "", ()),
]


@pytest.mark.parametrize(("text", "index", "prefix", "parts"), ADDRESSES)
def test_an_address_may_stand_in_columns_of_its_own(
    text: str, index: int, prefix: str, parts: tuple[tuple[int, str], ...]
) -> None:
    found = matched(text).columns["io_address"]
    assert (found.index, found.prefix, found.parts) == (index, prefix, parts)


def test_sixteen_thousand_columns_are_not_all_matched() -> None:
    made = sheet("|".join(["Tag", "Service", *(f"Heading {number}" for number in range(16_000))]) + "\nPT-1|Feed")
    found = matched(made)
    assert columns_of(found) == {"tag": 0, "service": 1}


def test_a_kind_may_be_forced() -> None:
    made = sheet("Tag|I/O Type|Address\nPT-1|AI|1.1\nPT-2|AI|1.2", name="IO list")
    found = match_sheet(made, KINDS, forced=BY_NAME["Instruments"])
    assert found is not None
    assert (found.kind.name, columns_of(found)) == ("Instruments", {"tag": 0, "io_type": 1, "io_address": 2})


def test_codes_of_other_sheets_tell_a_column_of_device_types() -> None:
    made = sheet("Tag|Type\nPT-1|TP-G10\nPT-2|TP-G02")
    with_codes = match_sheet(made, KINDS, codes=frozenset({"tp-g10", "tp-g02"}))
    without = match_sheet(made, KINDS)
    assert with_codes is not None
    assert without is not None
    assert (list(with_codes.columns), list(without.columns)) == (["tag", "device_type"], ["tag", "model"])


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("Oper. Press.\nMax.", ("operating", "pressure", "max")),
        ("I/O-Type", ("io", "type")),
        ("P and ID", ("pid",)),
        ("Set Point (High High)", ("setpoint", "hh")),
        ("No.", ("no",)),
        ("Länge", ("laenge",)),
    ],
)
def test_words(text: str, words: tuple[str, ...]) -> None:
    assert heading_words(text) == words


CELLS = st.one_of(
    st.none(),
    st.floats(allow_nan=False, allow_infinity=False),
    st.sampled_from(
        ["Tag", ("Tag No."), "Min", "Max", "Unit", "Range", "PT-101", "bar", "Zone", "Type", "H", "Service", "END"]
    ),
    st.text(max_size=30),
)


@settings(max_examples=150, deadline=None)
@given(st.lists(st.lists(CELLS, min_size=4, max_size=4), max_size=8))
def test_no_grid_of_cells_is_too_much(rows: list[list[object]]) -> None:
    found = match_sheet(Sheet(file="x.csv", name="x", rows=rows), KINDS)  # type: ignore[arg-type]
    if found is not None:
        indexes = [each.index for each in found.columns.values() if each.piece is None]
        assert len(indexes) == len(set(indexes))
