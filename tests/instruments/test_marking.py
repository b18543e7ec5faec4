"""Ex markings: the vectors, other marks of the same kinds, what they mean; no text breaks the reader."""

import json
import time
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from instruments.certificate import Certificate, read_certificate, read_certificates
from instruments.epl import derived_epl, protection_epl
from instruments.marking import Marking, read_marking
from instruments.marking_text import MAX_LENGTH

VECTORS = Path(__file__).parent.parent / "vectors" / "markings.jsonl"
FIELDS = ("atex", "protections", "assoc", "group", "temp", "epl", "ta")


def vectors() -> list[dict[str, str]]:
    return [json.loads(line) for line in VECTORS.read_text(encoding="utf-8").splitlines() if line.strip()]


@pytest.mark.parametrize("row", vectors(), ids=lambda row: row["string"])
def test_vector(row: dict[str, str]) -> None:
    marking = read_marking(row["string"])
    assert marking.as_vector() == {name: row[name] for name in FIELDS}
    assert marking.readable is (row["ta"] != "-")
    assert marking.flags == ()


@pytest.mark.parametrize(
    ("text", "vector"),
    [
        ("Ex ia IIC T4/T5/T6 Ga", "- | ia | - | IIC | T6..T4, worst T4 | Ga | default"),
        ("Ex ia IIC T4...T6 Ga", "- | ia | - | IIC | T6..T4, worst T4 | Ga | default"),
        ("II 1G Ex ia IIC T4 Ga", "II 1 G | ia | - | IIC | T4 | Ga | default"),
        ("II2G Ex d IIC T6 Gb", "II 2 G | d | - | IIC | T6 | Gb | default"),
        (
            "II 2 GD Ex ia IIC T4 Gb / Ex tb IIIC T135°C Db",
            "II 2 G + II 2 D | ia; tb | - | IIC; IIIC | T4; 135 °C | Gb; Db | default",
        ),
        ("Ex ia IIC T4 Ga, Ex ia IIIC T135°C Da", "- | ia | - | IIC; IIIC | T4; 135 °C | Ga; Da | default"),
        (
            "II 1 G, II 1 D Ex ia IIC T4 Ga, Ex ia IIIC T135°C Da",
            "II 1 G + II 1 D | ia | - | IIC; IIIC | T4; 135 °C | Ga; Da | default",
        ),
        (
            "II 1 GD Ex ia IIC T4 Ga; Ex ia IIIC T135°C Da",
            "II 1 G + II 1 D | ia | - | IIC; IIIC | T4; 135 °C | Ga; Da | default",
        ),
        (
            "II 2 G Ex db IIB T4 Gb; II 2 D Ex tb IIIC T135°C Db",
            "II 2 G + II 2 D | db; tb | - | IIB; IIIC | T4; 135 °C | Gb; Db | default",
        ),
        (
            "II 2 G Ex db IIB T4 Gb II 2 D Ex tb IIIC T135°C Db IP66",
            "II 2 G + II 2 D | db; tb | - | IIB; IIIC | T4; 135 °C | Gb; Db | default",
        ),
        (
            "II 2 D Ex tD A21 IP66 T85°C",
            "II 2 D | tD A21 | - | III unspecified | 85 °C | derived Db | default",
        ),
        ("Ex tD A21 IP67 T100°C", "- | tD A21 | - | III unspecified | 100 °C | derived Db | default"),
        (
            "II 2 GD EEx d IIC T6 IP66 T85°C",
            "II 2 G + II 2 D | d; none | - | IIC; III unspecified | T6; 85 °C | "
            "derived Gb; from category: Db | default",
        ),
        (
            "II 2 GD EEx d IIC T6 T85°C",
            "II 2 G + II 2 D | d; none | - | IIC; III unspecified | T6; 85 °C | "
            "derived Gb; from category: Db | default",
        ),
        ("II 2 GD EEx d IIC T6", "II 2 G + II 2 D | d | - | IIC | T6 | derived Gb | default"),
        ("II 2 G EEx ia IIC T4", "II 2 G | ia | - | IIC | T4 | from category: Gb | default"),
        ("II 1/2 G EEx d ia IIC T6", "II 1/2 G | d+ia | - | IIC | T6 | derived Gb | default"),
        ("II 1/2 G EEx ia IIC T6", "II 1/2 G | ia | - | IIC | T6 | from category: Ga/Gb | default"),
        ("EEx ib[ia] IIC T4", "- | ib | ia (derived Ga) | IIC | T4 | derived Gb | default"),
        ("EEx dem [ib] IIC T4", "- | d+e+m | ib (derived Gb) | IIC | T4 | derived Gb | default"),
        ("EExd IIC T6", "- | d | - | IIC | T6 | derived Gb | default"),
        ("EEx-d IIB T4", "- | d | - | IIB | T4 | derived Gb | default"),
        ("EExiaIICT4", "- | ia | - | IIC | T4 | derived Ga | default"),
        ("CE 0344 <Ex> II 1 G Ex ia IIC T4 Ga", "II 1 G | ia | - | IIC | T4 | Ga | default"),
        ("CE 0344 Ex II 2 G Ex d IIC T6 Gb", "II 2 G | d | - | IIC | T6 | Gb | default"),
        ("εx II 2 G Ex db IIC T6 Gb IP66/67 ABC 20 ATEX 0001X", "II 2 G | db | - | IIC | T6 | Gb | default"),
        ("Ex db IIC T6 Gb IECEx ABC 20.0001X Issue 2", "- | db | - | IIC | T6 | Gb | default"),
        ("Ex ia op is IIC T4 Ga", "- | ia+op is | - | IIC | T4 | Ga | default"),
        (
            "Ex db [ia IIC Ga] [op is Ga] IIB T4 Gb",
            "- | db | ia -> Ga, output group IIC; op is -> Ga | IIB | T4 | Gb | default",
        ),
        (
            "[Ex ia Ga] IIC; [Ex ia Da] IIIC; Class I, Division 1, Groups A-D associated",
            "- | none | ia -> Ga; ia -> Da | IIC (output); IIIC (output); NEC A,B,C,D (output) | none | none | n/a",
        ),
        (
            "II (1) G [Ex ia Ga] IIC / II (1) D [Ex ia Da] IIIC",
            "II (1) G + II (1) D | none | ia -> Ga; ia -> Da | IIC (output); IIIC (output) | none | none | n/a",
        ),
        ("I (M1) [Ex ia Ma] I", "I (M1) | none | ia -> Ma | I (output) | none | none | n/a"),
        ("II (2) G [Ex ib Gb] IIC", "II (2) G | none | ib -> Gb | IIC (output) | none | none | n/a"),
        ("II 3 G Ex nA IIC T4 Gc X", "II 3 G | nA | - | IIC | T4 | Gc | default"),
        (
            "Class I, Zone 0, AEx ia IIC T4 Ga; Class I Div 1 Groups A,B,C,D T4",
            "- | ia | - | IIC; NEC A,B,C,D | T4 | Ga; Class I Div 1 | default; max 40",
        ),
        (
            "Class I, II, III Division 1 Groups A-G T4",
            "- | - | - | NEC I:A,B,C,D; II:E,F,G; III | T4 | Class I Div 1; Class II Div 1; Class III Div 1 | max 40",
        ),
        (
            "Class I, Div. 1, Groups B, C, D; Class II, Div. 1, Groups E, F, G; Class III; T5 Ta = 70 °C",
            "- | - | - | NEC I:B,C,D; II:E,F,G; III | T5 | Class I Div 1; Class II Div 1; Class III | max 70",
        ),
        (
            "XP Class I Div 1 Gr BCD; DIP Class II, III Div 1 Gr EFG T6",
            "- | - | - | NEC I:B,C,D; II:E,F,G; III | T6 | Class I Div 1; Class II Div 1; Class III Div 1 | max 40",
        ),
        (
            "IS Class I Div 1 Groups A,B,C,D T4 Type 4X",
            "- | - | - | NEC A,B,C,D | T4 | Class I Div 1 | max 40",
        ),
        ("C1D2 Gr ABCD T4", "- | - | - | NEC A,B,C,D | T4 | Class I Div 2 | max 40"),
        ("CID1 BCD", "- | - | - | NEC B,C,D | none | Class I Div 1 | max 40"),
        (
            "Class I Div 1 & 2 Groups ABCD T4A",
            "- | - | - | NEC A,B,C,D | T4A = 120 °C | Class I Div 1 | max 40",
        ),
        ("Class 1 Div 2 Group D T2B", "- | - | - | NEC D | T2B = 260 °C | Class I Div 2 | max 40"),
        ("Ex ia IIC T4 Ga Ta -40 to +70°C", "- | ia | - | IIC | T4 | Ga | -40..70"),
        ("Ex ia IIC T4 Ga (Ta = -20°C to +60°C)", "- | ia | - | IIC | T4 | Ga | -20..60"),
        ("Ex ia IIC T4 Ga Ta ≤ 60°C", "- | ia | - | IIC | T4 | Ga | max 60, lower default -20"),
        ("Ex ia IIC T4 Ga -20°C<Ta<60°C", "- | ia | - | IIC | T4 | Ga | -20..60"),
        ("Ex ia IIC T4 Ga Tamb: -40/+70", "- | ia | - | IIC | T4 | Ga | -40..70"),
        (
            "Ex ia IIC T6 (-40 °C ≤ Ta ≤ 40°C) / T4 (-40 °C ≤ Ta ≤ 70 °C) Ga",
            "- | ia | - | IIC | T6@<=40; T4@<=70 | Ga | -40..70",
        ),
        (
            "Ex ia IIC T6 Ta ≤ 40°C, T4 Ta ≤ 70 °C Ga",
            "- | ia | - | IIC | T6@<=40; T4@<=70 | Ga | max 70, lower default -20",
        ),
        ("Ex ia IIC T4 (Ta ≤ 60°C) Ga", "- | ia | - | IIC | T4@<=60 | Ga | max 60, lower default -20"),
        ("Ex ia IIC T4 Ga -20...+60 °C", "- | ia | - | IIC | T4 | Ga | -20..60"),
        ("EX IA IIC T4 GA", "- | ia | - | IIC | T4 | Ga | default"),
        ("ex ia iic t4 ga", "- | ia | - | IIC | T4 | Ga | default"),
        ("EX DB EB IIC T6 GB", "- | db+eb | - | IIC | T6 | Gb | default"),
        ("EX TB IIIC T85°C DB", "- | tb | - | IIIC | 85 °C | Db | default"),
        ("[EX IA GA] IIC", "- | none | ia -> Ga | IIC (output) | none | none | n/a"),
        ("EEX D IIC T6", "- | d | - | IIC | T6 | derived Gb | default"),
        ("Ех ia IIC T4 Ga", "- | ia | - | IIC | T4 | Ga | default"),
        ("Ex ia IIC T4 Gа", "- | ia | - | IIC | T4 | Ga | default"),
        ("Ex tb IIIC T85°C (T6) Db", "- | tb | - | IIIC | 85 °C (T6) | Db | default"),
        ("Ex tb IIIC T80°C...T130°C Db", "- | tb | - | IIIC | 80..130 °C, worst 130 °C | Db | default"),
        ("Ex ta IIIC T₂₀₀ 85 °C Da", "- | ta | - | IIIC | 85 °C at 200 mm layer | Da | default"),
        ("Ex ta IIIC T₂₀₀85 °C Da", "- | ta | - | IIIC | 85 °C at 200 mm layer | Da | default"),
        ("Ex ta IIIC T200 T85 °C Da", "- | ta | - | IIIC | 85 °C at 200 mm layer | Da | default"),
        ("Ex tb IIIC T135 Db", "- | tb | - | IIIC | 135 °C | Db | default"),
        ("Ex t IIIC T85°C Db IP6X", "- | t | - | IIIC | 85 °C | Db | default"),
        ("Ex h IIC T4 Gb", "- | h | - | IIC | T4 | Gb | default"),
        ("II 2 G Ex h IIC T4", "II 2 G | h | - | IIC | T4 | from category: Gb | default"),
        ("Ex db h IIB T4 Gb", "- | db+h | - | IIB | T4 | Gb | default"),
        ("Ex pxb IIC T4 Gb", "- | pxb | - | IIC | T4 | Gb | default"),
        ("Ex p II T4", "- | p | - | II (no subdivision) | T4 | derived Gb | default"),
        ("Ex e q II T4", "- | e+q | - | II (no subdivision) | T4 | derived Gb | default"),
        ("Ex sb IIC T4 Gb", "- | sb | - | IIC | T4 | Gb | default"),
        ("Ex d IIB T4 (135 °C) Gb", "- | d | - | IIB | 135 °C (T4) | Gb | default"),
        ("Ex db II (CS2) T6 Gb", "- | db | - | named gas only: CS2 | T6 | Gb | default"),
        ("Ex db IIA (methane) T1 Gb", "- | db | - | named gas only: methane | T1 | Gb | default"),
        ("Ex db IIB (+H2) T4 Gb", "- | db | - | IIB + H2 | T4 | Gb | default"),
        ("Ex db IIB+hydrogen T4 Gb", "- | db | - | IIB + hydrogen | T4 | Gb | default"),
        ("Ex db IIB+C2H2 T4 Gb", "- | db | - | IIB + C2H2 | T4 | Gb | default"),
        ("Ex db IIB+H2T4 Gb", "- | db | - | IIB + H2 | T4 | Gb | default"),
        ("Ex d IIC T6 Gb, IP66, ABC 20 ATEX 0001 X", "- | d | - | IIC | T6 | Gb | default"),
        ("[Ex ia Ga] IIC/IIB", "- | none | ia -> Ga | IIC/IIB (output) | none | none | n/a"),
        ("[EEx ia] IIC", "- | none | ia (derived Ga) | IIC (output) | none | none | n/a"),
        ("Ex [ia Ga] IIC", "- | none | ia -> Ga | IIC (output) | none | none | n/a"),
        ("Ex ib pxb [ia] IIC T4 Gb", "- | ib+pxb | ia (derived Ga) | IIC | T4 | Gb | default"),
        ("Ex mb IIC T4 Gb -40 ≤ Tamb ≤ 80", "- | mb | - | IIC | T4 | Gb | -40..80"),
        ("Ex ia I Ma", "- | ia | - | I | none | Ma | default"),
        ("I M2 Ex db I Mb", "I M2 | db | - | I | none | Mb | default"),
        ("II 1 D Ex ia IIIC T135°C Da", "II 1 D | ia | - | IIIC | 135 °C | Da | default"),
        ("II 1D T 95 °C IP68", "II 1 D | none | - | III unspecified | 95 °C | from category: Da | default"),
        ("Ex ibD 21 T80°C", "- | ibD 21 | - | III unspecified | 80 °C | derived Db | default"),
        ("Ex pD 21 T100°C", "- | pD 21 | - | III unspecified | 100 °C | derived Db | default"),
        ("Ex maD 20 T120 °C", "- | maD 20 | - | III unspecified | 120 °C | derived Da | default"),
        ("Zone 20 AEx ta IIIC T200 120°C Da", "- | ta | - | IIIC | 120 °C at 200 mm layer | Da | default"),
        ("Class I, Zone 2, AEx nA IIC T4", "- | nA | - | IIC | T4 | derived Gc | default"),
        ("Class I, Zone 1, Ex db IIC T6 Gb", "- | db | - | IIC | T6 | Gb | default"),
        ("Ex tb IIIC T85°C", "- | tb | - | IIIC | 85 °C | derived Db | default"),
        ("Ex de IIC T6 Gb; U", "- | d+e | - | IIC | T6 | Gb | default"),
        ("Ex db IIC Gb U", "- | db | - | IIC | none | Gb | default"),
        ("Ex nA [ic] IIC T4 Gc", "- | nA | ic (derived Gc) | IIC | T4 | Gc | default"),
        ("Ex ic [ia Ga] IIC T4 Gc -40°C ≤ Ta ≤ +85°C", "- | ic | ia -> Ga | IIC | T4 | Gc | -40..85"),
        (
            "II 3(1) G Ex ec [ia Ga] IIC T4 Gc; II (1) D [Ex ia Da] IIIC",
            "II 3(1) G + II (1) D | ec; none | ia -> Ga; ia -> Da | IIC; IIIC (output) | T4; none | "
            "Gc; none | default; n/a",
        ),
        (
            "II 3 G (1 D) Ex ec [ia Da] IIC T4 Gc",
            "II 3 G + II (1) D | ec | ia -> Da | IIC | T4 | Gc | default",
        ),
        ("Ex d ia IIC T6 Ga/Gb", "- | d+ia | - | IIC | T6 | Ga/Gb | default"),
        ("Ex da IIC T4 Ga", "- | da | - | IIC | T4 | Ga | default"),
        ("Cl I, Div 1, Gp A, B, C, D; T-Code T4", "- | - | - | NEC A,B,C,D | T4 | Class I Div 1 | max 40"),
        ("Cl. II Div. 2 Gr. F, G T3B", "- | - | - | NEC F,G | T3B = 165 °C | Class II Div 2 | max 40"),
        (
            "CL II, III DIV 1 GR E-G T120°C",
            "- | - | - | NEC II:E,F,G; III | 120 °C | Class II Div 1; Class III Div 1 | max 40",
        ),
        (
            "Class I, Division 2, Groups A, B, C, and D",
            "- | - | - | NEC A,B,C,D | none | Class I Div 2 | max 40",
        ),
        (
            "Class I, Division 2, Groups A, B, C, D, T4A; Class II, Division 2, Groups F and G, T3C",
            "- | - | - | NEC A,B,C,D; NEC F,G | T4A = 120 °C; T3C = 160 °C | Class I Div 2; Class II Div 2 | max 40",
        ),
        (
            "Class I Division 1 Groups C & D associated apparatus",
            "- | none | - | NEC C,D (output) | none | none | n/a",
        ),
        ("Class I, Groups C, D, Division 1, T6", "- | - | - | NEC C,D | T6 | Class I Div 1 | max 40"),
        ("Ex db eb IIB+H2 T3…T6 Gb", "- | db+eb | - | IIB + H2 | T6..T3, worst T3 | Gb | default"),
        ("Ex db eb [ib] mb IIC T4 Gb", "- | db+eb+mb | ib (derived Gb) | IIC | T4 | Gb | default"),
        ("EEx ia IIC T4 to T6", "- | ia | - | IIC | T6..T4, worst T4 | derived Ga | default"),
        ("Ex tc IIIB T 120 °C Dc Ta -20°C to +40°C", "- | tc | - | IIIB | 120 °C | Dc | -20..40"),
        (
            "Class I Div 2 Groups ABCD T3C Tamb 60 °C",
            "- | - | - | NEC A,B,C,D | T3C = 160 °C | Class I Div 2 | max 60",
        ),
        (
            "II 3 G / II 3 D Ex ec IIC T4 Gc; Ex tc IIIC T90°C Dc",
            "II 3 G + II 3 D | ec; tc | - | IIC; IIIC | T4; 90 °C | Gc; Dc | default",
        ),
        (
            "Ex ia IIC T6 Ga; Ex ia IIIC T85°C Da -40 °C ≤ Ta ≤ +60 °C",
            "- | ia | - | IIC; IIIC | T6; 85 °C | Ga; Da | -40..60",
        ),
        (
            "Ex ia IIC T6 Ga Ta -40..60 °C; Ex tb IIIC T85°C Db Ta -20..40 °C",
            "- | ia; tb | - | IIC; IIIC | T6; 85 °C | Ga; Db | -40..60; -20..40",
        ),
        ("Class I, Zone 1, AEx ia IIC T4", "- | ia | - | IIC | T4 | derived Gb | default"),
        ("Ex nL nA IIC T4", "- | nL+nA | - | IIC | T4 | derived Gc | default"),
        ("[Ex ic] IIB", "- | none | ic (derived Gc) | IIB (output) | none | none | n/a"),
        ("II 3(2) G Ex nA [ib Gb] IIC T4 Gc", "II 3(2) G | nA | ib -> Gb | IIC | T4 | Gc | default"),
        ("Ex db IIC T4 Gb Ta = -20+55 °C", "- | db | - | IIC | T4 | Gb | -20..55"),
        ("II ½ G Ex ia IIC T4 Ga/Gb", "II 1/2 G | ia | - | IIC | T4 | Ga/Gb | default"),
        ("Ex ia ⅡC T4 Ga", "- | ia | - | IIC | T4 | Ga | default"),
    ],
)
def test_marks_of_the_same_kind(text: str, vector: str) -> None:
    assert read_marking(text).as_vector() == dict(zip(FIELDS, vector.split(" | "), strict=True))


@pytest.mark.parametrize(
    ("text", "problem"),
    [
        ("Ex", "no type of protection behind Ex at ''"),
        ("", "no type of protection, class or category"),
        ("   ", "no type of protection, class or category"),
        ("Ex ia", "no gas or dust group in 'Ex ia'"),
        ("Ex ia T4 Ga", "no gas or dust group in 'Ex ia T4 Ga'"),
        ("Ex xx IIC T4", "no type of protection behind Ex at 'xx IIC T4'"),
        ("Ex i IIC T4", "no type of protection behind Ex at 'i IIC T4'"),
        ("Ex ia IIC T7 Ga", "cannot read 'T7 Ga'"),
        ("Ex ia IIC T4A Ga", "cannot read 'T4A Ga'"),
        ("Ex ia IIC T4 Ga/Db", "cannot read 'Ga/Db'"),
        ("Ex ia IID T4 Ga", "no gas or dust group in 'Ex ia'"),
        ("Ex ia IIC/IIIC T4/T135°C Ga/Da", "a gas group and a dust group in one marking: IIC/IIIC"),
        ("Ex d IIC T6 T85°C", "cannot read 'T85°C'"),
        ("[ia Ga] IIC", "cannot read '[ia Ga] IIC'"),
        ("[Ex ia Ga IIC", "cannot read '' in the bracket"),
        ("[Ex Ga] IIC", "no type of protection in the bracket at 'Ga] IIC'"),
        (
            "Ex [ia Ga] IIC T4 Gc",
            "an EPL or a temperature, but no type of protection of the equipment itself",
        ),
        ("II 2 G", "nothing that can be read behind category II 2 G"),
        ("II 2 G T4", "nothing that can be read behind category II 2 G"),
        ("II 4 G Ex ia IIC T4", "cannot read 'II 4 G Ex ia IIC T4'"),
        ("I 2 G Ex ia IIC T4", "cannot read 'I 2 G Ex ia IIC T4'"),
        ("Class I Div 3", "cannot read 'Div 3'"),
        ("Class I Div 2 Gp ABCD T7", "cannot read 'T7'"),
        ("Class I Div 2 Gp ABH T4", "cannot read 'Gp ABH T4'"),
        ("Class IV Div 1", "cannot read 'Class IV Div 1'"),
        ("Class I, Zone 1 T4", "cannot read 'Zone 1 T4'"),
        ("Ta -20..40", "an ambient range before the marking it belongs to"),
        ("IP66", "no type of protection, class or category"),
        ("ABC 20 ATEX 0001X", "no type of protection, class or category"),
        ("Ex ia IIC T4 Ga Ta -20..40 Ta -40..60", "two ambient ranges for one marking"),
        ("Ex ia IIC T4 Ga Ta 60..20", "cannot read 'Ta 60..20'"),
        ("Ex ia IIC T4 Ga -20 °C ≤ Ta ≥ 60 °C", "cannot read '-20 °C ≤ Ta ≥ 60 °C'"),
        ("Ex ia IIC T4 Ga but not near solvents", "cannot read 'but not near solvents'"),
        ("Ex ia IIC T41 Ga", "no T class, and degrees without a unit: 41"),
        ("Ex tb IIIC T40°C Db", "a surface temperature of 40 degC"),
        ("Ex ia IIC T4 Ga Ta ≤ 404 °C", "cannot read 'Ta ≤ 404 °C'"),
        ("Ex e II+H2 T4 Gb", "group II with a gas, H2"),
        ("Ex tb IIIC (flour) T85°C Db", "group IIIC with a gas, flour"),
        ("Class I Div 2 Gp ABCD T63°C", "degrees instead of a T code on Class I"),
        ("EX D IIC T41 GB", "no T class, and degrees without a unit: 41"),
        ("T4", "cannot read 'T4'"),
    ],
)
def test_what_cannot_be_read_says_where_it_stopped(text: str, problem: str) -> None:
    marking = read_marking(text)
    assert marking == Marking(text=text, problem=problem)
    assert marking.as_vector()["ta"] == "-"


@pytest.mark.parametrize(
    ("text", "flags"),
    [
        ("EX IA IIC T4 GA", ("case_repaired",)),
        ("ex ia iic t4 ga", ("case_repaired",)),
        ("Ex Db IIC T6 GB", ("case_repaired",)),
        ("CLASS I, DIV. 2, GROUPS A, B, C & D, T4A", ()),
        ("Ех ia IIC T4 Ga", ("look_alike",)),  # Cyrillic Ех
        ("Ex ia IIС T4 Ga", ("look_alike",)),  # Cyrillic С
        ("ЕХ IA IIC T4 GA", ("case_repaired", "look_alike")),
        ("Ex tb IIIC T135 Db", ("temperature_unit_missing",)),
        ("Ex ia IIC T4 Ga −20 ℃ =< Tamb =< +60 ºC", ()),
    ],
)
def test_what_was_bent_to_be_read_is_flagged(text: str, flags: tuple[str, ...]) -> None:
    marking = read_marking(text)
    assert marking.readable
    assert marking.flags == flags
    assert marking.text == text
    assert marking.case_repaired is ("case_repaired" in flags)


def test_upper_case_keeps_protections_and_epls_apart_by_their_place() -> None:
    for exact in ("Ex db eb mb IIC T4 Gb", "Ex tb IIIC T85°C Db", "Ex ma IIC T4 Ga", "[Ex ia Ga] IIC"):
        assert read_marking(exact.upper()).as_vector() == read_marking(exact).as_vector()


def test_a_case_that_matters_is_not_repaired_where_the_text_reads_as_written() -> None:
    dust, gas = read_marking("Ex tb IIIC T85°C Db").entries[0], read_marking("Ex db IIC T6 Gb").entries[0]
    assert (dust.protections, dust.epl) == (("tb",), "Db")
    assert (gas.protections, gas.epl) == (("db",), "Gb")


@pytest.mark.parametrize("text", ["none", "Non-Ex", "not Ex", "nicht Ex", "General purpose", "kein Ex-Schutz", "nil"])
def test_a_text_that_says_there_is_no_protection(text: str) -> None:
    assert read_marking(text) == Marking(text=text, none_stated=True)


# EPL


@pytest.mark.parametrize(
    ("text", "epl", "process", "source"),
    [
        ("Ex ia IIC T4 Gb", "Gb", None, "explicit"),
        ("Ex db ia IIC T4 Ga/Gb", "Gb", "Ga", "explicit"),
        ("Ex db ia IIC T4 Gb/Ga", "Gb", "Ga", "explicit"),
        ("Ex ta tb IIIC T85°C Da/Db", "Db", "Da", "explicit"),
        ("EEx ia IIC T4", "Ga", None, "derived"),
        ("EEx d ia IIC T4", "Gb", None, "derived"),
        ("Ex ia nA IIC T4", "Gc", None, "derived"),
        ("Ex ia IIIC T135°C", "Da", None, "derived"),
        ("Ex pzc IIIB T100°C", "Dc", None, "derived"),
        ("Ex iaD 21 T100°C", "Db", None, "derived"),
        ("Ex ia I", "Ma", None, "derived"),
        ("Ex db I", "Mb", None, "derived"),
        ("II 2 G EEx ia IIC T4", "Gb", None, "category"),
        ("II 1 G EEx d IIC T4", "Gb", None, "derived"),
        ("II 1/2 G EEx ia IIC T4", "Gb", "Ga", "category"),
        ("II 1/2 G EEx d ia IIC T4", "Gb", None, "derived"),
        ("II 2 G Ex h IIC T4", "Gb", None, "category"),
        ("II 2 D T 80 °C", "Db", None, "category"),
        ("Class I, Zone 2, AEx ia IIC T4", "Gc", None, "derived"),
        ("Ex op is IIC T6", None, None, None),
        ("Ex h IIC T4", None, None, None),
        ("Ex s IIC T4", None, None, None),
        ("Ex db ic h IIC T4", None, None, None),
        ("Ex ec IIIC T85°C", None, None, None),
        ("II 2 D Ex ec IIIC T85°C", None, None, None),
        ("Ex tb IIC T4", None, None, None),
        ("[Ex ia Ga] IIC", None, None, None),
        ("Class I Div 1 Gr A-D T4", None, None, None),
    ],
)
def test_epl(text: str, epl: str | None, process: str | None, source: str | None) -> None:
    entry = read_marking(text).entries[0]
    assert (entry.epl, entry.epl_process, entry.epl_source) == (epl, process, source)


@pytest.mark.parametrize(
    ("protection", "gas", "dust", "mines"),
    [
        ("ia", "Ga", "Da", "Ma"),
        ("ib", "Gb", "Db", "Mb"),
        ("ic", "Gc", "Dc", ""),
        ("da", "Ga", "", "Ma"),
        ("d", "Gb", "", "Mb"),
        ("dc", "Gc", "", ""),
        ("e", "Gb", "", "Mb"),
        ("m", "Gb", "Db", "Mb"),
        ("nA", "Gc", "", ""),
        ("px", "Gb", "Db", ""),
        ("pzc", "Gc", "Dc", ""),
        ("q", "Gb", "", "Mb"),
        ("ta", "", "Da", ""),
        ("sc", "Gc", "Dc", ""),
        ("iaD 20", "", "Da", ""),
        ("tD A22", "", "Dc", ""),
        ("pD 21", "", "Db", ""),
        ("tD", None, None, None),
        ("op is", None, None, None),
        ("h", None, None, None),
        ("s", None, None, None),
    ],
)
def test_protection_epl(protection: str, gas: str | None, dust: str | None, mines: str | None) -> None:
    assert protection_epl(protection, side="gas") == gas
    assert protection_epl(protection, side="dust") == dust
    assert protection_epl(protection, side="mines") == mines


def test_no_epl_is_derived_from_a_protection_that_is_not_for_the_atmosphere() -> None:
    assert derived_epl(["ia", "tb"], side="gas") is None
    assert derived_epl(["ia", "tb"], side="dust") == "Db"


# Temperature and ambient


PAIRED = "Ex ia IIC T6 (Ta ≤ 40°C) / T5 (Ta ≤ 55 °C) / T4 (Ta ≤ 70 °C) Ga"


@pytest.mark.parametrize(
    ("text", "site_max_c", "t_class", "surface_c"),
    [
        ("Ex ia IIC T4 Ga", 40.0, "T4", 135.0),
        ("Ex ia IIC T4 Ga", 90.0, "T4", 135.0),
        ("Ex ia IIC T6...T4 Ga", 20.0, "T4", 135.0),
        ("Ex ia IIC T4...T6 Ga", 20.0, "T4", 135.0),
        (PAIRED, 40.0, "T6", 85.0),
        (PAIRED, 40.1, "T5", 100.0),
        (PAIRED, 55.0, "T5", 100.0),
        (PAIRED, 70.0, "T4", 135.0),
        (PAIRED, 70.1, None, None),
        (PAIRED, None, "T4", 135.0),
        ("Ex eb IIC 350 °C (T1) Gb", 40.0, "T1", 350.0),
        ("Ex db IIC T4 (120 °C) Gb", 40.0, "T4", 120.0),
        ("Ex tb IIIC T85°C Db", 40.0, None, 85.0),
        ("Ex ta IIIC T500 320 °C Da", 40.0, None, 320.0),
        ("Ex tb IIIC T80°C...T130°C Db", 40.0, None, 130.0),
        ("Class I Div 2 Gr ABCD T3C", 40.0, "T3C", 160.0),
        ("Ex ia IIC Ga U", 40.0, None, None),
    ],
)
def test_the_temperature_that_counts(
    text: str, site_max_c: float | None, t_class: str | None, surface_c: float | None
) -> None:
    entry = read_marking(text).entries[0]
    assert entry.worst_t_class_at(site_max_c) == t_class
    assert entry.max_surface_c_at(site_max_c) == surface_c


def test_pairs_with_lower_ends_of_their_own_must_reach_the_site_at_both_ends() -> None:
    entry = read_marking("Ex ia IIC T6 (-20 °C ≤ Ta ≤ 40°C) / T4 (-50 °C ≤ Ta ≤ 70 °C) Ga").entries[0]
    at = entry.temperature_at(35.0, ambient_min_c=-20.0)
    assert at is not None
    assert at.t_class == "T6"
    at = entry.temperature_at(35.0, ambient_min_c=-30.0)
    assert at is not None
    assert at.t_class == "T4"
    assert entry.temperature_at(35.0, ambient_min_c=-60.0) is None


def test_a_marking_takes_the_hottest_of_its_entries() -> None:
    marking = read_marking("Ex ia IIC T4 Ga; Ex ia IIIC T150°C Da")
    assert marking.worst_t_class_at(40.0) == "T4"
    assert marking.max_surface_c_at(40.0) == 150.0
    assert marking.ambient_source == "standard default"
    assert read_marking("[Ex ia Ga] IIC").max_surface_c_at(40.0) is None
    assert read_marking("Ex ia IIC Ga; Ex ia IIIC T150°C Da").max_surface_c_at(40.0) is None


@pytest.mark.parametrize(
    ("text", "low", "high", "source"),
    [
        ("Ex ia IIC T4 Ga", -20.0, 40.0, "standard default"),
        ("Ex ia IIC T4 Ga Ta ≤ 60 °C", -20.0, 60.0, "marked"),
        ("Ex ia IIC T4 Ga Ta max. +60 °C", -20.0, 60.0, "marked"),
        ("Ex ia IIC T4 Ga Ta = 60 °C", -20.0, 60.0, "marked"),
        ("Ex ia IIC T4 Ga -40 °C ≤ Ta", -40.0, 40.0, "marked"),
        ("Ex ia IIC T4 Ga -40 °C ≤ Ta ≤ +60 °C", -40.0, 60.0, "marked"),
        ("Ex ia IIC T4 Ga 60 °C ≥ Ta ≥ -40 °C", -40.0, 60.0, "marked"),
        ("Ex ia IIC T4 Ga Tamb: -40...+60", -40.0, 60.0, "marked"),
        ("Ex ia IIC T4 Ga ambient temperature -40 °C to +60 °C", -40.0, 60.0, "marked"),
        ("Ex ia IIC T4 Ga (-40/+60 °C)", -40.0, 60.0, "marked"),
        ("Ex ia IIC T4 Ga Ta -12,5 bis 60 °C", -12.5, 60.0, "marked"),
        (PAIRED, -20.0, 70.0, "marked"),
        ("Class I Div 2 Gr D T3", None, 40.0, "division default"),
        ("Class I Div 2 Gr D T3 Ta = 70 °C", None, 70.0, "marked"),
        ("Class I Div 2 Gr D T3 -40 °C ≤ Ta ≤ 70 °C", -40.0, 70.0, "marked"),
    ],
)
def test_ambient(text: str, low: float | None, high: float, source: str) -> None:
    marking = read_marking(text)
    for said in (marking, marking.entries[0]):
        assert (said.ambient_min_c, said.ambient_max_c, said.ambient_source) == (low, high, source)


def test_an_ambient_behind_several_markings_is_meant_for_all_and_one_before_only_if_narrower() -> None:
    behind = read_marking("Ex ia IIC T4 Ga; Ex ia IIIC T135°C Da; Ta -40..60")
    assert [(e.ambient_min_c, e.ambient_max_c) for e in behind.entries] == [(-40.0, 60.0)] * 2
    wider = read_marking("Ex ia IIC T4 Ga Ta -40..60; Ex ia IIIC T135°C Da")
    assert [(e.ambient_min_c, e.ambient_max_c) for e in wider.entries] == [(-40.0, 60.0), (-20.0, 40.0)]
    narrower = read_marking("Ex ia IIC T4 Ga Ta 0..30; Ex ia IIIC T135°C Da")
    assert [(e.ambient_min_c, e.ambient_max_c) for e in narrower.entries] == [(0.0, 30.0)] * 2


# What a mark says


@pytest.mark.parametrize(
    ("text", "associated", "outputs"),
    [
        ("[Ex ia Ga] IIC", True, ["ia -> Ga"]),
        ("Ex [ia Ga] IIC", True, ["ia -> Ga"]),
        ("II (1) GD [Ex ia Ga] IIC, [Ex ia Da] IIIC", True, ["ia -> Ga", "ia -> Da"]),
        ("[Ex ia] IIIC", True, ["ia (derived Da)"]),
        ("[Ex op is]", True, ["op is"]),
        ("Ex ec [ia Ga] IIC T4 Gc", False, ["ia -> Ga"]),
        ("Ex db [ia IIC Ga] IIB T4 Gb", False, ["ia -> Ga, output group IIC"]),
        ("Ex ec [ib] IIC T4 Gc; [Ex ia Da] IIIC", False, ["ib (derived Gb)", "ia -> Da"]),
        ("Class I, Div 1, Groups A-D associated", True, []),
        ("Ex ia IIC T4 Ga", False, []),
    ],
)
def test_a_bracket_says_what_the_outputs_may_feed(text: str, associated: bool, outputs: list[str]) -> None:
    marking = read_marking(text)
    assert marking.is_associated is associated
    assert [output.text for output in marking.outputs] == outputs
    assert marking.standing() == tuple(entry for entry in marking.entries if not entry.is_output)


@pytest.mark.parametrize(
    ("text", "contradictions"),
    [
        ("Ex ia IIC T4 Ga", []),
        ("II 1/2 G Ex ia IIC T4 Ga/Gb", []),
        ("II 2 GD Ex db IIC T6 Gb; Ex tb IIIC T85°C Db", []),
        ("II 3(1) G Ex ec [ia Ga] IIC T4 Gc", []),
        ("Ex db ia IIC T4 Ga/Gb", []),
        ("Ex h IIC T4 Ga", []),
        ("Ex tb IIIC T85°C (T6) Db", []),
        ("II 2 G EEx ia IIC T4", []),
        ("I M1 Ex ia I Ma", []),
        ("Class I Div 1 Gr ABCD T4", []),
        ("II 1 G Ex db IIC T6 Gb", [("category and EPL", "category II 1 G with EPL Gb")]),
        ("II 2 G Ex ia IIC T6 Ga", [("category and EPL", "category II 2 G with EPL Ga")]),
        ("II 1/2 G Ex ia IIC T6 Ga", [("category and EPL", "category II 1/2 G with EPL Ga")]),
        ("II 1 G EEx d IIC T6", [("category and EPL", "category II 1 G with d, which allows Gb")]),
        ("II 2 G Ex tb IIIC T85°C Db", [("category and EPL", "category II 2 G with EPL Db")]),
        ("II (1) G Ex db [ia Ga] IIC T4 Gb", [("category and EPL", "category II (1) G with EPL Gb")]),
        (
            "II 3(2) G Ex ec [ia Ga] IIC T4 Gc",
            [("category and EPL", "category II 3(2) G with outputs for Ga")],
        ),
        ("II 1 D EEx ia IIC T4", [("category and group", "category II 1 D with IIC")]),
        ("I M1 Ex ia IIC T4 Ga", [("category and group", "category I M1 with group IIC")]),
        ("II 1 G Ex ia I Ma", [("category and group", "category II 1 G with group I")]),
        (
            "Ex ia IIC T4 Db",
            [
                ("group and EPL", "group IIC with EPL Db"),
                ("T class on dust", "T4 on dust, where degrees are needed"),
            ],
        ),
        ("Ex ia IIIC T135°C Ga", [("group and EPL", "group IIIC with EPL Ga")]),
        ("Ex db IIC T4 Ga", [("EPL and protections", "EPL Ga is more than db allows")]),
        ("Ex db eb IIC T4 Ga", [("EPL and protections", "EPL Ga is more than db eb allows")]),
        ("Ex db IIIC T85°C Db", [("EPL and protections", "EPL Db is more than db allows")]),
        ("Ex ec IIC T4 Ga/Gb", [("EPL and protections", "EPL Ga/Gb is more than ec allows")]),
        ("Ex tb IIIC T6 Db", [("T class on dust", "T6 on dust, where degrees are needed")]),
        ("Class I, Zone 0, AEx db IIC T4 Gb", [("zone and EPL", "marked for Zone 0 with EPL Gb")]),
        ("Class I Div 1 Groups E,F T4", [("group and class", "Class I has no group E, F")]),
    ],
)
def test_contradictions(text: str, contradictions: list[tuple[str, str]]) -> None:
    assert [(c.kind, c.text) for c in read_marking(text).contradictions] == contradictions


@pytest.mark.parametrize(
    ("text", "component", "conditions", "ip", "certificates"),
    [
        ("Ex ia IIC Ga U", True, False, (), []),
        ("Ex db IIC T6 Gb X", False, True, (), []),
        ("Ex db IIC T6 Gb IP66/68", False, False, ("IP66/68",), []),
        ("Ex db IIC T6 Gb IP 66 / IP 67", False, False, ("IP66/67",), []),
        ("Ex tb IIIC T85°C Db IP6X; ABC 20 ATEX 0001X", False, True, ("IP6X",), ["ABC 20 ATEX 0001X"]),
        ("ABC 20 ATEX 0001 II 2 G Ex db IIC T6 Gb", False, False, (), ["ABC 20 ATEX 0001"]),
        ("Ex db IIC T6 Gb IECEx ABC 20.0001X Issue 3", False, True, (), ["IECEx ABC 20.0001X"]),
        ("Class I Div 2 Gr D T4 NEMA 4X", False, False, (), []),
    ],
)
def test_what_stands_behind_a_marking(
    text: str, component: bool, conditions: bool, ip: tuple[str, ...], certificates: list[str]
) -> None:
    marking = read_marking(text)
    assert (marking.is_component, marking.marked_x, marking.ip) == (component, conditions, ip)
    assert [str(certificate) for certificate in marking.certificates] == certificates


@pytest.mark.parametrize(
    ("text", "protection"),
    [
        ("XP Class I Div 1 Gr BCD T5", "explosionproof"),
        ("IS Class I Div 1 Gr ABCD T4", "intrinsically safe"),
        ("Intrinsically safe for Class I, Division 1, Groups A-D, T4", "intrinsically safe"),
        ("DIP Class II Div 1 Gr EFG", "dust-ignitionproof"),
        ("NI Class I Div 2 Gr ABCD T4", "nonincendive"),
        ("Class I Div 1 Gr ABCD T4", None),
    ],
)
def test_the_protection_that_a_division_mark_states(text: str, protection: str | None) -> None:
    assert read_marking(text).entries[0].division_protection == protection


def test_a_line_break_is_a_blank_and_a_separator_at_once() -> None:
    wrapped = read_marking("II 2 G Ex db IIC\nT6 Gb\n-20 °C ≤ Ta ≤ +60 °C\nII 2 D Ex tb IIIC\nT85°C Db")
    assert wrapped.as_vector()["epl"] == "Gb; Db"


# Certificates


@pytest.mark.parametrize(
    ("text", "number", "suffix", "known"),
    [
        ("IECEx ABC 20.0001X", "IECEx ABC 20.0001", "X", True),
        ("IECEx ABC 20.0001X Issue 3", "IECEx ABC 20.0001", "X", True),
        ("IECEx ABC 20.0001", "IECEx ABC 20.0001", "", True),
        ("IECEX ABC20.0001 U", "IECEx ABC 20.0001", "U", True),
        ("ABC 20 ATEX 0001 U", "ABC 20 ATEX 0001", "U", True),
        ("ABC20ATEX0001X", "ABC 20 ATEX 0001", "X", True),
        ("ABC 20 ATEX 0001", "ABC 20 ATEX 0001", "", True),
        ("ABC 20ATEX123456 X", "ABC 20 ATEX 123456", "X", True),
        ("ABC 21 UKEX 0002X", "ABC 21 UKEX 0002", "X", True),
        ("ABC 03 ATEX E 100 X", "ABC 03 ATEX E 100", "X", True),
        ("ABC 20 ATEX 0001X/02", "ABC 20 ATEX 0001", "X", True),
        ("ABC 20 ATEX 0001 x, Rev. 2", "ABC 20 ATEX 0001", "X", True),
        ("4711-0815X", "4711-0815", "X", False),
        ("E123456", "E123456", "", False),
        ("ABC 17US0003X issue 2", "ABC 17US0003", "X", False),
        ("ABC 20 ATEX 01", "ABC 20 ATEX 01", "", False),
        ("file 123 U", "file 123", "U", False),
        ("17.0003X (note 4)", "17.0003X (note 4)", "X", False),
        ("MAX", "MAX", "", False),
        ("", "", "", False),
    ],
)
def test_certificate(text: str, number: str, suffix: str, known: bool) -> None:
    assert read_certificate(text) == Certificate(number=number, suffix=suffix, form_known=known, text=text)


@pytest.mark.parametrize(
    ("text", "numbers"),
    [
        ("ABC 20 ATEX 0001X / IECEx ABC 20.0002", ["ABC 20 ATEX 0001X", "IECEx ABC 20.0002"]),
        ("ABC 20 ATEX 0001X, Issue 2; ABC 21 UKEX 0003X", ["ABC 20 ATEX 0001X", "ABC 21 UKEX 0003X"]),
        ("ABC 20 ATEX 0001X\nIECEx ABC 20.0002X", ["ABC 20 ATEX 0001X", "IECEx ABC 20.0002X"]),
        ("17.0003X / 4711", ["17.0003X", "4711"]),
        ("ABC 20 ATEX 0001U; M/20-1234X", ["ABC 20 ATEX 0001U", "M/20-1234X"]),
        ("", []),
    ],
)
def test_several_certificates_in_one_cell(text: str, numbers: list[str]) -> None:
    assert [str(certificate) for certificate in read_certificates(text)] == numbers


# Any text

PIECES = st.sampled_from(
    [
        "Ex",
        "Ex",
        "EEx",
        "AEx",
        "<Ex>",
        "[",
        "]",
        "(",
        ")",
        "II",
        "I",
        "1",
        "2",
        "G",
        "GD",
        "D",
        "M1",
        "ia",
        "ib",
        "d",
        "db",
        "tb",
        "op",
        "is",
        "nA",
        "nC",
        "tD",
        "A21",
        "h",
        "IIA",
        "IIB",
        "IIC",
        "IIIC",
        "+",
        "H2",
        "(NH3)",
        "T",
        "T4",
        "T6",
        "T85°C",
        "T500",
        "320",
        "°C",
        "...",
        "/",
        ";",
        ",",
        "-",
        "≤",
        "Ta",
        "Tamb",
        "-20",
        "40",
        "+60",
        "°C",
        "Ga",
        "Gb",
        "Db",
        "Ga/Gb",
        "U",
        "X",
        "IP66",
        "IP",
        "Class",
        "I",
        "II",
        "Zone",
        "0",
        "21",
        "Div",
        "1",
        "Groups",
        "ABCD",
        "A-D",
        "&",
        "and",
        "associated",
        "T3C",
        "IECEx",
        "ABC",
        "20",
        ".",
        "0001",
        "ATEX",
        "CE",
        "0344",
        "@",
        "for",
        "XP",
    ]
)


@given(st.text(max_size=80))
def test_no_text_breaks_it(text: str) -> None:
    assert isinstance(read_marking(text), Marking)
    read_certificates(text)


@settings(max_examples=400)
@given(st.lists(PIECES, max_size=25), st.sampled_from((" ", "")))
def test_no_heap_of_tokens_breaks_it(pieces: list[str], glue: str) -> None:
    marking = read_marking(glue.join(pieces))
    assert marking.readable is bool(marking.entries or marking.none_stated)
    vector = marking.as_vector()
    assert set(vector) == set(FIELDS)
    assert all(vector.values())
    assert marking.contradictions is not None
    for entry in marking.entries:
        assert entry.ambient_text
        if entry.epl and entry.epl_source != "explicit":
            assert marking.max_surface_c_at(60.0) is None or marking.max_surface_c_at(60.0) > 0


@given(
    prefix=st.sampled_from(("Ex", "EEx", "AEx")),
    protections=st.lists(
        st.sampled_from(("ia", "ib", "db", "eb", "e", "d", "mb", "nA", "op is", "pxb")),
        min_size=1,
        max_size=3,
        unique=True,
    ),
    group=st.sampled_from(("IIA", "IIB", "IIC", "II", "IIB+H2", "II C")),
    t_class=st.sampled_from(("T1", "T4", "T6", "T6...T3", "T6 (Ta ≤ 40 °C) / T4 (Ta ≤ 70 °C)", "350 °C (T1)")),
    epl=st.sampled_from(("Ga", "Gb", "Gc", "Ga/Gb")),
    swapped=st.booleans(),
    ambient=st.sampled_from(("", "-40 °C ≤ Ta ≤ +60 °C", "Tamb -40...+60 °C")),
)
def test_what_is_composed_is_read(
    prefix: str, protections: list[str], group: str, t_class: str, epl: str, swapped: bool, ambient: str
) -> None:
    tail = f"{epl} {t_class}" if swapped else f"{t_class} {epl}"
    marking = read_marking(f"{prefix} {' '.join(protections)} {group} {tail}")
    entry = marking.entries[0]
    assert entry.prefix == prefix
    assert entry.protections == tuple(protections)
    assert entry.group == group.replace(" ", "")[:3]
    assert entry.gas_extra == ("H2" if "+" in group else None)
    assert entry.epl_text == epl
    hottest = {"T6...T3": "T3", "T6 (Ta ≤ 40 °C) / T4 (Ta ≤ 70 °C)": "T4", "350 °C (T1)": "T1"}.get(t_class, t_class)
    assert entry.worst_t_class_at(None) == hottest
    if ambient and not entry.is_paired:
        longer = read_marking(f"{marking.text} {ambient}").entries[0]
        assert (longer.ambient_min_c, longer.ambient_max_c) == (-40.0, 60.0)


@pytest.mark.parametrize(
    "piece", ["(", "[", "Ex ", "II 1 G ", "T4/", "A,", "Class I ", " ", "1", "IIC+", "Ta ", "d", "²", "ﷺ"]
)
def test_long_hostile_text_is_refused_quickly(piece: str) -> None:
    whole = piece * (MAX_LENGTH // len(piece))
    start = time.perf_counter()
    for text in (whole, f"Ex {whole}"[:MAX_LENGTH], f"Class I Gr {whole}"[:MAX_LENGTH], piece * 100_000):
        read_marking(text)
        read_certificate(text)
    assert time.perf_counter() - start < 1.0
    assert read_marking(piece * 100_000).problem == f"longer than {MAX_LENGTH} characters"


def test_the_length_is_bounded_on_both_sides() -> None:
    fits = "Ex ia IIC T4 Ga".ljust(MAX_LENGTH)
    assert read_marking(fits).readable
    assert not read_marking(f"{fits} ").readable


# What protects it, behind the classes or in strokes


@pytest.mark.parametrize(
    ("text", "entries"),
    [
        ("Class I Div 1 Groups B,C,D explosionproof", [("I", "1", "BCD", "explosionproof", "none")]),
        ("Class I, Division 1, Groups C and D T4 Explosion-proof", [("I", "1", "CD", "explosionproof", "T4")]),
        ("Class I Div 1 Groups B,C,D (explosion proof) T6", [("I", "1", "BCD", "explosionproof", "T6")]),
        ("Cl I Div 1 Gr BCD XP", [("I", "1", "BCD", "explosionproof", "none")]),
        ("Class I Div 1 Groups ABCD T4 intrinsically safe", [("I", "1", "ABCD", "intrinsically safe", "T4")]),
        ("Class I Div 2 Groups A-D, non-incendive, T4", [("I", "2", "ABCD", "nonincendive", "T4")]),
        ("Class II Div 1 Groups EFG dust-ignitionproof", [("II", "1", "EFG", "dust-ignitionproof", "none")]),
        ("IS Class I Div 1 ABCD T4 Entity", [("I", "1", "ABCD", "intrinsically safe", "T4")]),
        ("XP/I/1/BCD/T4", [("I", "1", "BCD", "explosionproof", "T4")]),
        ("XP / I / 1 / BCD / T4", [("I", "1", "BCD", "explosionproof", "T4")]),
        ("xp-i/1/b,c,d/t4a", [("I", "1", "BCD", "explosionproof", "T4A = 120 °C")]),
        ("NI/I/2/ABCD/T4", [("I", "2", "ABCD", "nonincendive", "T4")]),
        ("IS/I/1,2/CD", [("I", "1", "CD", "intrinsically safe", "none")]),
        (
            "IS/I,II,III/1/ABCDEFG/T4",
            [
                ("I", "1", "ABCD", "intrinsically safe", "T4"),
                ("II", "1", "EFG", "intrinsically safe", "T4"),
                ("III", "1", "", "intrinsically safe", "T4"),
            ],
        ),
        (
            "XP/I/1/CD; DIP/II/1/EFG; T6",
            [("I", "1", "CD", "explosionproof", "T6"), ("II", "1", "EFG", "dust-ignitionproof", "T6")],
        ),
        (
            "IS/I/1/ABCD/T4; NI/I/2/ABCD/T5",
            [("I", "1", "ABCD", "intrinsically safe", "T4"), ("I", "2", "ABCD", "nonincendive", "T5")],
        ),
        (
            "Class I Div 1 Groups C,D T4, NI Class I Div 2 Groups A,B T5",
            [("I", "1", "CD", None, "T4"), ("I", "2", "AB", "nonincendive", "T5")],
        ),
    ],
)
def test_division_marks_that_name_their_protection(text: str, entries: list[tuple[str | None, ...]]) -> None:
    marking = read_marking(text)
    assert [
        (each.class_, each.division, "".join(each.groups), each.division_protection, each.temperature_text)
        for each in marking.entries
    ] == entries
    assert not marking.is_associated


@pytest.mark.parametrize("text", ["AIS/I/1/ABCD", "ANI / I / 2 / ABCD"])
def test_an_a_before_the_strokes_is_associated_apparatus(text: str) -> None:
    assert read_marking(text).is_associated


@pytest.mark.parametrize(
    "text",
    [
        "explosionproof",
        "XP",
        "XP/I",
        "XP/IV/1/BCD",
        "XP/I/3/BCD",
        "XP/I/1/BCX",
        "XP Class I Div 1 Groups B,C,D nonincendive",
        "Class I Div 1 Group D explosionproof nonincendive",
    ],
)
def test_a_protection_alone_or_two_that_disagree_are_no_marking(text: str) -> None:
    assert not read_marking(text).readable


@pytest.mark.parametrize(
    ("text", "groups"),
    [
        ("AIS Class I Div 1 Groups A-D", ("A", "B", "C", "D")),
        ("[IS] CL I DIV 1 GP ABCD", ("A", "B", "C", "D")),
        ("Associated apparatus [IS] Class I, Div. 1, Groups C, D", ("C", "D")),
        ("Associated equipment for Class I, Div 1, Group D", ("D",)),
        ("Class I Div 1 Groups CD [IS]", ("C", "D")),
    ],
)
def test_associated_apparatus_says_so_before_or_behind_its_classes(text: str, groups: tuple[str, ...]) -> None:
    marking = read_marking(text)
    assert [(entry.is_output, entry.class_, entry.division, entry.groups) for entry in marking.entries] == [
        (True, "I", "1", groups)
    ]


def test_associated_apparatus_beside_a_mark_of_its_own() -> None:
    entries = read_marking("NI CL I DIV 2 GP ABCD T4; AIS CL I DIV 1 GP CD").entries
    assert [(entry.is_output, entry.division, entry.groups) for entry in entries] == [
        (False, "2", ("A", "B", "C", "D")),
        (True, "1", ("C", "D")),
    ]


@pytest.mark.parametrize("text", ["AIS", "[IS]", "AIS something"])
def test_associated_apparatus_without_classes_cannot_be_read(text: str) -> None:
    assert not read_marking(text).readable
