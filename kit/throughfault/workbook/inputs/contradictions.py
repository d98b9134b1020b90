def contradictions(file): return []
