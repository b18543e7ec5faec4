"""Kinds: the words for them, the letters that bear them, and what the two say together."""

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from instruments.kind import (
    Kind,
    can_bear,
    derive_kind,
    kind_from_words,
    kinds_from_words,
    letters_for_kind,
    read_kind,
    touches_process,
)
from instruments.letters import read_letters
from instruments.plant_codes import CODES, codes_with

WORDS = {
    "transmitter": """
        dp transmitter | Pressure transmitter | Electromagnetic flowmeter | Ultrasonic level transmitter
        Differential pressure transmitter | Temperature transmitter | Sludge blanket monitor
        Weighing transmitter | Druckmessumformer | Druckmessumformer / Pressure transmitter | Press. Trm.
        Press. Tx | DP cell | Radar level transmitter | Coriolis mass flow meter | Vortex flowmeter
        TRANSMITTER, PRESSURE, GAUGE | gauge pressure transmitter | pressure transmitter (gauge)
        pressure transmitter gauge | Level Tx | Durchflussmesser | Magnetisch-induktiver Durchflussmesser
        Füllstandsmessumformer | Temperatur-MU | Druck-MU | transmetteur de pression | transmisor de nivel
        Transmisor de presión | Vibration transmitter | Radar level gauge
        Level transmitter, guided wave radar | Pressure transmitter with diaphragm seal | PT | FIT
        Pressure transmitter w/ manifold | débitmètre électromagnétique | caudalímetro | mag meter
        Magmeter | Flow Xmtr | Smart Press. Xmtr | Diff. press. transmitter | RTD c/w head transmitter
        Pressure gauge with transmitter | niveautransmitter | druktransmitter | capteur de pression
        pressure sensor | Trans. Pressure | Ultrasonic Flow Meter | Turbine meter
        Hydrostatic level transmitter | Position transmitter | Guided Wave Radar | Füllstandssonde | Radar
        Drucktransmitter | PRESSURE TRANSMITTER IP 65 | Transmitter IP65 | Transmitter 4-20mA HART
        Thermal mass flow meter | Multivariable transmitter | Level Transmitter (Displacer) | Temp. transm.
        Transmitter DP flow | Level transmitter for tank | Messumformer für Differenzdruck | Flow converter
        Speed transmitter | Density transmitter | flow transmitter orifice type | XMTR PRESS
        ELECTRONIC DP TRANSMITTER | Level transmitter (dp type) | flow transmitter orifice type
        Submersible level transmitter | Differenzdruckmessumformer | Wirkdruckmessumformer
        Level gauge with transmitter | Ultrasonic open channel flow meter | sonde de niveau
        Durchflussmessumformer magn.-ind.
    """,
    "analyser": """
        Turbidity analyser | pH analyser | Chlorine analyser | Aluminium monitor | Colour analyser
        Ion analyser | Solids analyser | O2 analyzer | Gas chromatograph | pH meter | Analysator
        Conductivity meter | Analysengerät | Turbidimeter | Trübungsmessgerät analysator | pH probe
        dissolved oxygen sensor | analyseur d'oxygène | analizador de gases | Turbidity monitor
        chlorine monitor | Residual chlorine meter | Colorimeter | Moisture analyser | Particle counter
        Conductivity probe
    """,
    "gas detector": """
        gas detector | H2S detector | LEL detector | Gas monitor | Gaswarngerät | détecteur de gaz
        detector de gas | open path gas detector | Toxic gas detector
    """,
    "fire detector": """
        fire detector | Flame detector | Smoke detector | heat detector | Brandmelder | Rauchmelder
        détecteur de fumée | Flame detector IR3
    """,
    "element": """
        Pt100 3-wire | RTD | Thermocouple type K | Widerstandsthermometer | Temperature element
        Thermoelement | RTD with thermowell | load cell | pH electrode | T/C | TC type K | PT-100
        Resistance thermometer | thermowell with RTD | Vibration probe | Accelerometer
        sonde de température | Temperaturfühler | termopar | Temp. element | Level element | thermo-couple
        termorresistencia | speed pick-up | Flame scanner | TE | Duplex RTD | temperature sensor
        Weigh cell | T/C w/ T/W | Multipoint thermocouple | Winding RTD | temperatuuropnemer
        RTD assembly c/w thermowell & head | Level electrode
    """,
    "primary element": """
        Orifice plate | thermowell | Thermowell 316L | Restriction orifice | Venturi | Schutzrohr
        Messblende | flow element | Diaphragm seal | Pitot tube | FE | Orifice plate with flanges
        flow nozzle | Drosselscheibe blende | doigt de gant | T/W | primary element | Parshall flume
        placa de orificio | averaging pitot tube
    """,
    "switch": """
        Float switch | Limit switch | Pressure switch | Flow switch | Level switch | Druckschalter
        Grenzschalter | Endschalter | Näherungsinitiator | fin de course | interruptor de nivel | presostato
        Level switch, vibrating fork | SWITCH, LEVEL, HIGH | proximity switch | thermostat | eindschakelaar
        vlotterschakelaar | Temp. sw. | Paddle type flow switch | limit switch on valve | valve limit switch
        Pressure gauge with contacts | Strömungswächter | switch | Vibrating fork | pressostat
        final de carrera | LSHH | Zero speed switch | Tuning fork level switch | Füllstandsgrenzschalter
        Temperaturwächter | NAMUR sensor | LIMIT SWITCH BOX | détecteur de niveau | Position feedback
    """,
    "hand switch": """
        Push button | hand switch | Selector switch | Emergency stop | E-stop push button | Taster
        bouton poussoir | pulsador | drukknop | HOA switch | Manual call point | key switch | Not-Aus-Taster
        Local control station | pushbutton | Start/stop station | Fire alarm call point
        Selector switch 3-pos
    """,
    "indicator": """
        Digital indicator | Loop powered indicator | Level indicator | Pressure indicator | Recorder
        Flow recorder | Digitalanzeige | Ammeter | Panel indicator
    """,
    "gauge": """
        Pressure gauge | Manometer | Temperature gauge | Bimetal thermometer | Thermometer
        Dial thermometer | DP gauge | manomètre | manómetro | Rotameter | Variable area flowmeter
        GAUGE, PRESSURE | Pressure gauge with diaphragm seal | PG | Kontaktmanometer | drukmeter
        bimetallic thermometer | vacuum gauge | Differential pressure gauge | termómetro bimetálico
        Gauge, pressure, diaphragm seal
    """,
    "glass": """
        Gauge glass | Level glass | Level gauge | Sight glass | Standglas | Schauglas | magnetic level gauge
        LG | Reflex level gauge | Sight flow indicator | niveau à glace | peilglas | Füllstandsanzeiger
        Level Gauge (magnetic) | Magnetklappenanzeiger
    """,
    "positioner": """
        Positioner | Valve positioner | Control valve positioner | Stellungsregler | positionneur
        Smart positioner | I/P positioner | electro-pneumatic positioner | positioner for control valve
    """,
    "I/P converter": """
        I/P converter | I/P | Electropneumatic converter | I/P transducer | Current to pneumatic converter
        convertisseur I/P | I-P converter | IP converter
    """,
    "solenoid": """
        Solenoid valve | Solenoid | Magnetventil | SOV | électrovanne | electroválvula | magneetklep
        3/2 solenoid valve | Solenoid pilot valve | sol. valve | 3-way solenoid valve 24VDC
        válvula solenoide
    """,
    "control valve": """
        Control valve | Regelventil | vanne de régulation | válvula de control | Globe control valve
        regelklep | VALVE, CONTROL | Valve - control | Stellventil | Pressure control valve
        Control valve with positioner | modulating valve | Ctrl. valve | C/V | flow control valve
        Control valve / positioner | Regelklappe | Control valve, pneumatic | Control damper
        Regelventil mit Stellungsregler | regelafsluiter | Regelventil / Control valve
    """,
    "on/off valve": """
        Motorised valve | Pneumatic on/off valve | On-off valve | ON/OFF ball valve | Shutdown valve
        ESD valve | Absperrventil | Auf/Zu-Klappe | vanne tout ou rien | Motor operated valve
        Actuated ball valve | Isolation valve | Blowdown valve | válvula todo/nada | Kugelhahn | SDV | XV
        penstock | Emergency shut-off valve | safety shut-off valve | Butterfly valve | afsluiter | MOV
        Knife gate valve | valve | Kugelhahn mit Antrieb | pneumatic actuator
        Valve, on/off, ball, pneumatic | Solenoid operated shut-off valve | Slam shut valve
        Sicherheitsabsperrventil | Absperrklappe mit Antrieb | vanne papillon TOR
        XV with solenoid and limit switches
    """,
    "manual valve": """
        manual valve | hand valve | Check valve | Non-return valve | needle valve | Handventil
        Manually operated ball valve | Rückschlagventil
    """,
    "relief valve": """
        Relief valve | Safety valve | Pressure relief valve | PSV | Sicherheitsventil | soupape de sûreté
        válvula de seguridad | Safety relief valve | Breather valve | Pressure/vacuum valve | P/V valve
        PVRV | thermal relief valve | veiligheidsklep | vacuum breaker | Conservation vent | Überströmventil
        Pressure relief/vacuum valve
    """,
    "rupture disc": """
        Rupture disc | Bursting disc | Berstscheibe | disque de rupture | rupture disk
    """,
    "self-acting regulator": """
        Pressure regulator | Self-acting regulator | Pressure reducing valve | Druckminderer | détendeur
        CONTROL VALVE, SELF OPERATED
        Back pressure regulator | self-operated pressure control valve | Air filter regulator
        self acting temperature control valve | válvula reductora | Tank blanketing valve
        Instrument air regulator
    """,
    "lamp": """
        Pilot lamp | Indicating light | Beacon | Meldeleuchte | voyant | signal lamp | Lamp, red
        Signalleuchte
    """,
    "sounder": """
        Horn | Sounder | Siren | Hupe | audible alarm | Alarm horn | klaxon
    """,
    "barrier": """
        Zener barrier | Barrier | IS barrier | Barriere | Zenerbarriere
    """,
    "isolator": """
        Isolator | Galvanic isolator | Isolating barrier | Trennverstärker | Speisetrenner
        Signal converter | repeater power supply | isolating amplifier
    """,
    "card": """
        I/O card | AI card | Analogue input module | Baugruppe | PLC input card | Digital output module
        Eingangskarte | carte d'entrée | IO module | card
    """,
    "power supply": """
        Power supply | 24 VDC power supply | PSU | Netzteil | alimentation | fuente de alimentación
        Netzgerät
    """,
    "junction box": """
        Junction box | JB | Klemmenkasten | boîte de jonction | caja de conexiones | Klemmkasten
        aansluitkast | Terminal box | Junction box (analogue)
    """,
    "panel": """
        Local panel | Control panel | Cabinet | Schaltschrank | Marshalling cabinet | armoire | LCP
        Analyser shelter | Sample conditioning panel
    """,
    "soft function": """
        Controller | Flow controller | DCS indication | Soft function | Regler | PID controller
        calculation | Software alarm | DCS alarm | Alarm | High level alarm | Level indicating controller
        FIC | régulateur | controlador de flujo | DCS function | TIC
    """,
}
PHRASES = [
    (phrase.strip(), Kind(kind))
    for kind, text in WORDS.items()
    for phrase in re.split(r" \| |\n", text)
    if phrase.strip()
]


@pytest.mark.parametrize(("words", "kind"), PHRASES)
def test_words_name_a_kind(words: str, kind: Kind) -> None:
    assert kind_from_words(words) is kind
    assert kind_from_words(words.upper()) is kind
    assert kind_from_words(f"  {words}  ") is kind


@pytest.mark.parametrize("kind", Kind)
def test_a_kinds_own_word_names_it(kind: Kind) -> None:
    assert kind_from_words(kind.value) is kind


@pytest.mark.parametrize(
    "words",
    ["", "-", "N/A", "TBA", "Smart", "HART", "2-wire", "4-20mA", "Pressure", "FLOW", "Level", "Pump", "Motor", "VSD",
     "AI", "DO", "Network switch", "Camera", "Local", "Analog input", "xyz", "Soft starter", '1/2" NPT', "Control"],
)  # fmt: skip
def test_words_that_name_none(words: str) -> None:
    assert kind_from_words(words) is None


@given(st.text(max_size=80))
def test_any_words_are_read(text: str) -> None:
    for letters in ("", "PT", "XQZ"):
        read_kind(text, letters=letters)


def test_long_words_take_no_time() -> None:
    for text in ("transmitter " * 20, "a" * 300, "w" * 299 + "!", "(" * 300, "," * 300, "self-" * 60, "x" * 100_000):
        kinds_from_words(text)


# ------------------------------------------------------------------------------------------------------- letters


@pytest.mark.parametrize(
    ("letters", "kind"),
    [
        ("PT", "transmitter"),
        ("FQIT", "transmitter"),
        ("PZT", "transmitter"),
        ("ZT", "transmitter"),
        ("AIT", "analyser"),
        ("AT", "analyser"),
        ("DPT", "transmitter"),
        ("DPIT", "transmitter"),
        ("GD", "gas detector"),
        ("FD", "fire detector"),
        ("TE", "element"),
        ("VE", "element"),
        ("FE", "primary element"),
        ("TW", "primary element"),
        ("FO", "primary element"),
        ("RO", "primary element"),
        ("LSHH", "switch"),
        ("PDSL", "switch"),
        ("ZSC", "switch"),
        ("XS", "switch"),
        ("PG", "gauge"),
        ("TG", "gauge"),
        ("LG", "glass"),
        ("FG", "glass"),
        ("XY", "solenoid"),
        ("SOV", "solenoid"),
        ("FV", "control valve"),
        ("PDCV", "control valve"),
        ("XV", "on/off valve"),
        ("UZV", "on/off valve"),
        ("AOV", "on/off valve"),
        ("MOV", "on/off valve"),
        ("PSV", "relief valve"),
        ("TSV", "relief valve"),
        ("PVRV", "relief valve"),
        ("PSE", "rupture disc"),
        ("HS", "hand switch"),
        ("HSS", "hand switch"),
        ("ZLO", "lamp"),
        ("YLR", "lamp"),
        ("FIC", "soft function"),
        ("PAH", "soft function"),
        ("TCI", "soft function"),  # an illegal order says as much as the legal one
        ("JB", "junction box"),
        ("PH", None),
        ("T", None),
        ("", None),
        ("FFF", None),
    ],
)
def test_derived_from_letters_alone(letters: str, kind: str | None) -> None:
    for has_signal in (None, True):
        if letters == "FE" and has_signal:
            continue
        assert derive_kind(letters, has_signal=has_signal) == kind


@pytest.mark.parametrize(
    ("letters", "circumstances", "kind"),
    [
        ("PCV", {"has_signal": False}, "self-acting regulator"),
        ("PCV", {"has_signal": True}, "control valve"),
        ("FV", {"has_signal": False}, "control valve"),
        ("HCV", {"has_signal": False}, "control valve"),
        ("HV", {"has_signal": False}, "manual valve"),
        ("HV", {"has_signal": True}, "on/off valve"),
        ("SV", {"has_signal": True}, "solenoid"),
        ("SV", {"has_signal": False}, None),
        ("FE", {"has_signal": True}, "element"),
        ("PI", {"has_signal": False}, "gauge"),
        ("TI", {"has_signal": False, "location": "field"}, "gauge"),
        ("PI", {"has_signal": True}, "indicator"),
        ("PI", {"has_signal": True, "location": "panel"}, "indicator"),
        ("PI", {"location": "system"}, "soft function"),
        ("TI", {"location": "control room"}, "soft function"),
        ("TI", {"transmitter_in_loop": True}, "soft function"),
        ("TI", {"transmitter_in_loop": True, "location": "field"}, "gauge"),
        ("PI", {"has_signal": True, "measuring_point": True}, "transmitter"),
        ("FIC", {"has_signal": True, "measuring_point": True}, "transmitter"),
        ("TIR", {"has_signal": True, "measuring_point": True}, "transmitter"),
        ("AI", {"has_signal": True, "measuring_point": True}, "analyser"),
        ("FIC", {"has_signal": False, "measuring_point": True}, "soft function"),
        ("FIC", {"has_signal": True, "location": "panel"}, "indicator"),
        ("EI", {"has_signal": False}, "soft function"),
        ("EI", {"location": "field"}, "indicator"),
        ("FY", {"has_signal": True}, "I/P converter"),
        ("FY", {"has_signal": False}, "soft function"),
        ("FY", {"has_signal": False, "location": "field"}, "I/P converter"),
        ("FY", {"location": "system"}, "soft function"),
        ("XY", {"has_signal": False}, "solenoid"),
        ("XY", {"location": "system"}, "soft function"),
        ("PSHH", {"location": "system"}, "soft function"),
        ("XA", {"has_signal": True}, "sounder"),
        ("PAH", {"has_signal": True}, "soft function"),
        ("CP", {"scheme": "kks"}, "transmitter"),
        ("CP", {"scheme": "kks", "has_signal": False}, "gauge"),
        ("CQ", {"scheme": "kks"}, "analyser"),
        ("AP", {"scheme": "kks"}, None),
    ],
)
def test_derived_from_letters_and_circumstances(
    letters: str, circumstances: dict[str, object], kind: str | None
) -> None:
    assert derive_kind(letters, **circumstances) == kind  # type: ignore[arg-type]


def test_derived_from_a_plants_codes() -> None:
    codes = codes_with({"KHV": ("Kugelhahn", "X"), "PT": ("point", "")})
    assert derive_kind("KHV", codes=codes) is Kind.ON_OFF_VALVE
    assert derive_kind("PT", codes=codes) is None


# ---------------------------------------------------------------------------------- which letters bear which kind


# What ordinary, correct lists hold: never a finding.
@pytest.mark.parametrize(
    ("letters", "words"),
    [
        ("FIT", "Electromagnetic flowmeter"),
        ("FE", "Electromagnetic flowmeter"),
        ("FE", "Magmeter"),
        ("FE", "Orifice plate"),
        ("FI", "Rotameter"),
        ("FIT", "Rotameter"),
        ("FQI", "Water meter"),
        ("FT", "Coriolis mass flow meter"),
        ("FT", "DP transmitter"),
        ("LT", "dp transmitter"),
        ("PDIT", "dp transmitter"),
        ("DPT", "DP transmitter"),
        ("LIT", "Sludge blanket monitor"),
        ("LIT", "Level sensor, ultrasonic"),
        ("AIT", "Aluminium monitor"),
        ("AIT", "pH sensor"),
        ("AE", "pH electrode"),
        ("AE", "pH probe"),
        ("AT", "Conductivity transmitter"),
        ("AT", "Gas detector"),
        ("AE", "Gas detector"),
        ("GD", "Gas detector"),
        ("GT", "Gas detector"),
        ("TE", "Pt100 3-wire"),
        ("TE", "Thermocouple with thermowell"),
        ("TT", "RTD"),
        ("TIT", "Pt100 with head transmitter"),
        ("TI", "Thermocouple"),
        ("TI", "Bimetal thermometer"),
        ("TI", "Thermometer"),
        ("TE", "Resistance thermometer"),
        ("PI", "Pressure transmitter"),
        ("PIC", "Pressure transmitter"),
        ("PI", "Pressure gauge"),
        ("PI", "Pressure indicator"),
        ("LI", "Sight glass"),
        ("LI", "Level indicator"),
        ("LAH", "Float switch"),
        ("LSHH", "Float switch"),
        ("LSH", "Conductivity probe"),
        ("LSL", "Vibrating fork"),
        ("FSL", "Flow switch, thermal"),
        ("PSHH", "Pressure switch"),
        ("PIS", "Pressure gauge with contacts"),
        ("ZSO", "Limit switch"),
        ("ZSC", "Proximity sensor"),
        ("ZLO", "Limit switch"),
        ("ZI", "Position indicator"),
        ("ZT", "Position transmitter"),
        ("ZT", "Position feedback"),
        ("VT", "Accelerometer"),
        ("VE", "Proximity probe"),
        ("VT", "Vibration monitor"),
        ("WT", "Load cell"),
        ("WIT", "Weighing transmitter"),
        ("ST", "Speed sensor"),
        ("SE", "Pick-up"),
        ("MOV", "Motorised valve"),
        ("MOV", "Electric actuator"),
        ("SDV", "Ball valve"),
        ("XV", "Pneumatic on/off valve"),
        ("XV", "Solenoid valve"),
        ("XV", "Butterfly valve"),
        ("XV", "Control valve"),
        ("FCV", "Control valve"),
        ("FV", "Globe valve"),
        ("FV", "Butterfly valve"),
        ("FV", "Positioner"),
        ("PCV", "Self-acting regulator"),
        ("PCV", "Pressure reducing valve"),
        ("PCV", "Control valve"),
        ("TCV", "Control valve, 3-way"),
        ("PV", "Breather valve"),
        ("HV", "Hand valve"),
        ("HV", "Ball valve"),
        ("PSV", "Relief valve"),
        ("PRV", "Pressure reducing valve"),
        ("PRV", "Relief valve"),
        ("PSE", "Bursting disc"),
        ("PVRV", "Breather valve"),
        ("SV", "Solenoid valve"),
        ("SV", "Safety valve"),
        ("SOV", "Solenoid valve"),
        ("XY", "Solenoid valve"),
        ("FY", "I/P converter"),
        ("PY", "Positioner"),
        ("TY", "Isolator"),
        ("FY", "Square root extractor"),
        ("HS", "Switch"),
        ("HS", "Push button"),
        ("XS", "Emergency stop push button"),
        ("HIC", "Manual loading station"),
        ("FIC", "Controller"),
        ("FIC", "Indicating controller"),
        ("PAH", "Alarm"),
        ("UA", "Horn"),
        ("XA", "Beacon"),
        ("YL", "Lamp"),
        ("FR", "Recorder"),
        ("TW", "Thermowell"),
        ("RO", "Restriction orifice"),
        ("JB", "Junction box"),
        ("BE", "Flame scanner"),
        ("BS", "Flame detector"),
        ("LG", "Magnetic level gauge"),
        ("LG", "Level gauge"),
        ("FG", "Sight flow indicator"),
        ("PDG", "Differential pressure gauge"),
        ("PDI", "DP gauge"),
        ("LCV", "Float operated valve"),
        ("PSLL", "PSLL"),
        ("AIT", "UVT monitor"),
        ("FQIT", "Flow totaliser"),
        ("XT", "Transmitter"),
        ("AT", "Transmitter"),
        ("TRCA", "Temperature transmitter"),
        ("MT", "Moisture analyser"),
        ("DT", "Density meter"),
    ],
)
def test_ordinary_words_for_ordinary_letters(letters: str, words: str) -> None:
    reading = read_kind(words, letters=letters)
    assert reading.words_known
    assert reading.kind is not None
    assert can_bear(reading.kind, letters) is not False


@pytest.mark.parametrize(
    ("letters", "words"),
    [
        ("PT", "Pressure gauge"),
        ("PIT", "Pressure gauge"),
        ("PT", "Pressure indicator"),
        ("PT", "Pressure switch"),
        ("PT", "Relief valve"),
        ("PT", "Temperature element"),
        ("FT", "Control valve"),
        ("FT", "Orifice plate"),
        ("FT", "Flow controller"),
        ("FT", "Gas analyser"),
        ("TT", "Thermowell"),
        ("TE", "Temperature transmitter"),
        ("TE", "Thermowell"),
        ("TE", "Pressure gauge"),
        ("TW", "RTD"),
        ("LT", "Level gauge"),
        ("LT", "Float switch"),
        ("LSHH", "Level transmitter"),
        ("LSHH", "Push button"),
        ("LG", "Level transmitter"),
        ("PG", "Pressure transmitter"),
        ("PG", "Pressure switch"),
        ("PSV", "Control valve"),
        ("PSV", "Pressure transmitter"),
        ("PSV", "Rupture disc"),
        ("PSE", "Relief valve"),
        ("XV", "Relief valve"),
        ("XV", "Limit switch"),
        ("FV", "Flow transmitter"),
        ("FCV", "Flow switch"),
        ("SDV", "Relief valve"),
        ("SDV", "Pressure transmitter"),
        ("MOV", "Pressure gauge"),
        ("DPT", "Pressure gauge"),
        ("GD", "Smoke alarm horn"),
        ("GD", "Pressure gauge"),
        ("JB", "Pressure transmitter"),
        ("ZSO", "Position transmitter"),
        ("ZSO", "Solenoid valve"),
        ("ZT", "Limit switch"),
        ("HS", "Pressure transmitter"),
        ("FIC", "Control valve"),
        ("PI", "Control valve"),
        ("ST", "Gas analyser"),
        ("PT", "Junction box"),
        ("PT", "Isolator"),
        ("FE", "Control valve"),
        ("XY", "Pressure transmitter"),
        ("AIT", "Control valve"),
    ],
)
def test_words_that_the_letters_cannot_bear(letters: str, words: str) -> None:
    kind = read_kind(words, letters=letters, has_signal=True).kind
    assert kind is not None
    assert can_bear(kind, letters) is False


@pytest.mark.parametrize("has_signal", [True, False, None])
@given(letters=st.text(alphabet="ABCDEFGHIJKLMNOPQRSTUVWXYZ", min_size=1, max_size=5))
def test_a_derived_kind_cannot_disagree(letters: str, has_signal: bool | None) -> None:
    for location in (None, "field", "panel", "system"):
        kind = derive_kind(letters, has_signal=has_signal, location=location)
        if kind is not None:
            assert can_bear(kind, letters) is not False


@pytest.mark.parametrize(("measuring_point", "bears"), [(True, True), (None, None), (False, False)])
def test_a_measuring_point_bears_what_measures(measuring_point: bool | None, bears: bool | None) -> None:
    for letters in ("PI", "TIR", "FIC", "TRCA"):
        assert can_bear(Kind.TRANSMITTER, letters, measuring_point=measuring_point) is bears
        assert can_bear(Kind.ELEMENT, letters, measuring_point=measuring_point) is bears
    assert can_bear(Kind.TRANSMITTER, "PG", measuring_point=measuring_point) is False


def test_no_opinion_on_illegal_letters_users_choices_and_other_schemes() -> None:
    assert can_bear(Kind.GAUGE, "FTIC") is None
    assert can_bear(Kind.GAUGE, "GT") is None
    assert can_bear(Kind.GAUGE, "CP", scheme="kks") is None
    assert can_bear(Kind.GAUGE, "PX") is None


def test_a_plants_code_is_asked_before_the_letters() -> None:
    codes = codes_with({"PT": ("push button, test", ""), "KHV": ("Kugelhahn", "")})
    assert can_bear(Kind.HAND_SWITCH, "PT", codes=codes) is True
    assert can_bear(Kind.TRANSMITTER, "PT", codes=codes) is False
    assert can_bear(Kind.CONTROL_VALVE, "KHV", codes=codes) is None
    assert can_bear(Kind.TRANSMITTER, "KHV", codes=codes) is False


@pytest.mark.parametrize("code", CODES)
@pytest.mark.parametrize("kind", Kind)
def test_each_known_code_bears_its_own_kind_and_few_others(code: str, kind: Kind) -> None:
    if kind is derive_kind(code):
        assert can_bear(kind, code) is True
    if kind in (Kind.GAUGE, Kind.POWER_SUPPLY, Kind.SOUNDER) and code != "SOV":
        assert can_bear(kind, code) is not True


# ------------------------------------------------------------------------------------------- words and letters


@pytest.mark.parametrize(
    ("words", "letters", "has_signal", "kind", "stated"),
    [
        ("", "PT", True, "transmitter", False),
        (None, "PT", True, "transmitter", False),
        ("Smart", "PT", True, "transmitter", False),
        ("Flow meter", "FIT", True, "transmitter", True),
        ("Flow meter", "FE", True, "element", True),
        ("Flow meter", "FI", False, "gauge", True),
        ("Pressure indicator", "PI", False, "gauge", True),
        ("Pressure indicator", "PI", True, "indicator", True),
        ("Flow indicator", "FIT", True, "transmitter", True),
        ("Valve", "PSV", False, "relief valve", True),
        ("Valve", "FV", True, "control valve", True),
        ("Valve", "XV", True, "on/off valve", True),
        ("Switch", "HS", True, "hand switch", True),
        ("Switch", "PSH", True, "switch", True),
        ("Sensor", "TE", True, "element", True),
        ("Sensor", "PT", True, "transmitter", True),
        ("Detector", "FD", True, "fire detector", True),
        ("Detector", "GD", True, "gas detector", True),
        ("Pressure gauge", "PT", True, "gauge", True),
        ("Pressure gauge", "", True, "gauge", True),
        ("", "", None, None, False),
    ],
)
def test_words_and_letters_together(
    words: str | None, letters: str, has_signal: bool | None, kind: str | None, stated: bool
) -> None:
    reading = read_kind(words, letters=letters, has_signal=has_signal)
    assert (reading.kind, reading.stated) == (kind, stated)


def test_words_that_are_not_known_are_told() -> None:
    assert read_kind("Wobbler", letters="PT").words_known is False
    assert read_kind(None, letters="PT").words_known is True


@pytest.mark.parametrize(
    ("kind", "letters", "proposed"),
    [
        (Kind.GAUGE, "PT", ("PG", "PI")),
        (Kind.GAUGE, "PDT", ("PDG", "PDI")),
        (Kind.GAUGE, "DPT", ("PDG", "PDI")),
        (Kind.TRANSMITTER, "PG", ("PT", "PIT")),
        (Kind.RELIEF_VALVE, "PT", ("PSV",)),
        (Kind.RELIEF_VALVE, "PDT", ("PSV",)),
        (Kind.RUPTURE_DISC, "PSV", ("PSE",)),
        (Kind.CONTROL_VALVE, "FT", ("FV", "FCV")),
        (Kind.ON_OFF_VALVE, "FT", ("XV",)),
        (Kind.HAND_SWITCH, "PSH", ("HS",)),
        (Kind.JUNCTION_BOX, "PT", ("JB",)),
        (Kind.PANEL, "PT", ()),
    ],
)
def test_letters_for_a_kind(kind: Kind, letters: str, proposed: tuple[str, ...]) -> None:
    assert letters_for_kind(kind, letters) == proposed


@pytest.mark.parametrize("kind", Kind)
@pytest.mark.parametrize("letters", ["PT", "PDIT", "FIC", "LSHH", "TE", "PSV", "XV", "DPT"])
def test_proposed_letters_mend(kind: Kind, letters: str) -> None:
    for proposal in letters_for_kind(kind, letters):
        assert read_letters(proposal).legal == "legal" or proposal == "JB"
        assert can_bear(kind, proposal) is not False


# -------------------------------------------------------------------------------------------------- what kinds are


def test_what_each_kind_is() -> None:
    def named(names: str) -> set[Kind]:
        return {Kind(name) for name in names.split(", ")}

    assert {k for k in Kind if k.electrical == "no"} == named(
        "primary element, gauge, glass, relief valve, rupture disc, self-acting regulator, soft function"
    )
    assert {k for k in Kind if k.electrical == "own"} == named("control valve, on/off valve, manual valve")
    assert {k for k in Kind if k.wired == "yes"} == named(
        "transmitter, analyser, gas detector, fire detector, switch, positioner, I/P converter, solenoid, hand switch, "
        "lamp, sounder"
    )
    assert {k for k in Kind if k.wired == "element"} == {Kind.ELEMENT}
    assert {k for k in Kind if k.wired == "circuit"} == {Kind.INDICATOR}
    assert {k for k in Kind if k.measures == "yes"} == named(
        "transmitter, analyser, gas detector, fire detector, element, gauge, glass"
    )
    assert {k for k in Kind if k.measures == "set pressure"} == named(
        "relief valve, rupture disc, self-acting regulator"
    )
    assert {k for k in Kind if k.location != "field"} == named("barrier, isolator, card, power supply, soft function")
    assert {k for k in Kind if k.process} == named(
        "transmitter, analyser, element, primary element, switch, gauge, glass, control valve, on/off valve, "
        "manual valve, relief valve, rupture disc, self-acting regulator"
    )


@pytest.mark.parametrize(
    ("kind", "letters", "touches"),
    [
        (Kind.SWITCH, "PSHH", True),
        (Kind.SWITCH, "ZSO", False),
        (Kind.SWITCH, "YS", False),
        (Kind.ON_OFF_VALVE, "XV", True),
        (Kind.TRANSMITTER, "ZT", False),
        (Kind.TRANSMITTER, "FT", True),
        (Kind.GAS_DETECTOR, "AT", False),
        (Kind.JUNCTION_BOX, "JB", False),
    ],
)
def test_what_touches_the_process(kind: Kind, letters: str, touches: bool) -> None:
    assert touches_process(kind, letters) is touches
