"""Exact solutions of Saint-Venant's problem for the tests: those of the validation library, under one name."""

from validation.closed_form.composite import (
    concentric_torsion,
    layered_flexure,
    side_by_side_torsion,
)
from validation.closed_form.flexure import (
    circle_shear_coefficient,
    ellipse_flexure,
    equilateral_triangle_flexure,
    rectangle_flexure,
    rectangle_shear_coefficient,
    ring_flexure,
    ring_shear_coefficient,
)
from validation.closed_form.shear_centres import (
    semicircle_shear_centres,
    thin_channel_shear_centre,
)
from validation.closed_form.torsion import (
    bredt_constant,
    eccentric_tube_torsion_constant,
    ellipse_torsion,
    equilateral_triangle_torsion,
    grooved_circle_torsion,
    rectangle_torsion_constant,
    rectangle_torsion_largest,
    rectangle_warping,
    rectangle_warping_constant,
    semicircle_torsion_constant,
)

__all__ = [
    "bredt_constant",
    "circle_shear_coefficient",
    "concentric_torsion",
    "eccentric_tube_torsion_constant",
    "ellipse_flexure",
    "ellipse_torsion",
    "equilateral_triangle_flexure",
    "equilateral_triangle_torsion",
    "grooved_circle_torsion",
    "layered_flexure",
    "rectangle_flexure",
    "rectangle_shear_coefficient",
    "rectangle_torsion_constant",
    "rectangle_torsion_largest",
    "rectangle_warping",
    "rectangle_warping_constant",
    "ring_flexure",
    "ring_shear_coefficient",
    "semicircle_shear_centres",
    "semicircle_torsion_constant",
    "side_by_side_torsion",
    "thin_channel_shear_centre",
]
