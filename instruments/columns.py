"""The columns of the sheets that describe instruments: index, device types, areas, I/O list, alarm list, plant."""

from __future__ import annotations

from collections.abc import Mapping

from instruments.area import Area
from instruments.column import Column, Reads, SheetKind
from instruments.plant_data import PlantRow
from instruments.record import DeviceType, Instrument

# Headings are lists of words, several a line: one a line, the formatter would make three thousand of them.
# fmt: off
PRESSURE = ("pressure",)
TEMPERATURE = ("temperature",)

POSITIONS = {
    "open": ("fo", "fail open", "fails open", "open", "opens", "ato fo", "auf", "öffnet", "ouvert", "ouverte", "fto"),
    "closed": (
        "fc", "fail closed", "fail close", "fails closed", "fail shut", "closed", "close", "closes", "shut", "zu",
        "schließt", "schliesst", "ferme", "fermee", "ftc", "shuts", "fails shut",
    ),
    "in place": (
        "fip", "fl", "flock", "fail locked", "fail last", "fail in place", "fail as is", "fai", "in place",
        "stay put", "stay", "stays", "holds", "fail stays", "bleibt", "stays put", "as is", "last", "last position",
        "locked", "lock", "fi", "hold last", "fail hold", "fail fixed", "fs", "fail stay", "bleibt stehen",
        "verharrt", "hält",
    ),
    "indeterminate": ("indeterminate", "drifts open", "drifts closed", "fldo", "fldc", "fl do", "fl dc"),
}
CONTACTS = {
    "NO": ("no", "n/o", "n.o.", "normally open", "schließer", "schliesser"),
    "NC": ("nc", "n/c", "n.c.", "normally closed", "öffner", "oeffner"),
}
TRIP_ACTIONS = {
    "de-energise": (
        "de-energise", "de-energize", "deenergise", "deenergize", "de energise to trip", "dtt", "dett",
        "de-energise to trip", "de-energize to trip", "de-energised", "failsafe", "fail safe",
    ),
    "energise": ("energise", "energize", "energise to trip", "energize to trip", "ett", "energised"),
}
HIGH_LOW = {
    "high": (
        "high", "hi", "up", "upscale", "up scale", "fail high", "rising", "h", "hh", "ne43 high", "> 21 ma", ">21 ma",
        ">=21 ma", ">= 21 ma", "hoch", "steigend", "burnout up",
    ),
    "low": (
        "low", "lo", "down", "downscale", "down scale", "fail low", "falling", "l", "ll", "ne43 low", "< 3.6 ma",
        "<3.6 ma", "<=3.6 ma", "<= 3.6 ma", "tief", "fallend", "burnout down",
    ),
}
MOUNTINGS = {
    "direct": (
        "direct", "close coupled", "close-coupled", "direct mounted", "in line", "inline", "flange mounted", "direkt",
        "flush", "insertion",
    ),
    "impulse line": (
        "impulse line", "impulse lines", "remote", "impulse", "impulse tubing", "impulse piping", "remote mounted",
        "manifold", "wirkdruckleitung", "hook up", "tubing", "stand", "2 inch pipe", "pipe stand", "bracket",
    ),
    "remote seal": (
        "remote seal", "diaphragm seal", "remote seals", "capillary", "seal", "chemical seal", "druckmittler",
    ),
    "thermowell": ("thermowell", "well", "schutzrohr", "in thermowell", "tw"),
}
LOCATIONS = {
    "field": (
        "field", "local", "fld", "feld", "site", "plant", "on skid", "skid", "lcl", "outdoor", "terrain", "f",
        "örtlich", "vor ort",
    ),
    "panel": ("panel", "local panel", "lp", "lcp", "front of panel", "pnl", "schalttafel", "p", "schaltpult"),
    "cabinet": (
        "cabinet", "marshalling", "marshalling cabinet", "rack", "mcc", "ier", "rie", "schaltschrank",
        "equipment room", "instrument room", "substation", "mc", "aux room", "lcr", "ler",
    ),
    "control room": ("control room", "ccr", "mcr", "cr", "warte", "messwarte", "control building"),
    "system": ("system", "dcs", "plc", "scada", "soft", "software", "hmi", "pls", "sis", "display", "bpcs", "pcs"),
}
SYSTEMS = {
    "control": ("control", "dcs", "plc", "pcs", "bpcs", "pls", "scada", "process control", "control system"),
    "safety": ("safety", "sis", "esd", "ess", "psd", "safety system", "sicherheit", "hipps", "ips", "trip system"),
    "fire and gas": ("fire and gas", "f&g", "fgs", "fg", "f and g", "gds"),
    "package": ("package", "vendor", "ucp", "lcp", "package plc", "skid plc", "local panel"),
}
BODIES = {
    "gauge": ("gauge", "g", "gp", "gage", "relative", "relativ", "rel", "überdruck", "ueberdruck", "gauge pressure"),
    "absolute": ("absolute", "abs", "a", "ap", "absolut", "absolutdruck", "absolute pressure"),
    "differential": (
        "differential", "dp", "d", "diff", "diff.", "differenz", "differenzdruck", "differential pressure", "delta p",
        "d/p",
    ),
}
SOURCES = {
    "source": ("source", "active", "sourcing", "aktiv", "active output", "current source", "powered"),
    "sink": ("sink", "passive", "sinking", "passiv", "loop powered", "current sink"),
}
ISOLATIONS = {
    "zener": ("zener", "zener barrier", "shunt diode", "shunt diode barrier", "zenerbarriere", "barrier"),
    "isolator": (
        "isolator", "galvanic", "galvanic isolator", "isolating", "trennverstärker", "trenner", "isolated",
        "isolating barrier", "repeater",
    ),
}
CHARACTERISTICS = {
    "linear": ("linear", "resistive", "ohmic"),
    "other": ("other", "trapezoidal", "rectangular", "non-linear", "non linear", "electronic", "angular"),
}
AREA_SYSTEMS = {
    "zone": ("zone", "zones", "iec"),
    "division": ("division", "divisions", "div", "nec 500", "class/division", "class and division"),
    "none": (
        "none", "unclassified", "safe", "non hazardous", "non-hazardous", "not classified", "no", "non haz",
        "non-haz",
    ),
}
JURISDICTIONS = {
    "IEC": ("iec", "iecex"),
    "ATEX": ("atex", "eu", "europe", "ukex", "uk", "gb", "great britain"),
    "US": ("us", "usa", "nec", "united states"),
    "Canada": ("canada", "ca", "cec", "can"),
}


def _text(field: str, title: str, *headings: str) -> Column:
    return Column(field=field, title=title, headings=headings)


def _word(field: str, title: str, words: Mapping[str, tuple[str, ...]], *headings: str, owner: str = "") -> Column:
    return Column(field=field, title=title, reads=Reads.WORD, headings=headings, words=words, owner=owner)


def _yes(field: str, title: str, *headings: str, owner: str = "") -> Column:
    return Column(field=field, title=title, reads=Reads.YES_NO, headings=headings, owner=owner)


def _number(field: str, title: str, unit: str, *headings: str, owner: str = "") -> Column:
    return Column(field=field, title=title, reads=Reads.NUMBER, unit=unit, headings=headings, owner=owner)


def _quantity(
    field: str,
    title: str,
    kinds: tuple[str, ...],
    *headings: str,
    unit_from: tuple[str, ...] = (),
    unit: str | None = None,
    owner: str = "",
) -> Column:
    return Column(
        field=field,
        title=title,
        reads=Reads.QUANTITY,
        kinds=kinds,
        headings=headings,
        unit_from=unit_from,
        unit=unit,
        owner=owner,
    )


def _pair(
    field: str,
    title: str,
    into: tuple[str, ...],
    kinds: tuple[str, ...],
    *headings: str,
    unit_from: tuple[str, ...] = (),
    unit: str | None = None,
    owner: str = "",
    reads: Reads = Reads.RANGE,
) -> Column:
    return Column(
        field=field,
        title=title,
        reads=reads,
        into=into,
        kinds=kinds,
        headings=headings,
        unit_from=unit_from,
        unit=unit,
        owner=owner,
    )


def _of_letters(symbol: str, *letters: str) -> tuple[str, ...]:
    """Return the headings of a limit of a source by the group letters of a division, as control drawings head it."""
    return tuple(f"{symbol}{word} {each}" for each in letters for word in ("", " gr", " gp", " group", " groups"))


def device_columns(owner: str) -> tuple[Column, ...]:
    """Return the columns of device limits: of the catalogue (`owner` blank) or on an instrument's row (``own``)."""
    limit = ("limit_unit",)
    # On a row of the index the process's own temperatures have these headings.
    process_min: tuple[str, ...] = ()
    process_max: tuple[str, ...] = ()
    if not owner:
        process_min = (
            "process temperature min", "process temp min", "min process temperature", "process t min", "process min",
            "media temp min", "prozesstemperatur min", "prozesstemp min", "medium temp min",
        )
        process_max = (
            "process temperature max", "process temp max", "max process temperature", "process t max", "process max",
            "media temp max", "prozesstemperatur max", "prozesstemp max", "medium temp max",
        )
    return (
        _word(
            "body",
            "body",
            BODIES,
            "body", "body type", "pressure type", "measurement type", "reference", "pressure reference",
            "type of body", "cell type", "druckart", "messart", "bezug", "referenz",
            owner=owner,
        ),
        _quantity(
            "lrl",
            "LRL",
            (),
            "lrl", "lower range limit", "lower limit", "sensor min", "body min", "min limit", "limit min",
            "limit low", "sensor limit min", "sensor lower limit", "messgrenze unten", "lower sensor limit",
            "cell min", "instrument range min", "instrument range low", "instrument range from", "device range min",
            unit_from=limit,
            owner=owner,
        ),
        _quantity(
            "url",
            "URL",
            (),
            "url", "upper range limit", "upper limit", "sensor max", "body max", "max limit", "limit max",
            "limit high", "sensor limit max", "sensor upper limit", "messgrenze oben", "upper sensor limit",
            "cell max", "nennbereich", "instrument range max", "instrument range high", "instrument range to",
            "device range max",
            unit_from=limit,
            owner=owner,
        ),
        _pair(
            "limits",
            "LRL and URL",
            ("lrl", "url"),
            (),
            "limits", "sensor limits", "sensor range", "body range", "cell range", "body limits", "lrl url",
            "range limits", "device range", "instrument range", "device limits", "sensor limits lrl url",
            "instrument limits",
            unit_from=limit,
            owner=owner,
        ),
        Column(
            field="limit_unit",
            title="limit unit",
            reads=Reads.UNIT,
            owner=owner,
            headings=("limit unit", "limits unit", "unit of limits", "body unit", "sensor unit", "cell unit"),
        ),
        _quantity(
            "minimum_span",
            "minimum span",
            (),
            "minimum span", "min span", "min. span", "smallest span", "mindestspanne", "kleinste spanne",
            unit_from=limit,
            owner=owner,
        ),
        Column(
            field="maximum_turndown",
            title="maximum turndown",
            reads=Reads.NUMBER,
            unit="",
            owner=owner,
            headings=("maximum turndown", "max turndown", "turndown", "max td", "turn down", "rangeability", "td"),
        ),
        _number(
            "zero_shift_percent", "zero shift limit", "%", "zero shift limit", "zero shift", "zero shift % url",
            "zero shift limit % of url", "zero shift limit % url", "max zero shift",
            owner=owner,
        ),
        _quantity(
            "over_range_limit",
            "over-range limit",
            PRESSURE,
            "over range limit", "overrange limit", "over range", "overrange", "overpressure limit",
            "over pressure limit", "max overpressure", "proof pressure", "overpressure", "overload", "ueberlast",
            "überlast", "proof", "burst", "überlastgrenze",
            unit_from=limit,
            owner=owner,
        ),
        _quantity(
            "static_pressure_limit",
            "static pressure limit",
            PRESSURE,
            "static pressure limit", "static limit", "static pressure", "max static pressure", "max static", "mwp",
            "statischer druck", "maximum working pressure", "static press limit", "static press", "stat druck",
            "stat pressure", "statischer druck max", "mwp static",
            unit_from=limit,
            owner=owner,
        ),
        _quantity(
            "process_temperature_min",
            "process temperature limit min",
            TEMPERATURE,
            "process temp limit min", "limit process temperature min", "media temp limit min",
            "sensor temperature min",
            *process_min,
            owner=owner,
        ),
        _quantity(
            "process_temperature_max",
            "process temperature limit max",
            TEMPERATURE,
            "process temp limit max", "limit process temperature max", "media temp limit max",
            "sensor temperature max",
            *process_max,
            owner=owner,
        ),
        _pair(
            "process_temperature_limits",
            "process temperature limits",
            ("process_temperature_min", "process_temperature_max"),
            TEMPERATURE,
            "process temperature limits", "process temperature range", "process temp range", "process temp limits",
            owner=owner,
        ),
        _quantity(
            "seal_temperature_min",
            "seal temperature limit min",
            TEMPERATURE,
            "seal temperature min", "seal temp min", "seal min", "fill fluid min",
            owner=owner,
        ),
        _quantity(
            "seal_temperature_max",
            "seal temperature limit max",
            TEMPERATURE,
            "seal temperature max", "seal temp max", "seal max", "fill fluid max",
            owner=owner,
        ),
        _quantity(
            "ambient_min",
            "ambient limit min",
            TEMPERATURE,
            "ambient min", "ambient temperature min", "ambient temp min", "min ambient", "amb min", "ta min",
            "tamb min", "umgebung min", "umgebungstemperatur min", "umgebungstemp min", "ambient low",
            "operating ambient min",
            owner=owner,
        ),
        _quantity(
            "ambient_max",
            "ambient limit max",
            TEMPERATURE,
            "ambient max", "ambient temperature max", "ambient temp max", "max ambient", "amb max", "ta max",
            "tamb max", "umgebung max", "umgebungstemperatur max", "umgebungstemp max", "ambient high",
            "operating ambient max",
            owner=owner,
        ),
        _pair(
            "ambient_limits",
            "ambient limits",
            ("ambient_min", "ambient_max"),
            TEMPERATURE,
            "ambient", "ambient limits", "ambient range", "ambient temperature", "ambient temp range",
            "device ambient",
            owner=owner,
        ),
        _yes("hart", "HART", "hart", "hart y/n", "hart device", owner=owner),
        Column(
            field="hart_capacitance_number",
            title="HART capacitance number",
            reads=Reads.NUMBER,
            unit="",
            owner=owner,
            headings=("hart capacitance number", "hart cn", "cn", "capacitance number"),
        ),
        _number(
            "lift_off_v", "lift-off V", "V", "lift off v", "lift off", "liftoff", "liftoff v", "lift off voltage",
            "minimum voltage", "min voltage", "min supply", "min volts", "v min", "min terminal voltage",
            "minimum supply voltage", "min v", "u min", "umin", "versorgung min", "klemmenspannung min", "us min",
            owner=owner,
        ),
        _number(
            "lift_off_4ma_v", "lift-off V at 4 mA", "V", "lift off v at 4 ma", "lift off at 4 ma", "lift off 4 ma",
            "min v at 4 ma",
            owner=owner,
        ),
        _number(
            "lift_off_alarm_v", "lift-off V at high alarm", "V", "lift off v at high alarm", "lift off at high alarm",
            "lift off at alarm", "lift off v at 22 ma", "lift off alarm", "min v at alarm",
            owner=owner,
        ),
        _number(
            "maximum_v", "maximum V", "V", "maximum v", "max v", "max voltage", "maximum voltage", "v max",
            "max supply", "max supply voltage", "maximum supply voltage", "max terminal voltage", "u max", "umax",
            "versorgung max", "klemmenspannung max", "us max",
            owner=owner,
        ),
        _number(
            "high_alarm_ma", "high-alarm mA", "mA", "high alarm ma", "high alarm current", "alarm current",
            "fail high ma", "high alarm", "alarm ma", "burnout current",
            owner=owner,
        ),
        _number(
            "resistance_ohm", "resistance ohm", "ohm", "resistance ohm", "resistance", "series resistance",
            "internal resistance", "end to end resistance", "max end to end ohm", "r ohm",
            owner=owner,
        ),
        _number(
            "fixed_drop_v", "fixed drop V", "V", "fixed drop v", "fixed drop", "voltage drop", "drop v", "drop",
            owner=owner,
        ),
        _number(
            "device_4ma_v", "device volts at 4 mA", "V", "device volts at 4 ma", "volts at 4 ma", "v at 4 ma",
            owner=owner,
        ),
        _number(
            "device_20ma_v", "device volts at 20 mA", "V", "device volts at 20 ma", "volts at 20 ma", "v at 20 ma",
            owner=owner,
        ),
        _yes("bypass_diode", "bypass diode", "bypass diode", "diode", owner=owner),
        _number(
            "available_20ma_v", "volts available at 20 mA", "V", "volts available at 20 ma", "available v at 20 ma",
            "v available at 20 ma", "available voltage", "output volts at 20 ma", "v avail 20 ma",
            "available at 20 ma",
            owner=owner,
        ),
        _number(
            "available_alarm_v", "volts available at high alarm", "V", "volts available at high alarm",
            "available v at high alarm", "v available at 22 ma", "v avail alarm", "available at high alarm",
            "volts available at alarm",
            owner=owner,
        ),
        _number("compliance_v", "compliance V", "V", "compliance v", "compliance", "compliance voltage", owner=owner),
        _number(
            "maximum_load_ohm", "maximum load ohm", "ohm", "maximum load ohm", "maximum load", "max load",
            "max load ohm", "load max",
            owner=owner,
        ),
        _number(
            "maximum_load_supply_v", "maximum load at supply V", "V", "maximum load at supply v", "load at supply v",
            "max load at v",
            owner=owner,
        ),
        _number(
            "maximum_load_ma", "maximum load at mA", "mA", "maximum load at ma", "load at ma", "max load at ma",
            owner=owner,
        ),
        _word(
            "source_or_sink",
            "source or sink",
            SOURCES,
            "source or sink", "source sink", "active passive", "active or passive", "aktiv passiv",
            owner=owner,
        ),
        _number("coil_w", "coil W", "W", "coil w", "coil power", "coil watts", "power w", owner=owner),
        _number(
            "nominal_v", "nominal V", "V", "nominal v", "nominal voltage", "coil voltage",
            "rated voltage", owner=owner
        ),
        _number(
            "pull_in_percent", "pull-in %", "%", "pull in %", "pull in", "pull in percent", "pickup %", owner=owner
        ),
        _number("input_ohm", "input ohm", "ohm", "input ohm", "input resistance", "input impedance", owner=owner),
        _number(
            "input_limit_ohm", "input limit ohm", "ohm", "input limit ohm", "max line resistance", "input limit",
            owner=owner,
        ),
        _number(
            "working_voltage_v", "working voltage V", "V", "working voltage v", "working voltage",
            "max working voltage", "vwm",
            owner=owner,
        ),
        _number("ui_v", "Ui V", "V", "ui v", "ui", "vmax", owner=owner),
        _number("ii_ma", "Ii mA", "mA", "ii ma", "ii", "imax", owner=owner),
        _number("pi_mw", "Pi mW", "mW", "pi mw", "pi", "pi w", "pmax", owner=owner),
        _number("ci_nf", "Ci nF", "nF", "ci nf", "ci", owner=owner),
        _number("li_uh", "Li uH", "uH", "li uh", "li", "li µh", "li microhenry", "li mh", owner=owner),
        _number("uo_v", "Uo V", "V", "uo v", "uo", "voc", "u0", "barrier uo", "source uo", "uo max", owner=owner),
        _number("io_ma", "Io mA", "mA", "io ma", "io", "isc", "i0", "barrier io", "source io", "io max", owner=owner),
        _number("po_mw", "Po mW", "mW", "po mw", "po", "po w", "p0", "barrier po", "source po", "po max", owner=owner),
        _number(
            "co_iic_nf", "Co nF IIC", "nF", "co nf iic", "co iic", "co", "co nf", "ca", "co iic nf", "c0", "barrier co",
            "co max",
            *_of_letters("ca", "a,b", "a-d", "a,b,c,d"),
            owner=owner,
        ),
        _number(
            "co_iib_nf", "Co nF IIB", "nF", "co nf iib", "co iib", "co iib nf",
            *_of_letters("ca", "c", "c,e"),
            owner=owner,
        ),
        _number(
            "co_iia_nf", "Co nF IIA", "nF", "co nf iia", "co iia", "co iia nf",
            *_of_letters("ca", "d", "d,f,g"),
            owner=owner,
        ),
        _number(
            "lo_iic_mh", "Lo mH IIC", "mH", "lo mh iic", "lo iic", "lo mh", "la", "lo iic mh", "l0", "barrier lo",
            "lo max",
            *_of_letters("la", "a,b", "a-d", "a,b,c,d"),
            owner=owner,
        ),
        _number(
            "lo_iib_mh", "Lo mH IIB", "mH", "lo mh iib", "lo iib", "lo iib mh",
            *_of_letters("la", "c", "c,e"),
            owner=owner,
        ),
        _number(
            "lo_iia_mh", "Lo mH IIA", "mH", "lo mh iia", "lo iia", "lo iia mh",
            *_of_letters("la", "d", "d,f,g"),
            owner=owner,
        ),
        _number("lo_ro_uh_per_ohm", "Lo/Ro", "uH/ohm", "lo/ro", "lo ro", "l/r", "lo/ro uh/ohm", owner=owner),
        _yes("combined_pairs", "combined pairs", "combined pairs", "co lo combined", owner=owner),
        _word(
            "output_characteristic",
            "output characteristic",
            CHARACTERISTICS,
            "output characteristic",
            "characteristic",
            "output curve",
            owner=owner,
        ),
        _word(
            "isolation",
            "zener or isolator",
            ISOLATIONS,
            "zener or isolator", "isolation", "barrier type", "zener isolator",
            owner=owner,
        ),
        _yes("is_earth", "IS earth", "is earth", "is earth recorded", "earthed to is earth", owner=owner),
        Column(
            field="sensor_type",
            title="sensor type",
            owner=owner,
            headings=("sensor type", "sensor", "element type", "rtd tc type", "fühler", "sensortyp"),
        ),
        Column(
            field="sensor_class",
            title="sensor class",
            owner=owner,
            headings=("sensor class", "tolerance class", "class of sensor"),
        ),
    )


MARKING = _text(
    "ex_marking", "Ex marking", "ex marking", "ex code", "marking", "ex protection", "explosion protection", "ex",
    "ex kennzeichnung", "protection marking", "hazloc marking", "atex marking", "ex rating", "ex class",
    "device marking", "marking ex", "ex certification", "zündschutzart", "ex schutz", "ex protection marking",
    "protection type marking", "haz cert", "certification", "ex cert", "ex certificate", "hazardous certification",
    "hazardous area certification", "approval", "ex approval", "ex protection class", "atex", "area certification",
    "certificate", "haz area approval", "explosion proof", "ex type", "ex i / ex d", "ex ia / ex d",
    "ex marking certificate", "ex marking and certificate", "marking / certificate", "marking certificate",
    "equipment marking", "enclosure / ex", "instrument marking", "ex protection code", "protection code",
)
CERTIFICATE = _text(
    "certificate", "certificate", "certificate", "certificate no", "cert no", "ex certificate", "cert",
    "certificate number", "ex cert", "ex cert no", "zertifikat", "approval", "ex certificate no", "bescheinigung",
    "listing", "haz cert", "certification", "ex certification", "hazardous area certificate", "atex certificate",
    "iecex certificate", "cert number", "approval no", "approval number", "zertifikat nr", "bescheinigungsnummer",
    "eu type examination certificate", "type examination certificate",
)
SIGNAL = _text(
    "signal", "signal", "signal", "signal type", "sig", "sig type", "output", "output signal", "signalart", "ausgang",
    "signal range", "control signal", "electrical", "electrical signal", "elec signal", "signal level",
    "field signal", "transmission",
)
WIRES = Column(
    field="wires",
    title="wires",
    reads=Reads.COUNT,
    headings=(
        "wires", "no of wires", "wire", "number of wires", "leiter", "2 3 4 wire", "wiring", "2/3/4 wire",
        "connection wires",
    ),
)
IP = _text(
    "ip_code", "IP code", "ip code", "ip", "ip rating", "ingress protection", "schutzart", "enclosure",
    "weatherproof", "ip nema", "protection class", "enclosure rating",
)
MAKER = _text(
    "maker", "maker", "maker", "manufacturer", "make", "vendor", "mfr", "manuf", "hersteller", "supplier", "fabrikat",
    "brand", "fabricant", "manufacturer name", "vendor name", "make / supplier", "instrument manufacturer",
    "maker / model", "manufacturer / model", "marque", "fournisseur",
)
MODEL = _text(
    "model", "model", "model", "model no", "type no", "model number", "typ", "part no", "order code", "model code",
    "modell", "catalogue no", "model type", "modele", "type", "type / model", "make / model", "manufacturer type",
    "device model", "model name", "model part name", "model designation", "manufacturer model",
    "manufacturer model no", "model / part no", "part number", "catalog no", "type / model no",
)

IO_TYPE = _text(
    "io_type", "I/O type", "i/o type", "io type", "i/o", "io", "signal i/o", "type of i/o", "e/a typ", "ea typ",
    "i o type", "io class", "point type", "e/a", "type", "signal type", "signal", "sig type", "channel type",
    "type d'e/s", "nature e/s",
    "i/o signal", "type of signal", "typ", "signalart", "signaltyp", "signal class", "pt type", "i/o kind",
    "channel kind", "i/o signal class",
)
IO_ADDRESS = _text(
    "io_address", "I/O address", "i/o address", "io address", "address", "plc address", "channel", "dcs address",
    "i/o addr", "adresse", "rack slot channel", "node slot channel", "ea adresse", "e/a adresse", "io channel",
    "i/o channel", "plc addr", "dcs channel", "i o address", "plc i/o address", "tag address", "sps adresse", "ch",
    "point", "rack/slot/channel", "rack/slot/ch", "node/card/channel", "card/channel", "kanal", "r/s/c", "rsc",
    "channel address", "terminal address", "location in plc", "plc i/o", "node/slot/pt", "node/slot/point",
    "rack/slot/point", "slot/channel", "i/o", "io", "e/a", "i/o location", "i/o ref", "i/o point", "plc location",
    "dcs location", "plc channel",
)
CARD = _text(
    "card", "card", "card", "i/o card", "io card", "card type", "module", "io module", "i/o module", "baugruppe",
    "i o card",
)
SYSTEM = _word(
    "system",
    "system",
    SYSTEMS,
    "system", "sys", "control system", "system type", "dcs plc", "logic solver", "leitsystem", "connected to",
    "dcs sis",
    "host system", "ctrl sys", "control/safety", "control / safety", "bpcs / sis", "system name",
)
UNIT_TEXT = _text(
    "unit", "unit", "process unit", "plant unit", "unit no", "unit number", "unit code", "anlage", "teilanlage",
    "plant section", "section",
)

SETTINGS = (
    _quantity(
        "setting_ll",
        "LL",
        (),
        "ll", "lo lo", "low low", "lolo", "alarm ll", "ll alarm", "trip ll", "lala", "low low alarm", "sp ll",
        "set ll", "setpoint ll", "l l", "alarms ll", "min min", "alarm low low", "trip low", "low trip", "trip l",
        "alarm tief tief", "seuil tres bas", "alarme tres basse", "alarma muy baja",
        unit_from=("settings_unit",),
    ),
    _quantity(
        "setting_l",
        "L",
        (),
        "l", "lo", "low", "alarm l", "l alarm", "low alarm", "alarm low", "sp l", "set l", "setpoint l", "alarms l",
        "alarm min", "alarms lo", "min alarm", "alarm lo", "alarm tief", "alarm niedrig", "tiefalarm", "alarm unten",
        "grenzwert tief", "grenzwert unten", "seuil bas", "alarme basse", "alarma baja", "allarme basso",
        "alarm laag",
        unit_from=("settings_unit",),
    ),
    _quantity(
        "setting_h",
        "H",
        (),
        "h", "hi", "high", "alarm h", "h alarm", "high alarm", "alarm high", "sp h", "set h", "setpoint h",
        "alarms h", "alarm max", "alarms hi", "max alarm", "alarm hi", "alarm hoch", "hochalarm", "alarm oben",
        "grenzwert hoch", "grenzwert oben", "seuil haut", "alarme haute", "alarma alta", "allarme alto", "alarm hoog",
        unit_from=("settings_unit",),
    ),
    _quantity(
        "setting_hh",
        "HH",
        (),
        "hh", "hi hi", "high high", "hihi", "alarm hh", "hh alarm", "trip hh", "high high alarm", "sp hh", "set hh",
        "setpoint hh", "h h", "alarms hh", "max max", "alarm high high", "trip high", "high trip", "trip h",
        "alarm hoch hoch", "seuil tres haut", "alarme tres haute", "alarma muy alta",
        unit_from=("settings_unit",),
    ),
    _quantity(
        "trip",
        "trip",
        (),
        "trip", "trip setting", "trip set point", "trip setpoint", "trip point", "trip sp", "trip value",
        "abschaltung", "abschaltwert", "shutdown setting", "trip set", "switch point", "set point trip",
        "schaltpunkt", "schaltwert", "switching point", "operating point of switch", "shutdown", "s/d setpoint",
        "s/d set point", "sd setpoint", "shutdown setpoint", "trip setting value",
        unit_from=("settings_unit",),
    ),
    _word(
        "trip_direction",
        "trip direction",
        HIGH_LOW,
        "trip direction", "trip dir", "direction of trip", "trip on", "trip high low",
    ),
    Column(
        field="settings",
        title="alarm settings",
        unit_from=("settings_unit",),
        into=("setting_ll", "setting_l", "setting_h", "setting_hh", "trip"),
        headings=(
            "alarm settings", "alarm setting", "alarm set points", "alarms", "alarm", "alarm limits",
            "alarm trip settings", "alarm and trip settings", "alarms and trips", "set points", "alarm values",
            "grenzwerte", "trip alarm settings", "alarm trip set points", "settings", "alarm trip", "alarm points",
        ),
    ),
    Column(
        field="settings_unit",
        title="settings unit",
        reads=Reads.UNIT,
        headings=(
            "settings unit", "setting unit", "set point unit", "alarm unit", "alarm units", "sp unit", "alarms unit",
            "alarms units", "setpoint unit", "unit of settings", "trip unit",
        ),
    ),
)

INSTRUMENTS = SheetKind(
    name="Instruments",
    record=Instrument,
    names=("instrument", "index", "tag list", "instruments", "messstellen", "mess", "list", "data"),
    key=(("tag",),),
    columns=(
        Column(
            field="tag",
            title="tag",
            reads=Reads.TAG,
            headings=(
                "tag", "tag no", "tag number", "instrument tag", "tag nr", "item tag", "tagname", "tag name",
                "instrument", "instrument no", "inst tag", "messstelle", "messstellen nr", "pce tag", "plt stelle",
                "mst nr", "kks", "device tag", "instrument number", "tag id", "item no", "positions nr", "plt nr",
                "repere", "point", "point name", "loop tag", "inst no", "instrument tag no", "instrument tag number",
                "ident", "kennzeichen", "name", "item", "no", "position", "id", "instrument id", "tag name / no",
                "signal name", "symbol", "tag / item",
            ),
        ),
        _text(
            "service", "service", "service", "service description", "description", "kommentar", "desc", "duty",
            "instrument description", "function", "benennung", "bezeichnung", "beschreibung", "designation",
            "description of service", "service / description", "application", "purpose", "tag description",
            "process description", "text", "comment", "langtext", "kurztext", "klartext", "signal description",
            "point description", "libelle", "libelle / service", "fonction",
        ),
        _text(
            "device_type", "device type", "device type", "type code", "catalogue code", "device code", "typecode",
            "catalogue type", "device", "instrument type code", "type ref", "data sheet type", "geraetetyp",
            "gerätetyp", "type id", "type", "type no", "instrument code",
        ),
        Column(
            field="kind",
            title="kind",
            reads=Reads.KIND,
            headings=(
                "kind", "instrument type", "type", "device kind", "inst type", "type of instrument",
                "instrument kind", "class", "device class", "geräteart", "geraeteart", "art", "tag class",
                "instr type", "equipment type", "messgerät", "device description", "gerät", "instrumenttype", "typ",
                "instrument", "messgeraet", "instrument description type", "device", "tag type", "kind of instrument",
                "function / type", "equipment class", "device type", "type of device", "gerätetyp",
                "nature", "nature de l'instrument", "nature de l'appareil", "type d'appareil", "type d'instrument",
                "appareil",
            ),
        ),
        UNIT_TEXT,
        _text(
            "area", "area", "area", "area code", "hazardous area code", "plant area", "bereich", "zone area",
            "location area", "haz area", "hazardous area", "ex area", "area no", "area ref",
        ),
        _text(
            "loop", "loop", "loop", "loop no", "loop number", "loop id", "regelkreis", "loop nr", "loop tag no",
            "circuit", "kreis", "loop name",
        ),
        _text(
            "pid", "P&ID", "p&id", "p&id no", "pid", "p and id", "p&id number", "pid no", "dwg", "drawing", "r&i",
            "ri fließbild", "r i", "flow diagram", "p & id", "p&id drawing", "p id", "drawing no", "r&i nr",
            "p&id ref", "flow sheet", "ri schema", "r+i", "r+i nr", "r+i blatt", "r&i blatt", "ri blatt", "r&i bl",
            "p&id sheet", "p&id sht", "p&id page", "p&id dwg", "p&id dwg no", "fliessbild", "ri fliessbild nr",
            "p&i diagram", "schema", "schema pid", "plan pid", "efd", "pefs", "eld", "ufd", "flowsheet",
            "flowsheet no",
        ),
        _text(
            "line", "line", "line", "line no", "pipe", "line number", "pipe no", "rohrleitung", "leitung", "line no.",
            "piping line", "leitungs nr", "ligne", "de ligne", "tuyauterie", "pipe line", "line / equipment",
            "line equipment", "line or equipment",
            "line/equip", "line/equipment", "line or vessel", "line / vessel", "piping", "vessel / line",
            "line no / vessel", "apparat / leitung", "leitung / apparat", "pipe / equipment",
        ),
        _text(
            "equipment", "equipment", "equipment", "equip", "eqpt", "equipment no", "vessel", "plant item", "item",
            "equipment tag", "apparat", "bmk",
            "betriebsmittel", "betriebsmittelkennzeichen", "aggregat", "drive",
            "consumer", "mounted on", "equipment number", "behälter", "equip no", "apparate nr",
            "main equipment", "asset", "equipement", "appareil ou ligne",
        ),
        _word(
            "location",
            "location",
            LOCATIONS,
            "location", "loc", "mounting location", "installed in", "einbauort", "field / panel", "location type",
            "ort", "mtd", "place of installation", "fld / pnl", "fld/pnl", "mtg loc", "mounting loc", "loc type",
            "field/panel/system",
        ),
        _word(
            "mounting",
            "mounting",
            MOUNTINGS,
            "mounting", "mtg", "mounting type", "process mounting", "einbau", "mounting style", "montage",
            "installation", "method of mounting", "mount", "mntg", "anbau", "befestigung", "mounting arrangement",
        ),
        _text("status", "status", "status", "state", "tag status", "life cycle status", "zustand", "row status"),
        _text(
            "fluid", "fluid", "fluid", "medium", "process fluid", "media", "product", "stoff", "fluide",
            "service fluid", "fluid name", "process medium", "messstoff", "produkt", "fluid service", "fluid handled",
        ),
        _text("phase", "phase", "phase", "fluid phase", "state of fluid", "aggregatzustand"),
        *(
            _quantity(
                f"operating_{quantity}_{end}",
                f"operating {quantity} {end}",
                kinds,
                *(f"{a} {b}" for a in words for b in ends),
            )
            for quantity, kinds, words in (
                (
                    "pressure",
                    PRESSURE,
                    (
                        "operating pressure", "oper press", "op press", "op pressure", "op p", "process pressure",
                        "working pressure", "betriebsdruck", "oper pressure", "operating press", "pressure operating",
                        "pressure op", "press op",
                    ),
                ),
                (
                    "temperature",
                    TEMPERATURE,
                    (
                        "operating temperature", "oper temp", "op temp", "op temperature", "op t", "operating temp",
                        "oper temperature", "betriebstemperatur", "working temperature", "temperature operating",
                        "temp op", "temperature op", "process temperature", "process temp", "process t",
                        "medium temperature", "media temp", "prozesstemperatur", "prozesstemp",
                    ),
                ),
            )
            for end, ends in (
                ("min", ("min", "minimum", "low", "lowest")),
                ("normal", ("normal", "norm", "nor", "nom", "nominal")),
                ("max", ("max", "maximum", "high", "highest")),
            )
        ),
        _pair(
            "operating_pressure",
            "operating pressure",
            ("operating_pressure_min", "operating_pressure_normal", "operating_pressure_max"),
            PRESSURE,
            "operating pressure", "oper press", "op press", "op pressure", "working pressure", "betriebsdruck",
            "process pressure", "oper pressure", "operating press", "p op", "press min norm max",
            "pressure min/norm/max", "pressure", "press", "pressure operating", "operating p",
            reads=Reads.TRIPLET,
        ),
        _pair(
            "operating_temperature",
            "operating temperature",
            ("operating_temperature_min", "operating_temperature_normal", "operating_temperature_max"),
            TEMPERATURE,
            "operating temperature", "oper temp", "op temp", "op temperature", "betriebstemperatur", "operating temp",
            "process temperature", "process temp", "temperature", "temp", "t op", "temp min norm max",
            "working temperature", "temperature operating", "operating t",
            reads=Reads.TRIPLET,
        ),
        _quantity(
            "operating_value_min",
            "operating value min",
            (),
            "operating min", "operating value min", "process value min", "min operating", "value min", "op min",
            "oper min", "process min", "normal min", "minimum flow", "op value min", "operating minimum", "flow min",
            "flow rate min", "level min", "min level", "operating flow min", "measured value min",
            "min measured value", "betriebswert min", "betriebswert minimum", "messwert min", "process variable min",
            "pv min", "expected min", "service min",
            unit_from=("range_unit",),
        ),
        _quantity(
            "operating_value_normal",
            "operating value normal",
            (),
            "operating normal", "operating value normal", "process value", "normal value", "normal",
            "operating value", "norm", "op normal", "op norm", "oper norm", "process normal", "nor", "betriebswert",
            "normalwert", "normal operating value", "op value", "op value normal", "normal op", "operating",
            "oper normal", "norm value", "flow", "flow rate", "flow normal", "flow rate normal", "level normal",
            "operating flow", "normal flow", "normal level", "durchfluss", "operating flow normal",
            "measured value normal", "measured value", "betriebswert normal", "betriebswert normal wert",
            "messwert normal", "messwert", "process variable normal", "pv normal", "expected normal",
            "service normal", "normal reading", "usual value", "oper value", "operating point", "op point",
            unit_from=("range_unit",),
        ),
        _quantity(
            "operating_value_max",
            "operating value max",
            (),
            "operating max", "operating value max", "process value max", "max operating", "value max", "op max",
            "oper max", "process max", "normal max", "maximum flow", "op value max", "operating maximum", "flow max",
            "flow rate max", "level max", "max level", "operating flow max", "measured value max",
            "max measured value", "betriebswert max", "betriebswert maximum", "messwert max", "process variable max",
            "pv max", "expected max", "service max",
            unit_from=("range_unit",),
        ),
        _pair(
            "operating_values",
            "operating value",
            ("operating_value_min", "operating_value_normal", "operating_value_max"),
            (),
            "operating value min norm max", "operating min norm max", "operating value min/norm/max", "min/norm/max",
            "min norm max", "op min/nor/max", "op value min/norm/max", "operating values", "flow min/norm/max",
            "flow min norm max",
            unit_from=("range_unit",),
            reads=Reads.TRIPLET,
        ),
        _quantity(
            "design_pressure",
            "design pressure",
            PRESSURE,
            "design pressure", "des press", "design press", "design p", "auslegungsdruck", "pressure design",
            "dp barg", "des pressure", "design pressure max", "press design", "p design", "pression de calcul",
            "des p", "pdes", "p des", "max design pressure",
        ),
        _quantity(
            "design_temperature",
            "design temperature",
            TEMPERATURE,
            "design temperature", "des temp", "design temp", "design t", "auslegungstemperatur", "temperature design",
            "des temperature", "temp design", "t design", "design temperature max", "des t", "tdes", "t des", "dt",
            "dt degc", "max design temperature",
        ),
        _quantity(
            "device_temperature",
            "temperature at the device",
            TEMPERATURE,
            "temperature at the device", "temperature at device", "temp at device", "device temperature",
            "temp at transmitter", "temperature at transmitter",
        ),
        _quantity(
            "lrv",
            "LRV",
            (),
            "lrv", "range min", "range low", "range from", "lower range value", "min range", "cal min",
            "calibrated min", "calibration min", "messbereich von", "range lower", "low range",
            "instrument range min", "span min", "zero", "calibrated range min", "calibrated range from",
            "messbereich anfang", "mb anfang", "calibration range min", "range lo", "cal range min", "min", "from",
            "scale min", "calibrated range low", "calibration low", "field range min", "messbereich min",
            "range 4 ma", "4 ma", "value at 4 ma", "range start", "echelle basse", "echelle min",
            "debut d'echelle", "bas d'echelle",
            "debut echelle", "min echelle", "borne basse", "mba", "cal low", "set range min", "ranged from",
            "range lrv", "calibrated range lrv", "range 0%", "0%", "eng lo", "eng low", "eu low", "eu lo", "eu min",
            "min eu", "span lo", "span low", "lower range", "range bottom", "0 % value", "messanfang",
            unit_from=("range_unit",),
        ),
        _quantity(
            "urv",
            "URV",
            (),
            "urv", "range max", "range high", "range to", "upper range value", "max range", "cal max",
            "calibrated max", "calibration max", "messbereich bis", "range upper", "high range",
            "instrument range max", "span max", "calibrated range max", "calibrated range to", "messbereich ende",
            "mb ende", "calibration range max", "range hi", "cal range max", "max", "to", "scale max",
            "calibrated range high", "calibration high", "field range max", "messbereich max", "range 20 ma", "20 ma",
            "value at 20 ma", "range end", "echelle haute", "echelle max", "fin d'echelle", "haut d'echelle",
            "fin echelle", "max echelle", "borne haute", "mbe", "cal high", "set range max", "ranged to", "range urv",
            "calibrated range urv", "range 100%", "100%", "eng hi", "eng high", "eu high", "eu hi", "eu max",
            "max eu", "span hi", "span high", "upper range", "range top", "100 % value", "messende",
            unit_from=("range_unit",),
        ),
        _pair(
            "range",
            "range",
            ("lrv", "urv"),
            (),
            "range", "calibrated range", "cal range", "measuring range", "messbereich", "instrument range",
            "calibration range", "set range", "field range", "range set", "span", "range as set", "range calibrated",
            "scale", "scale range", "etendue de mesure", "echelle", "echelle de mesure", "plage de mesure",
            "gamme de mesure", "range lrv urv", "range lrv - urv", "calibration",
            "measurement range", "meas range", "eng range", "engineering range", "range & units", "range & unit",
            "range units", "range / unit", "range with unit", "range incl unit", "mess bereich", "span range",
            "calibrated span",
            unit_from=("range_unit",),
        ),
        Column(
            field="range_unit",
            title="range unit",
            reads=Reads.UNIT,
            headings=(
                "range unit", "unit", "units", "eng unit", "e u", "eu", "uom", "engineering unit",
                "engineering units", "range units", "eng units", "einheit", "cal unit", "unit of measure",
                "range uom", "range eu", "calibrated range unit", "calibrated range units", "messbereich einheit",
                "range e u", "me", "scale unit", "units of meas", "unit of meas", "units of measurement", "meas unit",
                "dimension", "calibration range unit", "unite",
            ),
        ),
        _quantity(
            "system_lrv",
            "system LRV",
            (),
            "system lrv", "dcs min", "dcs range min", "system range min", "system min", "plc min", "scale low",
            "dcs lrv", "system range from", "control system range min", "dcs low", "system low", "plc range min",
            "scaling min", "dcs range low", "display min", "dcs lo", "dcs scale min", "plc scale min",
            "plc scaling min", "dcs scaling min", "plc scaling low", "plc scaling from", "dcs scaling low",
            "dcs scaling from", "scaling low", "scaling from", "dcs range from", "plc range from", "dcs range lo",
            "plc range lo", "scada min", "hmi min", "scada range min", "hmi range min", "plc low", "pls min",
            "leitsystem min",
            unit_from=("system_unit",),
        ),
        _quantity(
            "system_urv",
            "system URV",
            (),
            "system urv", "dcs max", "dcs range max", "system range max", "system max", "plc max", "scale high",
            "dcs urv", "system range to", "control system range max", "dcs high", "system high", "plc range max",
            "scaling max", "dcs range high", "display max", "dcs hi", "dcs scale max", "plc scale max",
            "plc scaling max", "dcs scaling max", "plc scaling high", "plc scaling to", "dcs scaling high",
            "dcs scaling to", "scaling high", "scaling to", "dcs range to", "plc range to", "dcs range hi",
            "plc range hi", "scada max", "hmi max", "scada range max", "hmi range max", "plc high", "pls max",
            "leitsystem max",
            unit_from=("system_unit",),
        ),
        _pair(
            "system_range",
            "system range",
            ("system_lrv", "system_urv"),
            (),
            "system range", "dcs range", "control system range", "plc range", "dcs scale", "scaling", "plc scaling",
            "display range", "dcs scaling", "system scale", "hmi range", "scada range", "range in dcs", "range dcs",
            unit_from=("system_unit",),
        ),
        Column(
            field="system_unit",
            title="system unit",
            reads=Reads.UNIT,
            headings=(
                "system unit", "dcs unit", "dcs units", "plc unit", "system range unit", "dcs eu", "display unit",
                "dcs range unit", "system units", "scaling unit", "plc scaling unit", "dcs scaling unit",
                "plc range unit", "scada unit", "hmi unit", "plc eu",
            ),
        ),
        _yes(
            "square_root_device", "square root in device", "square root in device", "sqrt in device", "sqrt tx",
            "square root tx", "sqrt in transmitter", "square root in transmitter", "sqrt device",
            "square root device", "sqrt", "square root", "radizierung", "sq rt tx", "root extraction in transmitter",
        ),
        _yes(
            "square_root_system", "square root in system", "square root in system", "sqrt in system", "sqrt dcs",
            "square root dcs", "sqrt in dcs", "square root in dcs", "sqrt system", "square root system", "sqrt plc",
            "square root plc", "sq rt dcs", "sqrt in plc",
        ),
        _word(
            "failure_direction",
            "failure direction",
            HIGH_LOW,
            "failure direction", "fail direction", "burnout", "burn out", "signal failure", "fail mode",
            "failure signal", "alarm direction", "fail high low", "burnout direction", "failure mode",
            "signal fail direction", "fail signal", "ne43 direction", "upscale downscale", "fail dir",
        ),
        _word(
            "failure_position",
            "failure position",
            POSITIONS,
            "failure position", "fail position", "fail pos", "fail action", "failure action", "fail", "air failure",
            "on air failure", "sicherheitsstellung", "valve fail position", "fail state", "fails", "fo fc", "fo/fc",
            "valve failure", "action on failure", "fail safe position", "valve action", "spring action", "fo/fc/fl",
            "failure", "air fail", "air fail position", "fails to", "valve fails", "valve fails to", "cv fails",
            "cv fail", "luftausfall", "bei ausfall", "stellung bei ausfall", "stellung bei luftausfall",
            "stellung bei energieausfall", "sich stellung", "sicherheits stellung", "sicherheitslage", "fail to",
            "position de repli", "position de securite", "position de defaut", "on failure", "spring fails",
            "spring position", "spring return",
            "fail safe", "f p", "de energised", "deenergised", "fail mode",
            "failure mode", "failsafe", "on loss of air", "loss of air", "loss of power", "stellung stromlos",
            "ruhestellung",
        ),
        *SETTINGS,
        _quantity(
            "set_pressure",
            "set pressure",
            (),
            "set pressure", "set press", "relief set pressure", "set point barg", "set", "set p", "ansprechdruck",
            "relief set", "rv set", "set point", "sp", "psv set pressure", "setpoint", "setting", "switch setting",
            "schaltpunkt", "sollwert", "ansprechwert", "einstellwert", "set at", "setting value", "set value",
            unit_from=("settings_unit",),
        ),
        _yes(
            "bad_signal_detection", "bad-signal detection", "bad signal detection", "bad signal", "bad pv",
            "signal failure detection", "bad signal trip", "fault detection", "ne43 detection", "bad pv detection",
        ),
        _word(
            "contact",
            "contact",
            CONTACTS,
            "contact", "contact type", "no nc", "kontakt", "no/nc", "switch contact", "contact form",
            "contact action",
        ),
        _word(
            "trip_action",
            "energise or de-energise to trip",
            TRIP_ACTIONS,
            "energise or de-energise to trip", "trip action", "energise to trip", "de-energise to trip", "dett ett",
            "ett/dtt", "energise / de-energise",
        ),
        SIGNAL,
        WIRES,
        IO_TYPE,
        IO_ADDRESS,
        CARD,
        SYSTEM,
        _text(
            "power_supply", "power supply", "power supply", "supply", "power", "psu", "power source", "hilfsenergie",
            "versorgung", "alimentation", "alim", "supply voltage", "powered by", "speisung", "fed from",
            "loop power", "power feed",
        ),
        _text(
            "barrier", "barrier", "barrier", "barrier tag", "isolator", "barrier type", "is barrier",
            "barrier isolator", "barrier/isolator", "galvanic isolator", "trennverstärker", "barriere", "barrier no",
            "isolator type", "associated apparatus", "safety barrier", "barrier model", "barrier make / model",
            "barrier code", "ex i isolator", "is isolator", "is interface", "barrier / isolator",
        ),
        _number(
            "receiver_ohm", "receiver ohm", "ohm", "receiver ohm", "receiver resistance", "load ohm", "loop load",
            "receiver", "burden", "load resistor", "bürde", "range resistor", "input load",
        ),
        _text(
            "junction_box", "junction box", "junction box", "jb", "jb no", "junction box no", "klemmenkasten",
            "j box", "jb tag", "field jb", "field box", "verteiler", "box", "boite de jonction", "bj",
            "coffret", "coffret de jonction", "boite",
        ),
        _text(
            "terminals", "terminals", "terminals", "terminal", "terminal no", "jb terminals", "klemmen", "term",
            "terminal nos", "jb terminal", "klemme", "borne", "bornes", "bornier",
        ),
        _text(
            "cable", "cable", "cable", "cable no", "cable tag", "cable number", "field cable", "kabel", "kabel nr",
            "instrument cable", "cable id", "de cable", "repere cable", "repere de cable",
        ),
        _text(
            "cable_type", "cable type", "cable type", "cable spec", "cable code", "type of cable", "kabeltyp",
            "cable size type",
        ),
        _number(
            "cable_length_m", "cable length", "m", "cable length", "length", "cable length m", "route length",
            "kabellänge", "longueur", "longueur de cable", "cable len", "length m", "kabel länge", "run",
            "cable run", "loop length", "cable m",
            "cable ft",
        ),
        _text(
            "conductor", "conductor size", "conductor size", "conductor", "core size", "cable size", "csa", "awg",
            "querschnitt", "conductor csa", "wire size", "conductor mm2", "conductor mm²", "core csa", "mm2",
        ),
        _number(
            "ohm_per_km", "cable ohm per km", "ohm/km", "cable ohm per km", "cable ohm/km", "cable resistance",
            "cable resistance ohm/km", "cable r ohm/km", "ohm/km", "cable dc resistance",
        ),
        _number(
            "capacitance_pf_per_m", "cable capacitance", "pF/m", "cable capacitance", "cable pf/m", "cable c pf/m",
            "cable pf/ft",
            "cable nf/km", "cable c nf/km", "cable capacitance pf/m", "cable capacitance nf/km", "cable cc pf/m",
            "cc pf/m", "pf/m", "cable cap", "cable c", "kabelkapazität",
        ),
        _number(
            "inductance_uh_per_m", "cable inductance", "uH/m", "cable inductance", "cable uh/m", "cable l uh/m",
            "cable uh/ft",
            "cable mh/km", "cable l mh/km", "cable inductance uh/m", "cable inductance mh/km", "cable lc uh/m",
            "lc uh/m", "uh/m", "cable ind", "cable l", "kabelinduktivität",
        ),
        _text("pair", "pair", "pair", "pair no", "pair number", "paar", "pr"),
        _text(
            "area_classification", "area classification", "area classification", "area class", "hazardous zone",
            "haz area class", "zone", "hazardous area classification", "ex zone", "class", "haz class", "ex zonen",
            "haz area", "hazardous area", "area class.", "zone classification", "classification", "hazardous class",
            "haz zone", "elec area class", "electrical area classification", "zone / class", "hac", "zone class",
            "zone explosive", "hazard area", "hazardous area class", "ex zone / class", "hazard zone", "area zone",
            "haz", "haz location", "hazardous location", "elec class", "electrical class", "elec area classification",
            "ex bereich", "ex bereich zone", "area haz class", "hazloc", "haz loc", "hazardous area zone",
            "explosion zone",
        ),
        _text(
            "process_zone", "process-side zone", "process side zone", "process zone", "zone inside",
            "zone process side", "internal zone",
        ),
        _yes("nonincendive", "nonincendive", "nonincendive", "non incendive", "nonincendive wiring", "ni"),
        _text(
            "protection", "type of protection", "type of protection", "protection", "protection type",
            "protection method", "protection concept", "ex concept",
        ),
        MARKING,
        CERTIFICATE,
        _text(
            "x_accepted", "X conditions accepted", "x conditions accepted", "x conditions", "conditions accepted",
            "special conditions accepted", "x accepted by", "special conditions",
        ),
        _yes("simple_apparatus", "simple apparatus", "simple apparatus", "simple app", "simple"),
        _number("generated_v", "generated V", "V", "generated v", "generates v", "source v", "gen v", "v generated"),
        _number("generated_ma", "generated mA", "mA", "generated ma", "generates ma", "source ma", "gen ma"),
        _number("generated_mw", "generated mW", "mW", "generated mw", "generates mw", "source mw", "gen mw"),
        _number("surface_mm2", "surface area", "mm2", "surface area", "surface mm2", "surface area mm2"),
        _yes("earthed_sensor", "earthed sensor", "earthed sensor", "grounded sensor", "sensor earthed", "grounded"),
        IP,
        _text("sil", "SIL", "sil", "sil rating", "sil level", "target sil", "sil target"),
        _text(
            "safety_function", "safety function", "safety function", "sif", "sif id", "sif no", "interlock",
            "safety loop", "sif tag", "function id",
        ),
        _text(
            "voting", "voting", "voting", "voting group", "vote", "moon", "redundancy", "architecture",
            "voting logic", "m out of n", "voting scheme",
        ),
        MAKER,
        MODEL,
        _text("serial", "serial", "serial", "serial no", "serial number", "s/n", "seriennummer", "fabr nr"),
        _text(
            "former_tag", "former tag", "former tag", "old tag", "previous tag", "alte bezeichnung", "ex tag",
            "legacy tag", "alternative tag",
        ),
        _text(
            "scope", "scope of supply", "scope of supply", "scope", "supplied by", "supply by", "lieferumfang", "by",
            "package", "supplier scope", "furnished by",
        ),
        _text(
            "place", "place", "place", "location text", "grid", "elevation", "deck", "room", "building",
            "aufstellort", "physical location", "building / room", "location",
            "position", "where", "site location", "whereabouts",
        ),
        _text("hold", "hold", "hold", "on hold", "hold no"),
        _text("revision", "revision", "rev", "revision", "row rev", "rev no", "index"),
        _text(
            "remarks", "remarks", "remarks", "notes", "comments", "remark", "note", "comment", "bemerkung",
            "bemerkungen", "safety notes", "anmerkung", "remarks / notes", "observations", "hinweis", "kommentar",
            "remarque", "commentaire", "additional information", "general remarks", "comment remark",
        ),
        *device_columns("own"),
    ),
)

DEVICE_TYPES = SheetKind(
    name="Device types",
    record=DeviceType,
    names=(
        "device type", "device types", "types", "catalogue", "catalog", "devices", "typen", "gerätetypen", "bodies",
        "device data", "gerätedaten", "instrument data", "entity parameters", "ex data", "ex daten", "device list",
    ),
    key=(
        ("code", "lrl"),
        ("code", "url"),
        ("code", "limits"),
        ("code", "maximum_v"),
        ("code", "uo_v"),
        ("code", "ui_v"),
        ("code", "ex_marking"),
        ("code", "description"),
        ("code", "kind"),
    ),
    columns=(
        _text(
            "code", "code", "code", "type code", "device type", "catalogue code", "device code", "type", "typecode",
            "id", "catalogue type", "type id", "gerätetyp", "type ref", "device", "device id", "device ref",
        ),
        Column(
            field="kind",
            title="kind",
            reads=Reads.KIND,
            headings=("kind", "device kind", "instrument type", "class", "art", "kind of device", "type of device"),
        ),
        _text("description", "description", "description", "desc", "beschreibung", "bezeichnung", "text"),
        MAKER,
        MODEL,
        SIGNAL,
        WIRES,
        MARKING,
        CERTIFICATE,
        IP,
        *device_columns(""),
    ),
)

AREAS = SheetKind(
    name="Areas",
    record=Area,
    names=("area", "areas", "area register", "hazardous areas", "bereiche", "classification", "hac"),
    key=(("code", "zone"), ("code", "system"), ("code", "division"), ("code", "gas_group"), ("code", "name")),
    columns=(
        _text("code", "code", "code", "area", "area code", "area no", "area id", "id", "bereich", "area ref", "no"),
        _text("name", "name", "name", "area name", "description", "bezeichnung", "title", "location"),
        _word("jurisdiction", "jurisdiction", JURISDICTIONS, "jurisdiction", "rules", "scheme", "country"),
        _word("system", "system", AREA_SYSTEMS, "system", "classification system", "zone or division"),
        _text("zone", "zone", "zone", "ex zone", "hazardous zone", "zone no"),
        _text("epl_required", "EPL required", "epl required", "epl", "required epl", "assigned epl"),
        _text("class_", "class", "class", "hazard class", "nec class"),
        _text("division", "division", "division", "div"),
        _text(
            "gas_group", "gas group", "gas group", "group", "gas gr", "explosion group", "explosionsgruppe", "gas grp"
        ),
        _text("dust_group", "dust group", "dust group", "dust gr", "staubgruppe"),
        _text(
            "temperature_class", "temperature class", "temperature class", "t class", "temp class", "tclass",
            "temperaturklasse", "t code", "temp. class",
        ),
        _number(
            "dust_surface_c", "permitted dust surface temperature", "degC", "permitted dust surface temperature",
            "max dust surface temperature", "dust surface temperature", "dust temperature", "max surface temp",
            "permitted surface temperature", "dust surface max", "max surface temperature",
        ),
        _number(
            "cloud_ignition_c", "cloud ignition temperature", "degC", "cloud ignition temperature", "cloud ignition",
            "mit cloud", "dust cloud ignition",
        ),
        _number(
            "layer_ignition_c", "layer ignition temperature", "degC", "layer ignition temperature", "layer ignition",
            "mit layer", "dust layer ignition",
        ),
        _number("layer_mm", "layer depth", "mm", "layer depth", "dust layer", "layer mm", "dust layer depth"),
        _text("gas", "gas", "gas", "gas or vapour", "substance", "named gas", "fluid", "gases", "material", "stoff"),
        _number(
            "ambient_min_c", "ambient min", "degC", "ambient min", "ambient temperature min", "min ambient", "ta min",
            "amb min", "tamb min", "ambient low", "ambient temp min",
        ),
        _number(
            "ambient_max_c", "ambient max", "degC", "ambient max", "ambient temperature max", "max ambient", "ta max",
            "amb max", "tamb max", "ambient high", "ambient temp max",
        ),
        _pair(
            "ambient",
            "ambient",
            ("ambient_min_c", "ambient_max_c"),
            TEMPERATURE,
            "ambient", "ambient range", "ambient temperature", "ta", "tamb", "ambient temp",
            unit="degC",
        ),
        _text(
            "drawing", "drawing", "drawing", "drawing no", "dwg", "classification drawing", "hac drawing", "doc",
            "document",
        ),
    ),
)

IO_LIST = SheetKind(
    name="IO list",
    record=Instrument,
    names=("io list", "i/o list", "io", "i o list", "io map", "i/o", "io schedule", "ea liste", "signal list",
           "signals", "io signals", "point list", "channel list"),
    key=(("tag", "io_type"), ("tag", "io_address")),
    columns=(
        INSTRUMENTS.column("tag"),
        IO_TYPE,
        IO_ADDRESS,
        CARD,
        SYSTEM,
        INSTRUMENTS.column("range"),
        INSTRUMENTS.column("lrv"),
        INSTRUMENTS.column("urv"),
        INSTRUMENTS.column("range_unit"),
        SIGNAL,
        INSTRUMENTS.column("service"),
        INSTRUMENTS.column("remarks"),
    ),
)

ALARM_LIST = SheetKind(
    name="Alarm and trip list",
    record=Instrument,
    names=("alarm", "alarms", "trip", "alarm list", "alarm and trip", "setting list", "settings", "alarmliste"),
    key=(("tag", "setting_h"), ("tag", "setting_l"), ("tag", "setting_hh"), ("tag", "setting_ll"), ("tag", "trip")),
    columns=(
        INSTRUMENTS.column("tag"),
        *SETTINGS,
        Column(
            field="range_unit",
            title="unit",
            reads=Reads.UNIT,
            headings=("unit", "units", "eng unit", "eu", "uom", "einheit"),
        ),
        INSTRUMENTS.column("service"),
        INSTRUMENTS.column("remarks"),
    ),
)

PLANT = SheetKind(
    name="Plant",
    record=PlantRow,
    names=("plant", "plant data", "project", "settings of the plant", "anlage"),
    key=(
        ("jurisdiction",),
        ("numbering",),
        ("tag_pattern",),
        ("default_reference",),
        ("users_letters",),
        ("plant_codes",),
        ("required_fields",),
        ("atmospheric_pressure",),
    ),
    columns=(
        _text("name", "name", "name", "plant", "plant name", "site"),
        _text("tag_pattern", "tag pattern", "tag pattern", "pattern", "tag format", "tag profile"),
        _text("numbering", "numbering", "numbering", "loop numbering"),
        _text(
            "users_letters", "users' first letters", "users first letters", "users' first letters", "user letters",
            "users letters", "first letters", "user's choice letters", "user first letters",
        ),
        _text("plant_codes", "plant codes", "plant codes", "codes", "site codes"),
        _text("jurisdiction", "jurisdiction", "jurisdiction"),
        _text(
            "atmospheric_pressure", "atmospheric pressure", "atmospheric pressure", "site pressure", "p atm",
            "atmosphere",
        ),
        _text(
            "default_reference", "default reference", "default reference", "pressure reference",
            "default pressure reference",
        ),
        _text("required_fields", "required fields", "required fields", "required"),
    ),
)

SHEETS = (INSTRUMENTS, DEVICE_TYPES, AREAS, IO_LIST, ALARM_LIST, PLANT)
