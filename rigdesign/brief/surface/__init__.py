"""What a brief says of a surface: its outline, lines and places in plan, and keep-out areas.

    fields      how one value in plan is read: a place, a line, a direction
    rings       a table of corners becomes an outline: one ring that does not cross itself
    specimen    the outline and the reference axis of [specimen]
    within      whether lines and places lie on the outline, and how far off they are
    crossings   where spars and ribs cross
    places      where pads may sit: candidates, rows, keep-out areas
    loads       pressure maps, running torques, couples, and where the other loads act

A specimen with an outline is a surface, and its rig a plan rig; without one, every key of this folder is an error.
shapely is imported where it is used, so that a line rig does not wait for it.

Depends on: the modules of `rigdesign.brief`; read by its `specimen`, `loads` and `build`.
"""
