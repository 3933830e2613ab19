"""More values of polygons without a closed form, and what a section file needs to draw them; sources as in `independent_values`.

Reference points and loads of POINT_STRESSES: tau A/V under a unit shear through the Trefftz centre, or tau/(G twist) under torsion.
"""

from __future__ import annotations

from dataclasses import dataclass

from .independent_values import POLYGONS, PolygonValues

MORE_POLYGONS = {
    # channel, depth 100, width 50, thickness 10; boundary residual 1.4e-08; |J/J_energy-1|=3.4e-08; resultant off by 2.2e-09
    "channel 10": PolygonValues(
        59348.979, 568782080.0, (-27.160497, 0.0), (-27.163843, 0.0),
        (2.8074899, 2.2531975, 0.0), (2.8198173, 2.2532392, 0.0), 1e-07,
    ),
    # channel, depth 100, width 50, thickness 2.5; boundary residual 1.1e-07; |J/J_energy-1|=1.6e-06; resultant off by 4.3e-08
    "channel 2.5": PolygonValues(
        1013.08, 201402000.0, (-30.4125, 0.0), (-30.4126, 0.0),
        (3.18783, 2.37242, 0.0), (3.18854, 2.37242, 0.0), 5e-06,
    ),
    # I, depth 120, width 100, web 10, flanges 16; boundary residual 1.3e-08; |J/J_energy-1|=1.1e-07; resultant off by 9.6e-09
    "I": PolygonValues(
        288056.3, 7177086000.0, (0.0, 0.0), (0.0, 0.0),
        (1.494282, 3.851109, 0.0), (1.499706, 3.851214, 0.0), 5e-07,
    ),
    # Greek cross 3x3, arms 1 wide; boundary residual 1.1e-08; |J/J_energy-1|=5.2e-08; resultant off by 1.5e-09
    "cross": PolygonValues(
        1.8742164, 0.18189799, (0.0, 0.0), (0.0, 0.0),
        (1.5091718, 1.5091718, 0.0), (1.5137381, 1.5137381, 0.0), 1e-07,
    ),
    # corners (±sqrt 3, -1), (0, 2); boundary residual 1.8e-14; |J/J_energy-1|=4.4e-16; resultant off by 9.0e-13
    "equilateral triangle": PolygonValues(
        3.117691454, 0.0742307489, (0.0, 0.0), (0.0, 0.0),
        (1.322004447, 1.322004447, 0.0), (1.327434268, 1.327434268, 0.0), 1e-09,
    ),
}  # fmt: skip

ALL_POLYGONS = POLYGONS | MORE_POLYGONS


@dataclass(frozen=True)
class PointStress:
    """A reference stress of a polygon: load "Vy", "Vz" or "T", nu (of no account under T), point, component, value."""

    polygon: str
    load: str
    nu: float
    y: float
    z: float
    component: str
    value: float


POINT_STRESSES = (
    PointStress("right triangle", "Vz", 0.0, 1 / 3, 1 / 3, "tau_xy", 0.1111111111),
    PointStress("right triangle", "Vz", 0.0, 1 / 3, 1 / 3, "tau_xz", 1.444444444),
    PointStress("right triangle", "Vz", 0.0, 0.5, 0.5, "tau_xy", -0.75),
    PointStress("right triangle", "Vz", 0.0, 0.5, 0.5, "tau_xz", 0.75),
    PointStress("right triangle", "Vz", 0.3, 1 / 3, 1 / 3, "tau_xy", 0.05154960896),
    PointStress("right triangle", "Vz", 0.3, 1 / 3, 1 / 3, "tau_xz", 1.350159793),
    PointStress("right triangle", "Vz", 0.3, 0.5, 0.5, "tau_xy", -0.7794808572),
    PointStress("right triangle", "Vz", 0.3, 0.5, 0.5, "tau_xz", 0.7794808572),
    PointStress("right triangle", "T", 0.0, 0.5, 0.5, "tau_xy", -0.3246855167),
    PointStress("right triangle", "T", 0.0, 0.5, 0.5, "tau_xz", 0.3246855167),
    PointStress("hexagon", "Vz", 0.0, 0, 0, "tau_xz", 1.504437366),
    PointStress("hexagon", "Vz", 0.3, 0, 0, "tau_xz", 1.392030196),
    PointStress("angle", "Vz", 0.0, 5, 50, "tau_xz", 2.6242912),
    PointStress("angle", "Vz", 0.0, 50, 5, "tau_xy", 0.30384926),
    PointStress("angle", "Vz", 0.3, 5, 50, "tau_xz", 2.6227284),
    PointStress("angle", "Vz", 0.3, 50, 5, "tau_xy", 0.30292393),
    PointStress("channel", "Vy", 0.0, 10, 50, "tau_xy", 0.2724421),
    PointStress("channel", "Vz", 0.0, 10, 50, "tau_xz", 2.1617119),
    PointStress("channel", "Vz", 0.0, 0, 50, "tau_xz", 2.1529501),
    PointStress("channel", "Vz", 0.0, 20, 50, "tau_xz", 2.170685),
    PointStress("channel", "Vy", 0.3, 10, 50, "tau_xy", 0.21241901),
    PointStress("channel", "Vz", 0.3, 10, 50, "tau_xz", 2.1583182),
    PointStress("channel", "Vz", 0.3, 0, 50, "tau_xz", 2.1751927),
    PointStress("channel", "Vz", 0.3, 20, 50, "tau_xz", 2.1620171),
    PointStress("channel", "T", 0.0, 0, 50, "tau_xz", -20.049417),
    PointStress("channel", "T", 0.0, 20, 50, "tau_xz", 20.050427),
    PointStress("box", "Vz", 0.0, 45, 0, "tau_xz", 2.2317073),
    PointStress("box", "Vz", 0.0, 50, 0, "tau_xz", 2.2317033),
    PointStress("box", "Vz", 0.0, 40, 0, "tau_xz", 2.2317113),
    PointStress("box", "Vz", 0.3, 45, 0, "tau_xz", 2.2310038),
    PointStress("box", "Vz", 0.3, 50, 0, "tau_xz", 2.271103),
    PointStress("box", "Vz", 0.3, 40, 0, "tau_xz", 2.1951259),
    PointStress("box", "T", 0.0, 45, 0, "tau_xz", 47.07436),
    PointStress("box", "T", 0.0, 50, 0, "tau_xz", 57.074233),
    PointStress("box", "T", 0.0, 40, 0, "tau_xz", 37.074486),
    PointStress("channel 10", "Vy", 0.0, 5, 50, "tau_xy", 0.057291404),
    PointStress("channel 10", "Vz", 0.0, 5, 50, "tau_xz", 2.2317073),
    PointStress("channel 10", "Vz", 0.0, 10, 50, "tau_xz", 2.2317114),
    PointStress("channel 10", "Vz", 0.3, 5, 50, "tau_xz", 2.2310038),
    PointStress("channel 10", "Vz", 0.3, 10, 50, "tau_xz", 2.2247526),
    PointStress("channel 10", "T", 0.0, 0, 50, "tau_xz", -10.000009),
    PointStress("channel 10", "T", 0.0, 10, 50, "tau_xz", 10.00001),
    PointStress("channel 2.5", "Vz", 0.0, 1.25, 50, "tau_xz", 2.24901),
    PointStress("channel 2.5", "Vz", 0.0, 2.5, 50, "tau_xz", 2.24901),
    PointStress("channel 2.5", "Vz", 0.3, 1.25, 50, "tau_xz", 2.24898),
    PointStress("channel 2.5", "Vz", 0.3, 2.5, 50, "tau_xz", 2.24694),
    PointStress("channel 2.5", "T", 0.0, 0, 50, "tau_xz", -2.5),
    PointStress("channel 2.5", "T", 0.0, 2.5, 50, "tau_xz", 2.5),
    PointStress("I", "Vz", 0.0, 0, 60, "tau_xz", 4.079578),
    PointStress("I", "Vz", 0.0, 5, 60, "tau_xz", 4.079578),
    PointStress("I", "Vz", 0.0, 0, 30, "tau_xz", 3.881771),
    PointStress("I", "Vy", 0.0, 25, 112, "tau_xy", 1.430381),
    PointStress("I", "Vz", 0.0, 25, 112, "tau_xy", 0.5707549),
    PointStress("I", "Vz", 0.3, 0, 60, "tau_xz", 4.079156),
    PointStress("I", "Vz", 0.3, 5, 60, "tau_xz", 4.080423),
    PointStress("I", "Vz", 0.3, 0, 30, "tau_xz", 3.881349),
    PointStress("I", "Vy", 0.3, 25, 112, "tau_xy", 1.426631),
    PointStress("I", "Vz", 0.3, 25, 112, "tau_xy", 0.5707549),
    PointStress("I", "T", 0.0, 5, 60, "tau_xz", 10.00001),
    PointStress("I", "T", 0.0, 0, 30, "tau_xy", -0.09878913),
    PointStress("I", "T", 0.0, 25, 112, "tau_xz", 0.1306445),
    PointStress("cross", "Vz", 0.0, 1.5, 1.5, "tau_xz", 1.7227363),
    PointStress("cross", "Vz", 0.3, 1.5, 1.5, "tau_xz", 1.6607905),
    PointStress("equilateral triangle", "Vy", 0.0, 0, 0, "tau_xy", 1.449457996),
    PointStress("equilateral triangle", "Vz", 0.0, 0, 0, "tau_xz", 1.449457996),
    PointStress("equilateral triangle", "Vy", 0.0, 0, -1, "tau_xy", 1.778528129),
    PointStress("equilateral triangle", "Vy", 0.0, 3**0.5 / 2, 0.5, "tau_xy", 0.4446320323),
    PointStress("equilateral triangle", "Vz", 0.0, 3**0.5 / 2, 0.5, "tau_xy", -0.7701252706),
    PointStress("equilateral triangle", "Vz", 0.0, 3**0.5 / 2, 0.5, "tau_xz", 1.333896097),
    PointStress("equilateral triangle", "Vy", 0.3, 0, 0, "tau_xy", 1.369063999),
    PointStress("equilateral triangle", "Vz", 0.3, 0, 0, "tau_xz", 1.369063999),
    PointStress("equilateral triangle", "Vy", 0.3, 0, -1, "tau_xy", 1.931854809),
    PointStress("equilateral triangle", "Vy", 0.3, 3**0.5 / 2, 0.5, "tau_xy", 0.4829637022),
    PointStress("equilateral triangle", "Vz", 0.3, 3**0.5 / 2, 0.5, "tau_xy", -0.8365176705),
    PointStress("equilateral triangle", "Vz", 0.3, 3**0.5 / 2, 0.5, "tau_xz", 1.448891107),
    PointStress("equilateral triangle", "Vy", 0.5, 0, 0, "tau_xy", 1.333333333),
    PointStress("equilateral triangle", "Vz", 0.5, 0, 0, "tau_xz", 1.333333333),
    PointStress("equilateral triangle", "Vy", 0.5, 0, -1, "tau_xy", 2.0),
    PointStress("equilateral triangle", "Vy", 0.5, 3**0.5 / 2, 0.5, "tau_xy", 0.5),
    PointStress("equilateral triangle", "Vz", 0.5, 3**0.5 / 2, 0.5, "tau_xy", -0.8660254038),
    PointStress("equilateral triangle", "Vz", 0.5, 3**0.5 / 2, 0.5, "tau_xz", 1.5),
    PointStress("equilateral triangle", "T", 0.0, 0, -1, "tau_xy", 1.5),
    PointStress("equilateral triangle", "T", 0.0, 3**0.5 / 2, 0.5, "tau_xy", -0.75),
    PointStress("equilateral triangle", "T", 0.0, 3**0.5 / 2, 0.5, "tau_xz", 1.299038106),
)
