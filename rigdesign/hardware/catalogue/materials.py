"""Grades of steel and aluminium: strength by thickness."""

from __future__ import annotations

from dataclasses import replace
from functools import cache

from rigdesign.errors import InputError
from rigdesign.hardware.catalogue.reading import rows
from rigdesign.hardware.model import Material


@cache
def material(name: str) -> Material:
    """Return a grade by its name: S235, S275, S355, 6082-T6; of pins C45 and 42CrMo4 too; of rods 8.8.

    Raises
    ------
    InputError
        Where the catalogue has no such grade.

    Examples
    --------
    >>> steel = material("S355")
    >>> steel.fy(0.016), steel.fy(0.020), steel.fu(0.020)  # Pa
    (355000000.0, 345000000.0, 470000000.0)
    """
    own = [row for row in rows("materials") if row["grade"] == name]
    if not own:
        raise InputError("no such grade", value=name, limit=", ".join(grades()), remedy="choose one of these")
    return Material(
        name=name,
        limits=tuple(float(row["up_to_mm"]) / 1e3 for row in own),
        yields=tuple(float(row["yield_MPa"]) * 1e6 for row in own),
        ultimates=tuple(float(row["ultimate_MPa"]) * 1e6 for row in own),
        modulus=float(own[0]["modulus_GPa"]) * 1e9,
        density=float(own[0]["density_kg_m3"]),
        source=own[0]["source"],
    )


def grades() -> tuple[str, ...]:
    """Return the names of all grades in the catalogue's order."""
    return tuple(dict.fromkeys(row["grade"] for row in rows("materials")))


def with_density(grade: Material, density: float | None) -> Material:
    """Return the grade with a density of the user's own [kg/m³], or as it is where None is given.

    >>> with_density(material("S355"), 8000.0).density
    8000.0
    """
    return grade if density is None else replace(grade, density=density)
