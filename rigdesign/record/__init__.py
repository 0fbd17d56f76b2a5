"""Stage record: rig.json, the whole rig as one text, and back.

In: a `Check` or a `HardwareCheck`.  Out: the text of rig.json; and from such a text a `Rig` again, and its `Hardware`
where it holds any.

    objects          what findings and numbers look like in JSON
    fields           reading objects of JSON with messages that say where
    layout           one table of keys for both ways, to JSON and back
    rig_json         the rig: brief, pads, plan, trees
    hardware_json    the hardware: bodies, links, pads, jacks and cells, heights, marks, masses
    hardware_whole   whether hardware that was read is all that its rig needs

What a rig then does is not read from it: the check starts again from holes, sizes and jack force.

Depends on: every stage before it (brief to checks), errors, findings, words.
"""
