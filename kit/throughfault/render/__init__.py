"""Everything a reader sees: formulas, tables, figures, the record. Renderers do no arithmetic on results."""
