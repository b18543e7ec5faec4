"""The certificates that a plant's instruments name, each once, with the instruments that rest on it."""

from __future__ import annotations

from collections import defaultdict
from dataclasses import dataclass, replace
from functools import lru_cache
from typing import Final

from instruments.certificate import Certificate, read_certificates
from instruments.installed import Installed
from instruments.origin import Cell
from instruments.protection import marking_of
from instruments.tag import natural_key
from loops.plant import Plant


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class CertificateInPlant:
    """One certificate number and the live instruments that name it, in the order of their tags.

    Attributes
    ----------
    certificate
        As read where it is written with the most: an X or a U that one row writes counts for all.
    members
        The instruments whose row, device type or marking names it.
    """

    certificate: Certificate
    members: tuple[Installed, ...]

    @property
    def name(self) -> str:
        """The number in one spelling, with its suffix."""
        return str(self.certificate)

    @property
    def live(self) -> bool:
        """True: only live instruments make one."""
        return True

    def cells(self, name: str) -> tuple[Cell, ...]:
        """Return the cells of a field of its instruments; of ``certificate`` those where the number stands."""
        found: list[Cell] = []
        for each in self.members:
            found.extend(certificate_cells(each) if name == "certificate" else each.cells(name))
        return tuple(dict.fromkeys(found))


def certificate_text(installed: Installed) -> str | None:
    """Return what stands for an instrument's certificate: the row's, else its device type's."""
    if installed.record.certificate is not None:
        return installed.record.certificate
    return installed.type.certificate if installed.type is not None else None


def certificate_cells(installed: Installed) -> tuple[Cell, ...]:
    """Return the cells where an instrument's certificate stands, or would stand."""
    record, device = installed.record, installed.type
    if record.certificate is None and device is not None and device.certificate is not None:
        return (*device.cells("certificate"), *record.cells("device_type"))
    return record.cells("certificate") or record.cells("ex_marking")


def evidence_of(installed: Installed) -> tuple[Certificate, ...]:
    """Return the certificates that an instrument names: those of its certificate cell, and those of its marking."""
    marking = marking_of(installed)
    return _evidence(certificate_text(installed), marking.certificates if marking is not None else ())


@lru_cache(maxsize=4096)
def _evidence(text: str | None, marked: tuple[Certificate, ...]) -> tuple[Certificate, ...]:
    found = (*(read_certificates(text) if text else ()), *marked)
    return tuple({_key(each.number): each for each in reversed(found)}.values())[::-1]


@lru_cache(maxsize=4096)
def _key(number: str) -> str:
    return "".join(number.casefold().split())


def certificates_of(plant: Plant) -> tuple[CertificateInPlant, ...]:
    """Return the certificates of a plant in the order of their numbers."""
    found: tuple[CertificateInPlant, ...] = plant.once("certificates of the plant", _certificates_of)
    return found


def _certificates_of(plant: Plant) -> tuple[CertificateInPlant, ...]:
    read: dict[str, list[Certificate]] = defaultdict(list)
    members: dict[str, list[Installed]] = defaultdict(list)
    for each in plant.live:
        for certificate in evidence_of(each):
            key = _key(certificate.number)
            read[key].append(certificate)
            members[key].append(each)
    made = [
        CertificateInPlant(
            certificate=_as_one(read[key]),
            members=tuple(members[key]),  # the plant's instruments are in the order of their names
        )
        for key in read
    ]
    return tuple(sorted(made, key=lambda each: natural_key(each.name)))


_SUFFIX_ORDER: Final = ("X", "U", "")


def _as_one(read: list[Certificate]) -> Certificate:
    """Return one certificate of several spellings: with the suffix that one of them has, and with its capitals."""
    suffix = min((each.suffix for each in read), key=_SUFFIX_ORDER.index)
    known = [each for each in read if each.form_known] or read
    best = min(known, key=lambda each: (-sum(sign.isupper() for sign in each.number), each.number))
    return replace(best, suffix=suffix)
