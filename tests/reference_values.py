"""Values without a closed form for the tests: those of the validation library."""

from validation.closed_form.independent_values import POLYGONS, RING_SECTORS, PolygonValues, RingSectorValues

__all__ = ["POLYGONS", "RING_SECTORS", "PolygonValues", "RingSectorValues"]
