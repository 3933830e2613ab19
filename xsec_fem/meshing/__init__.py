"""Meshing: a section to a mesh, mesh files, and what the mesh says about contacts between parts."""
