"""The brief: what is to be tested and within which limits, as a person writes it.

In goes a TOML file with the CSV tables that it names, or the texts of both as an earlier reading kept them.  Out comes
a `Brief` (`rigdesign.brief.model`): validated, in SI units, frozen, tables read, every default filled in.

    model      the frozen dataclasses that all later stages read; model_hardware holds those of hardware
    keys       what every table of the file is made of
    layout     the file as it is laid out: tables, keys, defaults, descriptions; the JSON Schema comes from here;
               layout_hardware holds [hardware] and [keep]
    fields     how one value is read; fields_hardware: those of [hardware] and [keep]
    locate     the line of each key
    messages   what pydantic finds, in one plain message
    sources    texts of brief and tables, from the folder or kept
    headings   the first line of a table: its columns and their units
    tables     CSV with units in its headings
    context    checks that several parts share
    specimen   [specimen], with its weight
    loads      [[load]]
    pads       [pads]
    hardware   [hardware]; hardware_tables: its stock, jacks, load cells and loaded surface
    keep       [keep]
    surface    all that is said in plan: outline, axis, places, pressure maps
    build      everything else that concerns several keys at once
    read       all of it in order
    describe   the JSON Schema

What is decided here, where a file could be read in two ways:

- A quantity is one number and one unit in a string; a fraction is a percentage; `lb` and `kg` are masses, `lbf` and
  `kgf` forces.
- An outline makes it a plan rig; without one, every key and column that only plan rigs have is an error.
- A load is one of shape, table, internal, forces, point, inertia, pressure, torque, couple.  A linear shape has
  `start` and `end` and no total, every other shape a total that is not zero.
- A table has exactly its own columns, in any order, and maybe one named "note".  Rows are in order of x; those with x
  and y in any order.  Two rows at one x are a jump in running loads, running torques, masses per length, chords and
  internal loads; among point loads, point masses, hard points and pads they are an error, and in plan two rows at one
  place.
- Internal tables counted from the tip are in order of that count and are turned round: of the two rows of a jump the
  outboard one, met first from the tip, stands first in the file.  Signs stay as given.  A torsion column may be there
  if it holds zeros, and on a surface with any torsion.
- A place or a line in plan may lie off the outline by rounding alone: 1e-6 of the span where the brief writes it, half
  of the last printed digit in a table.  Without a y, what acts or stands there does so on the reference axis.
- A spar runs outboard, a rib across; each crossing is a place, and each spar and rib has at least one.
- A region's percentages are of what [acceptance] says unless it says otherwise itself.
- Tables and kept rigs lie in the folder of the brief or below it.
- A factor of [hardware] that belongs to other rules than those chosen is an error, as is a mark tolerance where no
  marks are made alike.  What each kind of profile needs of a row is said in `hardware_tables`.
- The text of a kept rig is taken along whole, under its folder's name; what it says is read where rigs are read.

Bad input raises `BriefError` or `TableError`, one fault at a time, with file, line, key, value, limit and remedy.

Depends on: units, unit_factors, display, errors, words.
"""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from rigdesign.brief.model import Brief, Source

SCHEMA_FILE = "brief.schema.json"
"""Name of the shipped JSON Schema, beside this file."""


# The imports below are late: the model is imported by every stage, while reading needs pydantic and pint.


def read_brief(path: str | Path) -> Brief:
    """Read a brief and the tables it names.

    Raises
    ------
    BriefError
        If the brief cannot be read, contradicts itself, or names what is not there.
    TableError
        If one of its tables cannot be used.
    """
    from rigdesign.brief.read import read_from_folder

    return read_from_folder(Path(path))


def brief_from_source(source: Source) -> Brief:
    """Read a brief again from the texts that `Brief.source` kept; raises as `read_brief` does."""
    from rigdesign.brief.read import read_from_source

    return read_from_source(source)


def schema() -> dict[str, Any]:
    """Return the JSON Schema of the brief's file, which is also shipped as brief.schema.json."""
    from rigdesign.brief.describe import brief_schema

    return brief_schema()
