"""The algorithms behind the sheet: pure, vectorised functions of NumPy arrays in SI units.

Nothing here knows of records, units or files. Inputs broadcast; NaN in gives NaN out, without a warning.
"""
