"""Plain formulas and loops on scalars and arrays, below every object."""
