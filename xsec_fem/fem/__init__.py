"""Finite elements on triangles: reference elements, quadrature, mesh, assembly, linear solve, edges."""
