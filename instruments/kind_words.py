"""The words for kinds of instrument: English, German, and the usual ones of French, Spanish and Dutch."""

from __future__ import annotations

import re
import unicodedata
from functools import cache, lru_cache
from typing import Final

from instruments.kind_table import Kind

__all__ = ["kinds_of_words"]

_K = Kind
_SENSOR: Final = (_K.ELEMENT, _K.TRANSMITTER, _K.ANALYSER, _K.SWITCH, _K.GAS_DETECTOR)
_INDICATOR: Final = (_K.INDICATOR, _K.GAUGE, _K.SOFT_FUNCTION, _K.GLASS)
_FLOWMETER: Final = (_K.TRANSMITTER, _K.ELEMENT, _K.INDICATOR, _K.GAUGE)
_MONITOR: Final = (_K.TRANSMITTER, _K.ANALYSER, _K.GAS_DETECTOR, _K.INDICATOR, _K.SWITCH)
_DETECTOR: Final = (_K.GAS_DETECTOR, _K.FIRE_DETECTOR, _K.SWITCH, _K.TRANSMITTER, _K.ELEMENT, _K.ANALYSER)
# Which valve, the words around it say; it is any until they are asked.
_VALVE: Final = (
    _K.ON_OFF_VALVE,
    _K.CONTROL_VALVE,
    _K.MANUAL_VALVE,
    _K.RELIEF_VALVE,
    _K.REGULATOR,
    _K.SOLENOID,
)


def _words(text: str) -> re.Pattern[str]:
    """A pattern for any of some words, one blank on either side of the bar between them, or one a line."""
    alternatives = [part.strip() for part in re.split(r" \| |\n", text) if part.strip()]
    return re.compile(rf"(?<![a-z0-9])(?:{'|'.join(alternatives)})(?![a-z0-9])")


# Spellings that hold a stroke, a point or a preposition, made one word before the phrase is taken apart.
_ONE_WORD_TABLE: Final = (
    (
        r"""
        on ?[/-]? ?off | auf ?[/-] ?zu | tout ?(?:ou|/) ?rien | tor | todo ?[/-o]? ?nada
        open ?/ ?clos(?:e|ed) | aan ?/ ?uit | open ?/ ?shut
        """,
        "onoff",
    ),
    (
        r"p ?/ ?v | pressure ?[/&-] ?vacuum | pressure (?:and )?vacuum | vacuum ?[/&-] ?pressure",
        "breather",
    ),
    (
        r"""
        [ie] ?[/-] ?p | ip(?= (?:conv|trans|pos|umf|wand)) | i to p | current to (?:pressure|pneumatic)
        electro ?-? ?pneumatic | elektropneumatisch\w*
        """,
        "electropneumatic",
    ),
    (
        r"i ?/ ?o | e ?/ ?s | e ?/ ?a",
        "io",
    ),
    (
        r"t ?/ ?c | tc | thermo ?-? ?couples? | termopar(?:es)? | thermokoppels? | termocoppi[ae]",
        "thermocouple",
    ),
    (
        r"""
        t ?/ ?w | thermo ?-? ?wells? | (?:thermometer|temperature) pockets? | doigts? de gants?
        puits? thermometriques? | termopozos? | termovainas? | vainas? | thermozak | dompelbuis
        """,
        "thermowell",
    ),
    (
        r"j ?[/.]? ?b\.? | ajb | djb",
        "jb",
    ),
    (
        r"d ?[/.] ?p\.? | diff\.? ?press(?:ure)?\.? | delta ?-? ?p",
        "dp",
    ),
    (
        r"start ?[/-] ?stop",
        "startstop",
    ),
    (
        # The abbreviation of inductive is no indicator.
        r"magn(?:et(?:isch)?)?\.? ?-? ?ind(?:u[kc]ti[vf]\w*|\.)?",
        "mid",
    ),
    (
        r"c ?/ ?v",
        "control valve",
    ),
    (
        r"p ?/ ?b",
        "pushbutton",
    ),
    (
        r"""
        r\.?t\.?d\.?'?s? | pt ?-? ?1000? | ni ?-? ?100 | cu ?-? ?10
        resistance (?:temperature )?(?:detectors?|bulbs?) | thermo ?-? ?resistances?
        termo ?-? ?r+esistencias? | sondes? a resistance | resistance thermometers?
        """,
        "rtd",
    ),
    (
        r"fins? de course | final(?:es)? de carrera",
        "limitswitch",
    ),
    (
        r"""
        boites? de (?:jonction|raccordement|derivation)
        cajas? de (?:conexion(?:es)?|bornes|empalmes?|union|paso)
        """,
        "jb",
    ),
    (
        r"disques? de rupture | discos? de ruptura",
        "bursting disc",
    ),
    (
        r"arrets? (?:d ?'? ?)?urgence | paradas? de emergencia | e ?-? ?stops?",
        "emergency stop",
    ),
    (
        r"placas? (?:de )?orificio | plaques? a orifice",
        "orifice",
    ),
    (
        r"""
        detecteurs? de (?:fumee|flammes?|incendie)
        detector(?:es)? de (?:humos?|llamas?|fuego|incendios?)
        """,
        "fire detector",
    ),
    (
        r"detecteurs? de gaz | detector(?:es)? de gas(?:es)? | explosimetre",
        "gas detector",
    ),
    (
        r"valvulas? (?:de )?(?:seguridad|alivio) | soupapes? (?:de )?(?:surete|securite)",
        "safety valve",
    ),
    (
        r"fuentes? de (?:alimentacion|poder)",
        "power supply",
    ),
    (
        r"ohne hilfsenergie",
        "selfacting",
    ),
    (
        r"niveaux? a glaces? | indicateurs? a glaces? | nivel(?:es)? (?:de )?vidrio | nivel visual",
        "level glass",
    ),
    (
        r"""
        c ?/ ?w | w ?/ | with | incl(?:\.|uding)? | inc\. | complete | mit | inkl\.? | avec | con | met
        and | und | et | & | \+
        """,
        "with",
    ),
)

# Behind these words stands what a thing is for, or what it comes with.
_CUT: Final = re.compile(
    r" (with|for|fuer|fur|pour|para|voor|to|in|on|at|of|von|vom|de|du|des|del|della|d|van|a|au|aux|using|via"
    r"|type|typ) "
)

# Heads: the noun that says what a thing is. The last one of a phrase counts; of two that end together the
# longer, of two alike the first in this table. No kinds: a thing that is no instrument.
_HEADS_TABLE: Final[tuple[tuple[str, tuple[Kind, ...]], ...]] = (
    (
        r"""
        (?:network|ethernet|kvm) switch(?:es)? | frequency converters? | camera\w* | cables? | pumps? | soft starters?
        motors? | pumpe | motor
        """,
        (),
    ),
    # Transmitters and meters
    (
        r"""
        \w*transmitters? | transmetteurs? | transmisor(?:es)? | trasmettitor[ei] | transmittere
        \w*messumformer | dp cells? | trans | transm | transmt | trm | trmt | trmtr | tr | trx | tx
        xtr | xmt | xmtrs? | xmitters? | tmtr | trnsmtr | trsm | mu | \w+mu
        """,
        (_K.TRANSMITTER,),
    ),
    (
        r"""
        transducers? | xducers? | \w*umformer | \w*aufnehmer | \w*geber | \w*wandler | convert[eo]rs?
        convertisseurs? | conv | convertidor(?:es)? | encoders? | (?:current |power )?transformers?
        """,
        (_K.TRANSMITTER, _K.ISOLATOR, _K.IP_CONVERTER, _K.ELEMENT, _K.SWITCH),
    ),
    (
        r"""
        \w*rotameters? | rotametres? | rotametros? | variable area(?: flow ?meters?| meters?)?
        va meters? | purge meters? | schwebekorper\w* | schwebekoerper\w*
        """,
        (_K.GAUGE, _K.TRANSMITTER),
    ),
    (
        r"""
        turbidi?meters? | colou?rimeters? | nephelometers? | viscosimeters? | viscometers? | hygrometers?
        (?:particle|dust) (?:counters?|monitors?) | photometers? | \w*spectro\w* | \w*chromatograph\w* | refractometers?
        polarimeters? | gcs? | \w*analy[sz]ers? | analy[sz]ators? | \w*analysator(?:en)?
        \w*analyse\w*gerat\w* | \w*analyse\w*geraet\w* | analyseurs? | analizador(?:es)?
        analizzator[ei] | anal
        """,
        (_K.ANALYSER,),
    ),
    (
        r"(?:am|volt|watt|hour|run ?time|run hours?|panel)(?: hour)? ?meters? | tachometers? | drehzahlmesser",
        (_K.INDICATOR, _K.TRANSMITTER, _K.ELEMENT),
    ),
    (
        r"""
        \w*flow ?-? ?met(?:er|re)s? | flow ?mtr | \w*durchflu(?:ss|s)messer | \w*mengenmesser
        debit ?metres? | caudalimetros? | medidor(?:es)? | \w*zahler | \w*zaehler | contador(?:es)?
        compteurs? | mid
        """,
        _FLOWMETER,
    ),
    (
        r"\w*monitors? | \w*uberwachungsgerat\w* | \w*ueberwachungsgeraet\w*",
        _MONITOR,
    ),
    # Detectors
    (
        r"""
        (?:gas|h2s|co|co2|lel|o2|oxygen|ch4|methane)(?: gas| leak| ir| point)? (?:detector|alarm|head)s?
        (?:hydrocarbon|hc|toxic|ammonia|nh3|chlorine)(?: gas| leak| ir| point)? (?:detector|alarm|head)s?
        (?:cl2|hydrogen|h2|so2|refrigerant)(?: gas| leak| ir| point)? (?:detector|alarm|head)s?
        (?:combustible|flammable|open path)(?: gas| leak| ir| point)? (?:detector|alarm|head)s?
        gasmelder | gaswarn\w* | gasdetector(?:en)?
        """,
        (_K.GAS_DETECTOR,),
    ),
    (
        r"""
        (?:fire|flame|smoke|heat|thermal|beam)(?: gas| ir| uv)? (?:detectors?|heads?) | \w*brandmelder
        \w*rauchmelder | \w*flammenmelder | \w*warmemelder | \w*waermemelder | branddetector(?:en)?
        rookmelders?
        """,
        (_K.FIRE_DETECTOR,),
    ),
    (
        r"""
        flame (?:scanners?|monitors?|rods?|eyes?|relays?) | uv scanners? | ioni[sz]ation rods?
        scanners? | \w*flammenwachter
        """,
        (_K.ELEMENT, _K.FIRE_DETECTOR, _K.SWITCH),
    ),
    (
        r"""
        (?:leak|leakage|metal|position|level|flow|float|motion|speed|spill|water) detectors?
        \w*leckmelder | \w*lecksonde
        """,
        (_K.SWITCH, _K.TRANSMITTER, _K.ELEMENT),
    ),
    (
        r"detectors? | detecteurs? | detector(?:es) | \w*melder | detectoren",
        _DETECTOR,
    ),
    # Primary elements and elements
    (
        r"primary (?:flow )?elements? | flow elements? | flow el",
        (_K.PRIMARY_ELEMENT, _K.ELEMENT),
    ),
    (
        r"""
        orifices?(?: (?:plates?|flanges?|assembl\w+))? | restrict\w+(?: orifices?)? | (?:flow )?nozzles?
        venturis?(?: tubes?)? | pitots?(?: tubes?)? | flow wedges? | \w*blenden? | meetflens
        \w*drosseln? | \w*dusen? | \w*duesen? | weirs? | flumes? | parshall\w* | thermowells? | tw
        wells? | \w*schutzrohre? | \w*schutzhulsen? | \w*schutzhuelsen? | \w*tauchhulsen?
        \w*tauchhuelsen? | beschermbuis | (?:diaphragm|chemical|remote|membrane) seals? | seal ?pots?
        \w*druckmittler | separateurs? | sellos? | test (?:points?|connections?)
        sampl(?:e|ing) (?:probes?|points?) | stilling (?:wells?|tubes?)
        (?:condensate|condensing) (?:pots?|chambers?) | snubbers? | syphons? | siphons?
        flow straighteners? | flow conditioners?
        """,
        (_K.PRIMARY_ELEMENT,),
    ),
    (
        r"""
        rtds? | thermocouples? | \w*thermoelemente? | \w*widerstandsthermometer
        weerstandsthermometers? | \w*wth | thermistors?
        """,
        (_K.ELEMENT, _K.TRANSMITTER),
    ),
    (
        r"""
        (?:load|weigh|weighing) ?cells? | weigh(?:ing)? modules? | \w*wagezellen? | \w*waegezellen?
        electrodes? | \w*elektroden? | accelerometers?
        strain gauges? | pick ?-? ?ups? | tacho(?:generator)?s? | key ?phasors? | thermopiles?
        """,
        (_K.ELEMENT, _K.TRANSMITTER),
    ),
    (
        r"elements? | elem | elementos?",
        (_K.ELEMENT,),
    ),
    (
        r"rain gau?ges? | weather stations? | anemometers? | echo sounders?",
        (_K.TRANSMITTER, _K.ELEMENT, _K.SWITCH, _K.GAUGE),
    ),
    (
        r"feedbacks? | ruckmeldung\w* | rueckmeldung\w*",
        (_K.SWITCH, _K.TRANSMITTER, _K.INDICATOR),
    ),
    (
        r"(?:pressure|level|flow|druck|niveau|fullstands?|fuellstands?) ?(?:sensor(?:en|s)?|probes?|sonden?)",
        (_K.TRANSMITTER, _K.ELEMENT, _K.SWITCH),
    ),
    (
        r"(?:prox(?:imity)?|eddy current|displacement|vibration) probes?",
        (_K.ELEMENT, _K.TRANSMITTER, _K.SWITCH),
    ),
    (
        r"""
        (?:prox(?:imity)?|inductive|namur|position) sensors? | proximit(?:y|ies) | prox
        \w*initiator(?:en)? | reeds?
        """,
        (_K.SWITCH, _K.ELEMENT, _K.TRANSMITTER),
    ),
    (
        r"""
        \w*sensor(?:en|es|s)? | probes? | capteurs? | \w*sonden? | sondes? | sondas? | \w*fuhler
        \w*fuehler | \w*opnemers? | heads?
        """,
        _SENSOR,
    ),
    # Switches
    (
        r"""
        (?:hand|selector|manual|key ?(?:lock)?|toggle|push ?button|emergency(?: stop)?) switch(?:es)?
        (?:start ?/? ?stop|hoa|changeover|control|mode|bypass|override|reset) switch(?:es)?
        (?:local remote|auto manual) switch(?:es)?
        push ?-? ?buttons? | pbs? | epb | emergency stops? | (?:mode )?selectors? | \w*taster
        not ?-? ?aus\w* | \w*wahlschalter | \w*schlusselschalter | \w*handschalter
        bout(?:on|ons)(?: poussoirs?)? | commutateurs? | pulsador(?:es)? | selectora? | drukknop(?:pen)?
        (?:startstop|push ?-? ?button)(?: stations?| switch(?:es)?)? | control stations?
        keuzeschakelaars? | noodstop | (?:manual )?(?:alarm )?call ?points? | break ?glass(?:es)? | mcp
        hoa | local control stations? | lcs | joysticks? | \w*handmelder
        """,
        (_K.HAND_SWITCH,),
    ),
    (
        r"""
        (?:limit|float|level|flow|pressure|vacuum|temperature|temp|dp) ?(?:switch(?:es)?|sw)
        (?:proximity|position|speed|vibration|torque|micro) ?(?:switch(?:es)?|sw)
        limitswitch | microswitch(?:es)?
        \w*(?:druck|grenz|end|schwimmer|stromungs|stroemungs|niveau|temperatur)schalter | \w*wachter
        \w*waechter | \w*grenzsignalgeber | \w*grenzwertgeber | \w*grenztaster | pressostat(?:o|s|i)?
        presostatos? | thermostat[es]? | termostatos? | hygrostats? | eindschakelaars?
        \w*drukschakelaars? | floats? | (?:vibrating |tuning )?forks? | pull ?-? ?cords? | \w*contacts?
        \w*kontakte? | lichtschranke | light barriers?
        """,
        (_K.SWITCH,),
    ),
    (
        r"""
        \w*switch(?:es)? | sw | \w*schalter | interrupteurs? | interruptor(?:es)? | \w*schakelaars?
        contacteurs?
        """,
        (_K.SWITCH, _K.HAND_SWITCH),
    ),
    # Lamps and sounders
    (
        r"""
        lamps? | lights? | leds? | beacons? | strobes? | flashers? | \w*leuchten? | \w*leuchtmelder
        \w*lampen? | voyants? | lamparas? | pilotos? | luz | luces | lampjes? | visual alarms?
        """,
        (_K.LAMP,),
    ),
    (
        r"""
        sounders? | horns? | sirens? | sirenen? | sirenas? | hooters? | bells? | buzzers? | klaxons?
        audible alarms? | \w*hupen? | signalhorn | avertisseurs? | bocinas? | zoemers?
        """,
        (_K.SOUNDER,),
    ),
    (
        r"annunciators?",
        (_K.LAMP, _K.SOUNDER, _K.PANEL),
    ),
    # Glasses, gauges, indicators
    (
        r"""
        (?:sight|flow|level|gauge|reflex|transparent|tubular|liquid) ?glass(?:es)? | glass(?:es)?
        sight flow indicators? | flow sights? | sights? | \w*standglas(?:er)? | \w*standglaeser
        \w*schauglas(?:er)? | \w*schauglaeser | visor(?:es)? | mirillas? | peilglas | kijkglas
        magnetic level (?:gau?ges?|indicators?) | mlgs? | mlis? | level gau?ges? | gauge cocks?
        \w*standanzeiger | \w*standsanzeiger | \w*standsanzeige | \w*klappenanzeiger
        """,
        (_K.GLASS, _K.GAUGE, _K.INDICATOR),
    ),
    (
        r"""
        (?:bi ?-? ?metal(?:lic)?|dial|glass|capillary|filled|pointer|local|gas|vapou?r)(?: \w+)? thermometers?
        \w*zeigerthermometer | bimetall\w* | temperature gau?ges? | temp gau?ges?
        """,
        (_K.GAUGE,),
    ),
    (
        r"\w*thermometers? | thermometres? | termometros?",
        (_K.GAUGE, _K.ELEMENT),
    ),
    (
        r"""
        gau?ges? | gge | \w*manometers? | manometres? | manometros? | \w*drukmeters? | \w*druckanzeiger
        u ?tubes? | dials?
        """,
        (_K.GAUGE,),
    ),
    (
        r"""
        (?:digital|loop ?powered|panel|remote|electronic|field) (?:indicators?|displays?) | \w*schreiber
        recorders? | enregistreurs? | registrador(?:es)? | displays? | flow computers?
        """,
        (_K.INDICATOR, _K.SOFT_FUNCTION),
    ),
    (
        r"position indicators?",
        (_K.INDICATOR, _K.GAUGE, _K.SWITCH, _K.TRANSMITTER, _K.SOFT_FUNCTION),
    ),
    (
        r"""
        \w*indicators? | indic | ind | indicateurs? | indicador(?:es)? | \w*anzeigen? | \w*anzeiger
        aanwijzers? | indications?
        """,
        _INDICATOR,
    ),
    (
        r"totali[sz]ers? | counters?",
        (*_INDICATOR, _K.TRANSMITTER),
    ),
    # What drives a valve
    (
        r"""
        \w*positioners? | posnr | \w*stellungsregler | positionneurs? | posicionador(?:es)?
        klepstandstellers?
        """,
        (_K.POSITIONER, _K.IP_CONVERTER),
    ),
    (
        r"""
        electropneumatic(?: (?:convert[eo]rs?|transducers?|umformer|wandler|signal converters?))?
        (?:convert[eo]r|convertisseur|convertidor|umformer|wandler) electropneumatic
        """,
        (_K.IP_CONVERTER, _K.POSITIONER),
    ),
    (
        r"""
        valvulas? (?:de )?solenoides? | solenoides?
        solenoids?(?: (?:operated|actuated|pilot))*(?: valves?| vlvs?| coils?)?
        sol(?:enoid)? ?v(?:alve|lv)?s? | sov | sols? | \w*magnetventile? | electro ?-? ?vannes?
        electro ?-? ?valvulas? | \w*magneetklep(?:pen)? | pilot valves?
        """,
        (_K.SOLENOID, _K.ON_OFF_VALVE),
    ),
    (
        r"svs?",
        (_K.SOLENOID, _K.RELIEF_VALVE, _K.ON_OFF_VALVE),
    ),
    # Valves and what protects
    (
        r"""
        (?:rupture|bursting|burst) (?:discs?|disks?|panels?) | ruptures? | explosion (?:panels?|vents?)
        \w*berstscheiben? | breekplaten? | breekplaat
        """,
        (_K.RUPTURE_DISC,),
    ),
    (
        r"prvs?",
        (_K.RELIEF_VALVE, _K.REGULATOR),
    ),
    (
        r"""
        psvs? | tsvs? | pvrvs? | breathers? | (?:conservation|emergency|breather|tank) vents?
        vacuum breakers? | reliefs? | (?:pressure )?relief devices?
        """,
        (_K.RELIEF_VALVE,),
    ),
    (
        r"""
        (?:self ?-? ?acting |pressure |back ?-? ?pressure |gas |air |filter |temperature |flow )*regulators?
        \w*druckminderer | \w*druckreduzier\w* | \w*druckminderventile? | \w*reduzierventile?
        \w*reduzierstation | detendeurs? | (?:valvulas? )?reductor(?:as?|es)? | reduceer\w*
        filter regulators?
        """,
        (_K.REGULATOR,),
    ),
    (
        r"\w*druckregler",
        (_K.REGULATOR, _K.SOFT_FUNCTION, _K.INDICATOR),
    ),
    (
        r"mov | xv | sdv | bdv | esdv | rov | esv | usv | aov",
        (_K.ON_OFF_VALVE,),
    ),
    (
        r"cvs? | fcv | lcv | tcv",
        (_K.CONTROL_VALVE,),
    ),
    (
        r"pcv",
        (_K.CONTROL_VALVE, _K.REGULATOR),
    ),
    (
        r"""
        \w*valves? | vlvs? | vlve | \w*ventile? | vannes? | valvulas? | valvol[ae] | \w*klep(?:pen)?
        \w*afsluiters? | \w*klappen? | \w*schieber | \w*hahne? | soupapes? | robinets? | dampers?
        louv(?:re|er)s? | penstocks? | sluices? | actuators? | \w*antriebe? | actionneurs?
        actuador(?:es)? | (?:inlet )?guide vanes? | igvs? | \w*stellglied\w* | \w*armatur(?:en)?
        registres?
        """,
        _VALVE,
    ),
    # Cabinets and what stands in them
    (
        r"""
        isolat(?:ing|ion|ed) barriers? | (?:galvanic|signal|loop|is)? ?isolators?
        isolat(?:ing|ion) (?:amplifiers?|units?|repeaters?) | repeaters?(?: power suppl(?:y|ies))?
        \w*trennverstarker | \w*trennverstaerker | \w*speisetrenner | \w*trenner | isolateurs?
        aislador(?:es)? | scheidingsversterkers? | signal (?:convert[eo]rs?|conditioners?|splitters?)
        (?:trip|switch|isolating) amplifiers? | \w*schaltverstarker | \w*schaltverstaerker | amplifiers?
        """,
        (_K.ISOLATOR,),
    ),
    (
        r"\w*barriers? | \w*barrieren? | barreras?",
        (_K.BARRIER, _K.ISOLATOR),
    ),
    (
        r"relays? | relais | rele | reles | summators? | multipliers? | extractors? | ratio stations?",
        (_K.SOFT_FUNCTION, _K.ISOLATOR, _K.SOLENOID, _K.SWITCH),
    ),
    (
        r"cards? | modules? | \w*baugruppen? | \w*karten? | cartes? | tarjetas? | \w*kaart(?:en)?",
        (_K.CARD,),
    ),
    (
        r"""
        power suppl(?:y|ies) | psus? | \w*netzteile? | \w*netzgerate? | \w*netzgeraete?
        \w*stromversorgung | alimentations? | fuentes? | \w*voeding(?:en)?
        """,
        (_K.POWER_SUPPLY,),
    ),
    (
        r"""
        junction ?box(?:es)? | jbs? | \w*klemm(?:en)?kasten | \w*verteilerkasten | \w*anschlusskasten
        \w*anschlu(?:ss)?dose | aansluitkast(?:en)? | klemmenkast(?:en)?
        (?:marshalling|terminal|field|connection) ?box(?:es)?
        """,
        (_K.JUNCTION_BOX,),
    ),
    (
        r"""
        panels? | cabinets? | \w*schranke? | \w*schraenke? | racks? | enclosures? | lcp | ucp
        armoires? | tableros? | gabinetes? | \w*kast(?:en)? | consoles? | cubicles? | \w*schalttafel\w*
        \w*pulte? | pupitres? | shelters? | boards?
        """,
        (_K.PANEL,),
    ),
    # The system's
    (
        r"\w*controllers? | \w*regler | regulateurs? | controlador(?:es)? | regelaars? | pids?",
        (_K.SOFT_FUNCTION, _K.INDICATOR, _K.REGULATOR),
    ),
    (
        r"\w*alarms? | \w*alarme | alarmas? | alarmen",
        (_K.SOFT_FUNCTION, _K.LAMP, _K.SOUNDER, _K.SWITCH),
    ),
    (
        r"""
        soft(?:ware)?(?: (?:function|tag|point|alarm|signal|block|indicator|controller)s?| switch(?:es)?)?
        (?:dcs|scada|plc|hmi|system|virtual|calculated|derived)(?: \w+)? (?:function|tag|point)s?
        (?:dcs|scada|plc|hmi|system|virtual|calculated|derived)(?: \w+)? (?:indication|indicator|controller)s?
        (?:dcs|scada|plc|hmi|system|virtual|calculated|derived)(?: \w+)? (?:alarm|value|recorder|display)s?
        calculations? | calcs? | functions? | function blocks? | software ?funktion | interlocks?
        logic | setpoints? | set points? | computing \w+
        """,
        (_K.SOFT_FUNCTION,),
    ),
    # The commonest ending comes last, so that whatever knows the word better has it.
    (
        r"\w*met(?:er|re)s? | \w*messgerate? | \w*messgeraete? | \w*messer",
        _FLOWMETER,
    ),
    (
        r"(?:loading|hand|auto ?/? ?manual|control) stations?",
        (_K.SOFT_FUNCTION, _K.INDICATOR, _K.HAND_SWITCH),
    ),
)


# Compiled when the first words are read: a hundred patterns would slow the start of every command.
@cache
def _one_word() -> tuple[tuple[re.Pattern[str], str], ...]:
    return tuple((_words(text), f" {word} ") for text, word in _ONE_WORD_TABLE)


@cache
def _heads() -> tuple[tuple[re.Pattern[str], tuple[Kind, ...]], ...]:
    return tuple((_words(text), kinds) for text, kinds in _HEADS_TABLE)


_ANALYSIS: Final = _words(
    r"""
    alumini?um | iron | manganese | chlor\w* | ozone? | fluorid\w* | nitr\w+ | ammoni\w* | phosph\w*
    silica | sodium | hardness | ph | orp | redox | conductivity | leitfahigkeit\w* | conductivite
    conductividad | resistivity | turbidi\w* | trubung\w* | truebung\w* | turbidite | turbidez | toc
    tod | cod | bod | uv ?254 | colou?r | oxygen | sauerstoff\w* | o2 | co2? | so2 | nox | h2s
    hydrogen | methane | moisture | humidity | feuchte\w* | dew ?point | taupunkt | viscosity | opacity
    dust | staub\w* | particle\w* | solids | suspended | oil in water | hydrocarbons? | sulphur | sulfur
    alkalinity | peroxide | calorific | wobbe | ions? | organics? | chloroph\w* | gas | quality
    composition | concentration | salinity | tds | benzene | voc | flue
    """
)
_ELECTRONIC: Final = _words(
    r"""
    radar | servo | nuclear | radiometric | gamma | ultrasonic | electronic | density | laser
    capacitance | magnetostrictive | smart | hart | 4 ?-? ?20 ?ma
    """
)
_PRINCIPLES: Final = _words(
    r"""
    radar | gwr | guided wave | ultrasonic | ultraschall | coriolis | vortex | mag(?:netic)?
    hydrostatic | displacer | bubbler | thermal mass | electromagnetic | magnetostrictive | \w*messung
    measurements? | mesure | medicion | meting
    """
)
_PROCESS_VARIABLE: Final = re.compile(
    r"\b(?:press?i|druk|druck|niveau|nivel|level|debit|caudal|flow|durchflu|fu(?:e)?llstand)"
)

_RELIEF_WORDS: Final = _words(
    r"""
    relief | breathers? | conservation | sicherheits\w* | soupapes? | seguridad | alivio | veiligheid\w*
    uberstrom\w* | ueberstrom\w* | overstort\w* | psv | prv
    """
)
_SHUT_WORDS: Final = _words(
    r"""
    shut ?-? ?(?:down|off)s? | onoff | emergency | esd | isolat\w+ | isolement | blow ?-? ?down | block
    absperr\w*
    schnellschluss\w* | quick | slam | trip | open | close | corte | fermeture | afsluit\w* | dump
    """
)
_SELF_WORDS: Final = _words(
    r"""
    self ?-? ?(?:act|operat|regulat|contain|actuat)\w* | selfacting | reduc\w+ | reduz\w+ | reduktion\w*
    \w*minder\w* | eigenmedium | autoregul\w* | blanket\w*
    """
)
# Control valve, self operated: wherever it stands, it says that no signal drives the valve.
_WITHOUT_POWER: Final = _words(r"self ?-? ?(?:act|operat|regulat|contain|actuat)\w* | selfacting")
_MANUAL_WORDS: Final = _words(
    r"""
    manual(?:ly)? | hand | handwheel | check | non ?-? ?return | needle | root | locked | lockable
    handventil\w* | handrad\w* | ruckschlag\w* | rueckschlag\w* | handafsluiter\w* | manuell\w*
    manuelle | manual(?:es)? | clapet
    """
)
_CONTROL_WORDS: Final = _words(
    r"""
    control | ctrl | ctl | cntrl | regulating | modulat\w+ | throttl\w+ | \w*regel\w*
    \w*stellventil\w* | \w*stellklappe\w* | regulation | reglage | regulatrice | regulacion | reguladora
    proportional | globe | commande
    """
)
_DRIVEN_WORDS: Final = _words(
    r"""
    motor\w* | pneumatic\w* | pneumatisch\w* | pneumatique | neumatica | electric\w* | elektr\w*
    hydraulic\w* | actuat\w* | operated | ball | butterfly | gate | knife | plug | pinch | diaphragm
    three | 3 ?way | angle | dampers? | penstocks? | sluices? | louv\w+ | \w*kugelhahn\w* | \w*schieber
    \w*klappen? | \w*antriebe? | mov | drain | divert\w* | rotary | slide
    """
)


@lru_cache(maxsize=16384)
def kinds_of_words(text: str) -> tuple[Kind, ...]:
    """All kinds that words may mean, the likeliest first; empty where they name none.

    >>> [k.value for k in kinds_of_words("flow meter")]
    ['transmitter', 'element', 'indicator', 'gauge']
    """
    if len(text) > 300:
        return ()
    plain = _plain(text)
    for kind in Kind:
        # An indicator may be a dial, a switch one for the hand: these two words alone decide nothing.
        if text.strip().lower() == kind.lower() and kind not in (_K.INDICATOR, _K.SWITCH):
            return (kind,)
    alternatives = [a.strip() for a in re.split(r" ?[/|;()\[\]\n] ?| - ", plain) if a.strip()]
    found = [kinds for kinds in (_phrase(f" {a} ", plain) for a in alternatives) if kinds is not None]
    if not found:
        if _PRINCIPLES.search(plain):
            return (_K.TRANSMITTER, _K.ELEMENT, _K.SWITCH, _K.ANALYSER, _K.INDICATOR, _K.GAUGE)
        return ()
    first = found[0]
    if first and first[0] in _WEAK:
        first = next((kinds for kinds in found if kinds and kinds[0] in _STRONG), first)
    return first


_WEAK: Final = frozenset({_K.INDICATOR, _K.GAUGE, _K.GLASS, _K.SOFT_FUNCTION})
_STRONG: Final = frozenset({_K.TRANSMITTER, _K.ANALYSER, _K.SWITCH, _K.ELEMENT, _K.GAS_DETECTOR, _K.FIRE_DETECTOR})


def _plain(text: str) -> str:
    """Lower case without accents, with spellings of several signs made one word."""
    folded = unicodedata.normalize("NFKD", text.casefold())
    plain = "".join(c for c in folded if not unicodedata.combining(c))
    plain = re.sub(r"[‐-―−]", "-", plain).replace("Δ", "d").replace("'", " ")
    for pattern, word in _one_word():
        plain = pattern.sub(word, plain)
    plain = plain.replace(".", " ").replace("_", " ").replace(":", " ")
    return f" {' '.join(plain.split())} "


def _phrase(phrase: str, whole: str) -> tuple[Kind, ...] | None:
    """The kinds of one phrase: by its head, else by what stands behind a preposition; None without a head."""
    # SWITCH, PRESSURE: the noun stands before the comma. Two nouns in a row are the usual order.
    for piece in phrase.split(",") if "," in phrase else [phrase]:
        # Float type level switch, flow transmitter orifice type: a type is no head.
        untyped = re.sub(r" \w+ typ(?:e|us)? ", " ", f" {piece} ")
        if untyped.strip() != piece.strip() and _head(untyped, whole) is not None:
            piece = untyped
        cut = _CUT.search(f" {piece.strip()} ")
        main = f" {piece.strip()} "[: cut.start() + 1] if cut else piece
        head = _head(main, whole)
        rest = f" {piece.strip()} "[cut.end() - 1 :] if cut else ""
        if head is None and cut:
            head = _head(piece.replace(" with ", " "), whole)
            rest = ""
        if head is not None:
            if rest and head:
                comes_with = _head(rest, whole) if cut and cut[1] == "with" else None
                if comes_with and _completes(head[0], comes_with[0]):
                    return tuple(dict.fromkeys((*comes_with, *head)))
            return head
    return None


def _completes(main: Kind, comes_with: Kind) -> bool:
    """A gauge with a transmitter is wired as one, a well with an element measures."""
    if main in (_K.GAUGE, _K.GLASS, _K.INDICATOR):
        return comes_with in (_K.TRANSMITTER, _K.SWITCH)
    if main is _K.PRIMARY_ELEMENT:
        return comes_with in (_K.TRANSMITTER, _K.ELEMENT)
    return main is _K.ELEMENT and comes_with is _K.TRANSMITTER


def _head(phrase: str, whole: str) -> tuple[Kind, ...] | None:
    phrase = f" {' '.join(phrase.replace('/', ' ').replace(',', ' ').split())} "
    best: tuple[int, int, int] | None = None
    kinds: tuple[Kind, ...] = ()
    seen: set[Kind] = set()
    for at, (pattern, means) in enumerate(_heads()):
        for match in pattern.finditer(phrase):
            if len(means) == 1:
                seen.update(means)
            place = (match.end(), -match.start(), -at)
            if best is None or place > best:
                best, kinds = place, means
    if best is None:
        return None
    if kinds == _VALVE:
        return _valve(phrase, whole)
    if kinds[:1] == (_K.GAUGE,) and kinds == (_K.GAUGE,):
        if _ELECTRONIC.search(phrase):
            return (_K.TRANSMITTER, _K.GAUGE, _K.SWITCH)
        # Gauge pressure transmitter, or transmitter gauge: the word tells the reference.
        for other in (_K.TRANSMITTER, _K.SWITCH):
            if other in seen:
                return (other,)
    if kinds[:1] == (_K.GLASS,) and _ELECTRONIC.search(phrase):
        return (_K.TRANSMITTER, *kinds)
    if _ANALYSIS.search(whole) and kinds in (_FLOWMETER, _MONITOR, _SENSOR, (_K.TRANSMITTER,)):
        if kinds == _MONITOR and re.search(r"\bgas\b", whole):
            return (_K.GAS_DETECTOR, *kinds)
        if kinds == _FLOWMETER and "flow" in whole:
            return kinds
        if kinds == (_K.TRANSMITTER,):
            return (_K.TRANSMITTER, _K.ANALYSER)
        return tuple(dict.fromkeys((_K.ANALYSER, *kinds)))
    if kinds == _DETECTOR and _PROCESS_VARIABLE.search(whole):
        return (_K.SWITCH, _K.TRANSMITTER, _K.ELEMENT)
    if kinds == _SENSOR and re.search(r"temp|therm", whole):
        return (_K.ELEMENT, _K.TRANSMITTER)
    if kinds == _SENSOR and _PROCESS_VARIABLE.search(whole):
        return (_K.TRANSMITTER, _K.ELEMENT, _K.SWITCH)
    return kinds


def _valve(phrase: str, whole: str) -> tuple[Kind, ...]:
    """Which valve: the words before it say so, else those of the whole text."""
    if _WITHOUT_POWER.search(whole) and not _RELIEF_WORDS.search(whole):
        return (_K.REGULATOR,)
    for words in (phrase, whole):
        if re.search("sicherheits(?:absperr|schnell)", words):
            return (_K.ON_OFF_VALVE,)
        if _RELIEF_WORDS.search(words):
            return (_K.RELIEF_VALVE,)
        if re.search(r"\bsafety\b", words) and not _SHUT_WORDS.search(words):
            return (_K.RELIEF_VALVE, _K.ON_OFF_VALVE)
        if _SELF_WORDS.search(words):
            return (_K.REGULATOR,)
        if re.search(r"\bonoff\b", words):
            return (_K.ON_OFF_VALVE,)
        if _CONTROL_WORDS.search(words) and not re.search(r"shut ?-? ?(?:down|off)", words):
            if re.search(r"back ?-? ?pressure", words):
                return (_K.CONTROL_VALVE, _K.REGULATOR)
            return (_K.CONTROL_VALVE,)
        if _MANUAL_WORDS.search(words):
            return (_K.MANUAL_VALVE, _K.ON_OFF_VALVE)
        if _SHUT_WORDS.search(words):
            return (_K.ON_OFF_VALVE,)
        if _DRIVEN_WORDS.search(words):
            return (_K.ON_OFF_VALVE, _K.CONTROL_VALVE)
    return _VALVE
