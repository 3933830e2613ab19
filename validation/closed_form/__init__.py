"""Exact solutions of Saint-Venant's problem, each with its source: what the cases are compared with.

One module a subject: flexure, torsion, shear centres, composite sections; `independent_values` holds numbers without a formula.
"""
