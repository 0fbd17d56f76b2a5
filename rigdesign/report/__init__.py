"""Stage report: a checked rig, or a study, as files, figures and sentences.

In: a `HardwareCheck`, a `Check` (which holds its rig, plan, target and brief), a `Study`, or a `Target` alone.  Out:
bytes by file name, written whole or not at all; sentences for the terminal; and a `Rig` again from its folder.

    scales          one unit for a whole column, axis or drawing
    sentences       the answer in words
    tables          every CSV of the rig, and summary.json; csv_cells says how a cell is written
    lists           parts, links, pins, holes, bars and masses of the hardware as rows
    sentences_hardware, tables_hardware, summary_hardware   the same of the hardware
    dxf             flats and plates for cutting and drilling
    sheets          drawings.pdf
    study_files     a study as tables
    folder          a folder whole or not at all, and never over what was not written here
    figures_sheet   paper, titles, colours, and files with the same bytes
    figures_parts   what several drawings show
    figures_load, figures_curves, figures_tree, figures_study   the figures; tree_layout plans the sheet of the tree
    writing         all of it together, and `read_rig`

Every number comes from the check; what is wanted, planned or proven is called so.  matplotlib is imported by the
modules of the figures alone, and these only when a figure is asked for.

Depends on: every stage before it, record, chain, display, errors, findings, words.
"""
