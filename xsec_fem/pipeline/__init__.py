"""The order of the work: read -> mesh -> solve -> recover -> result."""

from xsec_fem.pipeline.steps import solve, solve_on_mesh

__all__ = ["solve", "solve_on_mesh"]
