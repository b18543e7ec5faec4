"""The flammable gases and vapours that Ferrule knows: names, auto-ignition temperatures by source, and groups.

A figure stands here only where its source lists the substance by itself. The groups are from memory and a
competent person checks them against the bought standard; a group that is not remembered with some certainty is
left out, never guessed.
"""

from __future__ import annotations

from typing import Final

Row = tuple[str, str, float | None, float | None, str | None, str | None, str, tuple[str, ...]]

# Name; CAS number; auto-ignition in degC by IEC 60079-20-1:2010 and by NFPA 497 (2008), None where that source
# does not list it; group of IEC 60079-20-1 and of NEC 500.6, both from memory (B/D: B, or D with every conduit
# sealed, an exception of NEC 500.6(A)); other names, formulas and words of other languages; what it holds for
# certain, or may hold, where a source has no figure for the whole.
# Of xylene the figure by IEC is that of its lowest isomer.
GAS_ROWS: Final[tuple[Row, ...]] = (
    ("methane", "74-82-8", 600, 600, "IIA", "D", "ch4; methan; méthane; metano; r50", ()),
    ("ethane", "74-84-0", 515, 472, "IIA", "D", "c2h6; ethan; éthane; etano; r170", ()),
    ("propane", "74-98-6", 450, 450, "IIA", "D", "c3h8; propan; propano; r290; n-propane", ()),
    ("n-butane", "106-97-8", 372, 288, "IIA", "D", "butane; c4h10; butan; n-butan; butano; nc4; n-c4h10; r600", ()),
    ("isobutane", "75-28-5", 460, 460, "IIA", "D",
     "iso-butane; i-butane; isobutan; 2-methylpropane; ic4; i-c4h10; r600a", ()),
    ("n-pentane", "109-66-0", 243, 243, "IIA", "D", "pentane; c5h12; pentan; n-pentan; pentano", ()),
    ("isopentane", "78-78-4", 420, 420, "IIA", "D", "iso-pentane; i-pentane; isopentan; 2-methylbutane", ()),
    ("neopentane", "463-82-1", None, 450, "IIA", "D", "", ()),
    ("cyclopentane", "287-92-3", 320, None, "IIA", "D", "cyclopentan", ()),
    ("n-hexane", "110-54-3", 225, 225, "IIA", "D", "hexane; hexan; n-hexan; c6h14; hexano; hexanes", ()),
    ("cyclohexane", "110-82-7", 244, 245, "IIA", "D", "cyclohexan", ()),
    ("methylcyclohexane", "108-87-2", 250, 250, "IIA", "D", "methylcyclohexan", ()),
    ("n-heptane", "142-82-5", 204, 204, "IIA", "D", "heptane; heptan; n-heptan; c7h16", ()),
    ("n-octane", "111-65-9", 206, 206, "IIA", "D", "octane; oktan; n-oktan; c8h18", ()),
    ("isooctane", "540-84-1", 413, None, "IIA", "D", "iso-octane; isooktan; 2,2,4-trimethylpentane", ()),
    ("n-nonane", "111-84-2", 205, 205, "IIA", "D", "nonane; nonan; c9h20", ()),
    ("n-decane", "124-18-5", 235, None, "IIA", "D", "decane; dekan; c10h22", ()),
    ("cyclopropane", "75-19-4", 500, 503, None, None, "cyclopropan", ()),
    ("ethylene", "74-85-1", 440, 490, "IIB", "C", "c2h4; ethene; ethylen; ethen; éthylène; etileno", ()),
    ("propylene", "115-07-1", 455, 460, "IIA", "D", "c3h6; propene; propylen; propen; propylène; propileno", ()),
    ("1-butene", "106-98-9", 345, None, "IIA", "D", "but-1-ene; 1-butylene; 1-buten", ()),
    ("isobutylene", "115-11-7", 483, None, "IIA", "D", "isobutene; iso-butylene; isobuten; 2-methylpropene", ()),
    ("1,3-butadiene", "106-99-0", 420, 420, "IIB", "B/D", "butadiene; butadien; 1.3-butadiene; 1,3-butadien", ()),
    ("isoprene", "78-79-5", None, 220, None, "D", "isopren", ()),
    ("1-hexene", "592-41-6", None, 245, None, "D", "hexene; hexen", ()),
    ("cyclohexene", "110-83-8", 244, 244, "IIA", "D", "cyclohexen", ()),
    ("dicyclopentadiene", "77-73-6", 455, 503, None, None, "dcpd", ()),
    ("1-decene", "872-05-9", 235, 235, None, "D", "decene", ()),
    ("acetylene", "74-86-2", 305, 305, "IIC", "A",
     "c2h2; acetylen; ethyne; azetylen; acetileno; acetilene; acétylène", ()),
    ("propyne", "74-99-7", 340, None, "IIB", "C", "methylacetylene; methyl acetylene", ()),
    ("benzene", "71-43-2", 498, 498, "IIA", "D", "benzol; benzène; benceno; c6h6", ()),
    ("toluene", "108-88-3", 530, 480, "IIA", "D", "toluol; tolueno; toluène; c7h8", ()),
    ("ethylbenzene", "100-41-4", 431, 432, "IIA", "D", "ethyl benzene; ethylbenzol", ()),
    ("o-xylene", "95-47-6", 470, None, "IIA", "D", "o-xylol; ortho-xylene", ()),
    ("m-xylene", "108-38-3", 465, None, "IIA", "D", "m-xylol; meta-xylene", ()),
    ("p-xylene", "106-42-3", 535, None, "IIA", "D", "p-xylol; para-xylene", ()),
    ("xylene", "1330-20-7", 465, 464, "IIA", "D", "xylol; xylenes; xylole; mixed xylenes", ()),
    ("styrene", "100-42-5", 490, 490, "IIA", "D", "styrol; styrène; estireno", ()),
    ("cumene", "98-82-8", 424, 424, "IIA", "D", "cumol; isopropylbenzene", ()),
    ("p-cymene", "99-87-6", 436, 436, None, "D", "cymene", ()),
    ("chlorobenzene", "108-90-7", 593, 593, "IIA", "D", "chlorbenzol; monochlorobenzene", ()),
    ("phenol", "108-95-2", 595, None, "IIA", None, "", ()),
    ("aniline", "62-53-3", 615, 615, "IIA", "D", "anilin", ()),
    ("nitrobenzene", "98-95-3", 481, 482, "IIA", "D", "nitrobenzol", ()),
    ("pyridine", "110-86-1", 482, 482, "IIA", "D", "pyridin", ()),
    ("naphthalene", "91-20-3", 540, None, "IIA", None, "naphthalin", ()),
    ("hydrogen", "1333-74-0", 560, 500, "IIC", "B",
     "h2; wasserstoff; hydrogene; hydrogène; hidrogeno; hidrógeno; idrogeno; waterstof", ()),
    ("carbon monoxide", "630-08-0", 607, 609, "IIB", "C",
     "co; kohlenmonoxid; kohlenstoffmonoxid; monoxyde de carbone", ()),
    ("hydrogen sulfide", "7783-06-4", 260, 260, "IIB", "C",
     "h2s; schwefelwasserstoff; hydrogen sulphide; hydrogène sulfuré; sulfuro de hidrogeno; "
     "sulfuro de hidrógeno", ()),
    ("ammonia", "7664-41-7", 630, 651, "IIA", "D",
     "nh3; ammoniak; ammoniac; amoniaco; amoníaco; r717; anhydrous ammonia", ()),
    ("carbon disulfide", "75-15-0", 90, 90, "IIC", None,
     "cs2; schwefelkohlenstoff; kohlenstoffdisulfid; carbon disulphide; carbon bisulphide; "
     "carbon bisulfide; sulfure de carbone", ()),
    ("carbonyl sulfide", "463-58-1", 209, None, "IIB", None, "cos; carbonyl sulphide", ()),
    ("hydrogen cyanide", "74-90-8", 538, 538, "IIB", "C", "hcn; blausäure; blausaeure; hydrocyanic acid", ()),
    ("hydrazine", "302-01-2", None, 23, None, "C", "n2h4; hydrazin", ()),
    ("methanol", "67-56-1", 440, 385, "IIA", "D", "ch3oh; meoh; metanol; methyl alcohol", ()),
    ("ethanol", "64-17-5", 400, 363, "IIB", "D", "c2h5oh; etoh; etanol; ethyl alcohol; ch3ch2oh bioethanol", ()),
    ("1-propanol", "71-23-8", 385, 413, "IIB", "D", "n-propanol; propan-1-ol; n-propyl alcohol", ()),
    ("2-propanol", "67-63-0", 399, 399, "IIA", "D",
     "isopropanol; iso-propanol; ipa; propan-2-ol; isopropyl alcohol; i-propanol", ()),
    ("1-butanol", "71-36-3", 343, 343, "IIA", "D", "butanol; n-butanol; n-butyl alcohol; butan-1-ol", ()),
    ("2-butanol", "78-92-2", 406, 405, "IIA", "D", "sec-butanol; butan-2-ol", ()),
    ("isobutanol", "78-83-1", 408, 416, "IIA", "D", "iso-butanol; isobutyl alcohol; 2-methyl-1-propanol", ()),
    ("tert-butanol", "75-65-0", None, 360, None, "D", "t-butanol; tert-butyl alcohol", ()),
    ("1-pentanol", "71-41-0", 320, 300, "IIA", "D", "n-pentanol; amylalcohol; amyl alcohol", ()),
    ("cyclohexanol", "108-93-0", 300, 300, "IIA", "D", "", ()),
    ("allyl alcohol", "107-18-6", 378, 378, "IIB", "C", "allylalkohol", ()),
    ("furfuryl alcohol", "98-00-0", 370, 490, None, "C", "furfurylalkohol", ()),
    ("acetone", "67-64-1", 539, 465, "IIA", "D", "aceton; acétone; acetona; propanone", ()),
    ("methyl ethyl ketone", "78-93-3", 404, 404, "IIB", "D",
     "mek; butanone; 2-butanone; butanon; methylethylketon", ()),
    ("methyl isobutyl ketone", "108-10-1", 475, None, "IIA", "D", "mibk; methylisobutylketon", ()),
    ("cyclohexanone", "108-94-1", 419, 420, "IIA", "D", "cyclohexanon", ()),
    ("formaldehyde", "50-00-0", 424, 430, "IIB", "B", "hcho; ch2o; formaldehyd; methanal", ()),
    ("acetaldehyde", "75-07-0", 155, 175, "IIA", "C", "acetaldehyd; ethanal; ch3cho", ()),
    ("propionaldehyde", "123-38-6", 188, 207, "IIB", "C", "propanal; propionaldehyd", ()),
    ("n-butyraldehyde", "123-72-8", 205, 218, "IIA", "C", "butyraldehyde; butanal; butyraldehyd", ()),
    ("acrolein", "107-02-8", 217, 235, "IIB", "B/C", "propenal", ()),
    ("crotonaldehyde", "4170-30-3", 230, 232, "IIB", "C", "crotonaldehyd", ()),
    ("furfural", "98-01-1", 316, 316, None, "C", "", ()),
    ("formic acid", "64-18-6", 525, 434, "IIA", "D", "ameisensäure; ameisensaeure; hcooh", ()),
    ("acetic acid", "64-19-7", 510, 426, "IIA", "D", "essigsäure; essigsaeure; ch3cooh; glacial acetic acid", ()),
    ("acetic anhydride", "108-24-7", 316, 316, "IIA", "D", "essigsäureanhydrid", ()),
    ("propionic acid", "79-09-4", 485, 466, "IIA", "D", "propionsäure", ()),
    ("acrylic acid", "79-10-7", 406, 438, "IIB", "D", "acrylsäure; acrylsaeure", ()),
    ("methyl formate", "107-31-3", 525, 449, "IIA", "D", "methylformiat", ()),
    ("methyl acetate", "79-20-9", 505, 454, "IIA", "D", "methylacetat", ()),
    ("ethyl acetate", "141-78-6", 470, 427, "IIA", "D", "ethylacetat; essigester; etac; acetic ester", ()),
    ("n-butyl acetate", "123-86-4", 390, 421, "IIA", "D", "butylacetat; butyl acetate", ()),
    ("vinyl acetate", "108-05-4", 385, 402, "IIA", "D", "vinylacetat; vam; vinyl acetate monomer", ()),
    ("methyl acrylate", "96-33-3", 455, 468, "IIB", "D", "methylacrylat", ()),
    ("ethyl acrylate", "140-88-5", 350, 372, "IIB", "D", "ethylacrylat", ()),
    ("methyl methacrylate", "80-62-6", 430, 422, "IIA", "D", "mma; methylmethacrylat", ()),
    ("ethyl nitrite", "109-95-5", 95, None, None, None, "ethylnitrit", ()),
    ("dimethyl ether", "115-10-6", 240, 350, "IIB", "C", "dme; dimethylether; methyl ether", ()),
    ("diethyl ether", "60-29-7", 175, 160, "IIB", "C", "ether; diethylether; ethyl ether", ()),
    ("diisopropyl ether", "108-20-3", 405, 443, "IIA", "D", "dipe; diisopropylether; isopropyl ether", ()),
    ("methyl tert-butyl ether", "1634-04-4", 385, 435, "IIA", "D", "mtbe; methyl tertiary butyl ether", ()),
    ("tetrahydrofuran", "109-99-9", 230, 321, "IIB", "C", "thf", ()),
    ("furan", "110-00-9", 390, None, "IIB", "C", "", ()),
    ("1,4-dioxane", "123-91-1", 375, 180, "IIB", "C", "dioxane; dioxan; 1,4-dioxan; 1.4-dioxane", ()),
    ("ethylene oxide", "75-21-8", 429, 429, "IIB", "B/C", "ethylenoxid; oxirane; oxyde d éthylène", ()),
    ("propylene oxide", "75-56-9", 430, 449, "IIB", "B/C", "propylenoxid", ()),
    ("2-ethoxyethanol", "110-80-5", 235, 235, "IIB", "C", "ethylglykol", ()),
    ("2-butoxyethanol", "111-76-2", 238, 238, None, "C", "butylglykol; butyl glycol", ()),
    ("2-methoxyethanol", "109-86-4", 285, 285, "IIB", "D", "methylglykol", ()),
    ("methyl chloride", "74-87-3", 625, 632, "IIA", "D", "chloromethane; chlormethan; ch3cl; r40", ()),
    ("ethyl chloride", "75-00-3", 510, 519, "IIA", "D", "chloroethane; chlorethan; c2h5cl", ()),
    ("vinyl chloride", "75-01-4", 415, 472, "IIA", "D", "vcm; vinylchlorid; c2h3cl; vinyl chloride monomer", ()),
    ("vinylidene chloride", "75-35-4", 530, 570, "IIA", "D", "vinylidenchlorid; 1,1-dichloroethene", ()),
    ("ethylene dichloride", "107-06-2", 438, 413, "IIA", "D", "edc; 1,2-dichloroethane; 1,2-dichlorethan", ()),
    ("propylene dichloride", "78-87-5", 557, 557, "IIA", "D", "1,2-dichloropropane", ()),
    ("allyl chloride", "107-05-1", 390, 485, "IIA", "D", "allylchlorid", ()),
    ("epichlorohydrin", "106-89-8", 385, None, "IIB", "C", "epichlorhydrin", ()),
    ("tetrafluoroethylene", "116-14-3", 255, None, "IIB", None, "c2f4; tetrafluorethylen", ()),
    ("acrylonitrile", "107-13-1", 480, 481, "IIB", "D", "acrylnitril", ()),
    ("acetonitrile", "75-05-8", 523, 524, "IIA", "D", "acetonitril", ()),
    ("methylamine", "74-89-5", 430, 430, "IIA", "D", "monomethylamine; methylamin", ()),
    ("dimethylamine", "124-40-3", 400, 400, "IIA", "C", "dma; dimethylamin", ()),
    ("trimethylamine", "75-50-3", 190, None, "IIA", "C", "tma; trimethylamin", ()),
    ("ethylamine", "75-04-7", 385, 385, "IIA", "D", "ethylamin", ()),
    ("diethylamine", "109-89-7", 312, 312, "IIA", "C", "diethylamin", ()),
    ("triethylamine", "121-44-8", 215, 249, "IIA", "C", "triethylamin", ()),
    ("isopropylamine", "75-31-0", 340, 402, "IIA", "D", "isopropylamin", ()),
    ("ethylenediamine", "107-15-3", 385, 385, "IIA", "D", "ethylendiamin", ()),
    ("monoethanolamine", "141-43-5", 410, 410, "IIA", "D", "mea; ethanolamine; ethanolamin", ()),
    ("diethanolamine", "111-42-2", 662, None, None, None, "diethanolamin", ()),
    ("methyl diethanolamine", "105-59-9", 305, None, None, None,
     "mdea; methyldiethanolamine; methyldiethanolamin", ()),
    ("dimethylformamide", "68-12-2", 440, 455, "IIA", "D", "dmf; n,n-dimethylformamide; dimethyl formamide", ()),
    ("nitromethane", "75-52-5", 414, 418, None, None, "nitromethan", ()),
    ("morpholine", "110-91-8", 275, 310, None, "C", "morpholin", ()),
    ("methyl mercaptan", "74-93-1", 340, None, None, "C", "methanethiol; methylmercaptan; ch3sh", ()),
    ("ethyl mercaptan", "75-08-1", 295, 300, None, "C", "ethanethiol; ethylmercaptan; c2h5sh", ()),
    ("petrol", "8006-61-9", 280, 280, "IIA", "D",
     "gasoline; benzin; essence; gasolina; ottokraftstoff; motor spirit", ()),
    ("kerosene", "8008-20-6", 210, 210, "IIA", "D", "kerosin; jet-a1; jet-a; jet a1; jet a; jet fuel; jp-8", ()),
    ("petroleum naphtha", "8030-30-6", None, 288, None, "D", "naphtha; rohbenzin", ()),
    ("turpentine", "8006-64-2", 253, 253, "IIA", "D", "terpentin; turpentine oil", ()),
    ("liquefied petroleum gas", "68476-85-7", None, 405, None, "D",
     "lpg; flüssiggas; fluessiggas; autogas", ("propane", "n-butane")),
)  # fmt: skip

# Mixtures without a figure of their own. Their composition decides, so nothing is cleared by their name.
MIXTURE_ROWS: Final[tuple[Row, ...]] = (
    ("natural gas", "", None, None, None, None,
     "erdgas; lng; cng; ng; gaz naturel; gas natural; sales gas; pipeline gas", ("methane",)),
    ("biogas", "", None, None, None, None,
     "faulgas; klärgas; klaergas; biomethane; biomethan; digester gas; sewage gas; landfill gas; "
     "deponiegas; raw biogas; rohbiogas; bio gas; bio-gas", ("methane",)),
    ("synthesis gas", "", None, None, None, None,
     "syngas; synthesegas; reformer gas; reformed gas; water gas", ("hydrogen", "carbon monoxide")),
    ("coke oven gas", "", None, None, None, None,
     "koksgas; kokereigas; cog; town gas; stadtgas", ("hydrogen", "methane", "carbon monoxide")),
    ("blast furnace gas", "", None, None, None, None, "gichtgas; bfg; hochofengas", ("carbon monoxide",)),
    ("hydrogen in natural gas", "", None, None, None, None, "hythane", ("hydrogen", "methane")),
    ("btx", "", None, None, None, None, "", ("benzene", "toluene", "xylene")),
    ("fuel gas", "", None, None, None, None, "heizgas; brenngas; refinery gas; raffineriegas", ()),
    ("off-gas", "", None, None, None, None,
     "offgas; abgas; off gas; waste gas; flare gas; fackelgas; vent gas; tail gas; purge gas; "
     "process gas; prozessgas", ()),
    ("hydrocarbons", "", None, None, None, None,
     "hydrocarbon; kohlenwasserstoffe; hc; voc; hydrocarbon gas; hydrocarbon vapour", ()),
    ("condensate", "", None, None, None, None, "kondensat; natural gas liquids; ngl; gas condensate", ()),
    ("crude oil", "", None, None, None, None, "rohöl; rohoel; crude", ()),
    ("diesel", "", None, None, None, None,
     "dieselkraftstoff; gasoil; gasöl; gasoel; heizöl; heizoel; diesel oil; diesel fuel; gas oil; "
     "fuel oil", ()),
    ("solvents", "", None, None, None, None,
     "lösemittel; lösungsmittel; loesemittel; loesungsmittel; organic solvents", ()),
)  # fmt: skip

# What is named beside a flammable gas and burns nothing itself. Oxygen is none of them: it makes things worse.
INERT_WORDS: Final = (
    "nitrogen; n2; stickstoff; azote; carbon dioxide; co2; kohlendioxid; kohlenstoffdioxid; water; h2o; wasser; steam; "
    "water vapour; water vapor; wasserdampf; air; luft; argon; ar; helium; he; inert gas; inertgas"
)

# Compounds whose names hold that of a gas of the table and mean another thing.
OTHER_COMPOUNDS: Final = (
    "hydrogen chloride; hcl; hydrogen fluoride; hf; hydrogen bromide; hydrogen iodide; hydrogen peroxide; h2o2; "
    "hydrogen selenide; ethylene glycol; propylene glycol; ethylenglykol; propylenglykol; butylene glycol; "
    "ammonia solution; ammonia water; aqueous ammonia; ammonium nitrate; ammonium hydroxide; methanesulfonic acid; "
    "methane sulfonic acid; benzene sulfonic acid; ethylene carbonate; propylene carbonate; toluene diisocyanate; tdi; "
    "phenol formaldehyde; acetone cyanohydrin; natural gas odorant"
)
