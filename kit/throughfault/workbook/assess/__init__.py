"""Assessment: a unit file's data taken through the cells to findings."""
