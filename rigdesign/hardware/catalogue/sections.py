"""Flats, channels, hollow sections and plates to choose from: the brief's own stock, or what a small lab can buy."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache, lru_cache
from typing import Literal

from rigdesign.brief.model_hardware import HardwareRules, StockRow
from rigdesign.hardware.catalogue.geometry import Properties, channel, flat, hollow, outer_radius
from rigdesign.hardware.catalogue.materials import material, with_density
from rigdesign.hardware.catalogue.reading import rows
from rigdesign.hardware.model import Section

StockKind = Literal["flat", "channel", "hollow", "plate"]

SHEET_LENGTH = 3.0
"""Plates are sold in sheets of this length [m]; common practice."""

OWN = "the brief's stock"


def sections(rules: HardwareRules, kind: StockKind, density: float | None = None) -> tuple[Section, ...]:
    """Return the profiles of one kind, lightest first; of equal ones the deeper first.

    They are those of the brief's stock where that holds any of the kind, else the catalogue's.  A plate's `depth`,
    `width`, `web` and `flange` are its thickness; its properties are per metre of its width, `mass` in kg/m².  Masses
    are area times `density` [kg/m³], where not given that of the brief or else of its grade.
    """
    if density is None:
        density = with_density(material(rules.grade), rules.density).density
    own = tuple(row for row in rules.stock if row.kind == kind)
    return _sections(own, kind, density, rules.bar)


@lru_cache(maxsize=64)
def _sections(own: tuple[StockRow, ...], kind: StockKind, density: float, bar: float) -> tuple[Section, ...]:
    found = [_own_section(row, density, bar) for row in own] if own else list(_shipped(kind, density, bar))
    # to 1e-9 kg/m, so that products that differ by rounding alone count as equally heavy
    return tuple(sorted(found, key=lambda s: (round(s.mass, 9), -s.depth, s.width, s.name)))


def _shipped(kind: StockKind, density: float, bar: float) -> Iterator[Section]:
    """The catalogue's profiles of one kind."""
    if kind == "channel":
        for name, sizes, properties, source in _channels():
            yield _section(name, "channel", sizes, properties, density, bar, source)
        return
    for row in rows({"flat": "flats", "hollow": "hollows", "plate": "plates"}[kind]):
        thickness = float(row["thickness_mm"]) / 1e3
        depth = thickness if kind == "plate" else float(row["depth_mm"]) / 1e3
        width = float(row["width_mm"]) / 1e3 if kind == "hollow" else thickness
        sizes = (depth, width, thickness, thickness)
        length = SHEET_LENGTH if kind == "plate" else bar
        yield _section(_name(kind, sizes), kind, sizes, _computed(kind, sizes), density, length, row["source"])


def _own_section(row: StockRow, density: float, bar: float) -> Section:
    """A profile of the brief's own; a channel of a size in the catalogue has the properties of its table."""
    wall = (row.width, row.width) if row.kind == "flat" else (row.web, row.flange)
    sizes = (row.depth, row.width, *wall)
    if row.kind == "plate":
        sizes = (row.depth,) * 4
    properties, source = _computed(row.kind, sizes), OWN
    if row.kind == "channel":
        for name, listed, table, _ in _channels():
            if all(abs(mine - theirs) < 1e-6 for mine, theirs in zip(sizes, listed, strict=True)):
                properties, source = table, f"{OWN}, properties of {name}"
    length = row.bar if row.bar is not None else SHEET_LENGTH if row.kind == "plate" else bar
    return _section(row.name, row.kind, sizes, properties, density, length, source)


def _computed(kind: StockKind, sizes: tuple[float, float, float, float]) -> Properties:
    """Properties from sizes: depth, width, web, flange [m]; of a plate per metre of its width."""
    depth, width, web, flange = sizes
    match kind:
        case "flat":
            return flat(depth, width)
        case "channel":
            return channel(depth, width, web, flange)
        case "hollow":
            return hollow(depth, width, web, min(outer_radius(web), depth / 2, width / 2))
        case "plate":
            return flat(depth, 1.0)


def _section(
    name: str,
    kind: StockKind,
    sizes: tuple[float, float, float, float],
    properties: Properties,
    density: float,
    bar: float,
    source: str,
) -> Section:
    depth, width, web, flange = sizes
    return Section(
        name=name,
        kind=kind,
        depth=depth,
        width=width,
        web=web,
        flange=flange,
        area=properties.area,
        inertia=properties.inertia,
        inertia_weak=properties.inertia_weak,
        torsion=properties.torsion,
        modulus=properties.modulus,
        plastic=properties.plastic,
        mass=properties.area * density,
        bar=bar,
        source=source,
    )


def _name(kind: StockKind, sizes: tuple[float, float, float, float]) -> str:
    """As a merchant writes it: "flat 80×10", "RHS 100×60×5", "SHS 80×80×4", "plate 12"."""
    depth, width, web, _ = (f"{1e3 * size:g}" for size in sizes)
    if kind == "plate":
        return f"plate {depth}"
    if kind == "flat":
        return f"flat {depth}×{width}"
    return f"{'SHS' if depth == width else 'RHS'} {depth}×{width}×{web}"


@cache
def _channels() -> tuple[tuple[str, tuple[float, float, float, float], Properties, str], ...]:
    """Name, sizes, properties and source of the channels whose properties stand in tables."""
    found = []
    for row in rows("channels"):
        mm = {key: float(row[f"{key}_mm"]) / 1e3 for key in ("depth", "width", "web", "flange")}
        properties = Properties(
            area=float(row["area_cm2"]) / 1e4,
            inertia=float(row["inertia_cm4"]) / 1e8,
            inertia_weak=float(row["inertia_weak_cm4"]) / 1e8,
            torsion=float(row["torsion_cm4"]) / 1e8,
            modulus=float(row["modulus_cm3"]) / 1e6,
            plastic=float(row["plastic_cm3"]) / 1e6,
        )
        found.append((row["name"], (mm["depth"], mm["width"], mm["web"], mm["flange"]), properties, row["source"]))
    return tuple(found)
