"""Beams over supports: analysis, shear, deflection, cut-offs and bent shapes."""
