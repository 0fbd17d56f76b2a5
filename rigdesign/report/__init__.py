"""Stage report: a checked rig, or a study, as files, figures and sentences.

In: a `Check` (which holds its rig, plan, target and brief), a `Study`, or a `Target` alone.  Out: bytes by file name,
written whole or not at all; sentences for the terminal; and a `Rig` again from its rig.json.

    scales          one unit for a whole column, axis or drawing
    sentences       the answer in words
    tables          every CSV of the rig folder, and summary.json
    rig_json        rig.json, and back; rig_fields reads its values with messages that say where
    study_files     a study as tables
    folder          a folder whole or not at all, and never over what was not written here
    figures_sheet   paper, titles, colours, and files with the same bytes
    figures_parts   what several drawings show
    figures_load, figures_curves, figures_tree, figures_study   the figures; tree_layout plans the sheet of the tree
    writing         all of it together, and `read_rig`

Every number comes from the check; what is wanted, planned or proven is called so.  matplotlib is imported by the
modules of the figures alone, and these only when a figure is asked for.

Depends on: every stage before it, chain, display, errors, findings, words.
"""
