"""The published keys of hardware in rig.json: one layout for each kind of object.  Lengths in m, masses in kg."""

from __future__ import annotations

from typing import get_args

from rigdesign.hardware.model import Fitting, LinkKind, SectionKind
from rigdesign.levers.model import HoleName
from rigdesign.record.layout import Layout

BUILDS = ("twin flats", "twin channels", "hollow section", "plate")

MATERIAL = Layout(
    (
        ("name", "name", "text"),
        ("limits_m", "limits", "numbers"),
        ("yields_Pa", "yields", "numbers"),
        ("ultimates_Pa", "ultimates", "numbers"),
        ("modulus_Pa", "modulus", "number"),
        ("density_kg_m3", "density", "number"),
        ("source", "source", "text"),
    )
)

SECTION = Layout(
    (
        ("name", "name", "text"),
        ("kind", "kind", get_args(SectionKind)),
        ("depth_m", "depth", "number"),
        ("width_m", "width", "number"),
        ("web_m", "web", "number"),
        ("flange_m", "flange", "number"),
        ("area_m2", "area", "number"),
        ("inertia_m4", "inertia", "number"),
        ("inertia_weak_m4", "inertia_weak", "number"),
        ("torsion_m4", "torsion", "number"),
        ("modulus_m3", "modulus", "number"),
        ("plastic_m3", "plastic", "number"),
        ("mass_kg_m", "mass", "number"),
        ("bar_m", "bar", "number"),
        ("source", "source", "text"),
    )
)

BODY = Layout(
    (
        ("piece", "piece", "text"),
        ("build", "build", BUILDS),
        ("profiles", "profiles", "whole"),
        ("gap_m", "gap", "number"),
        ("overhang_m", "overhang", "number"),
        ("side_plate_m", "side_plate", "number"),
        ("spacers_m", "spacers", "numbers"),
        ("outline_m", "outline", "corners"),
        ("old_pivots_m", "old_pivots", "corners"),
        ("counterweights_kg", "counterweights", "amounts"),
    )
)

END = Layout(
    (
        ("fitting", "fitting", get_args(Fitting)),
        ("to", "to", "text"),
        ("at", "at", (*get_args(HoleName), "")),
        ("pin_m", "pin", "number"),
        ("hole_m", "hole", "number"),
        ("pin_length_m", "pin_length", "number"),
        ("inner_m", "inner", "number"),
        ("outer_m", "outer", "number"),
        ("gap_m", "gap", "number"),
        ("radius_m", "radius", "number"),
    )
)

LINK = Layout(
    (
        ("link", "number", "whole"),
        ("kind", "kind", get_args(LinkKind)),
        ("size", "size", "text"),
        ("width_m", "width", "number"),
        ("thickness_m", "thickness", "number"),
        ("stress_area_m2", "stress_area", "number"),
        ("length_m", "length", "number"),
        ("adjust_m", "adjust", "number"),
        ("mass_kg", "mass", "number"),
    )
)

MACHINE = Layout(
    (
        ("name", "name", "text"),
        ("force_N", "force", "number"),
        ("length_m", "length", "number"),
        ("stroke_m", "stroke", "number"),
        ("mass_kg", "mass", "number"),
        ("pin_m", "pin", "number"),
        ("source", "source", "text"),
    )
)

PAD = Layout(
    (
        ("pad", "pad", "whole"),
        ("mass_kg", "mass", "number"),
        ("height_m", "height", "number"),
        ("surface_m", "surface", "number"),
    )
)

SHORTFALL = Layout(
    (
        ("piece", "piece", "text"),
        ("check", "check", "text"),
        ("utilisation", "utilisation", "number"),
        ("remedy", "remedy", "text"),
    )
)

MASS = Layout((("mass_kg", "mass", "number"), ("u_m", "u", "number"), ("v_m", "v", "number")))
