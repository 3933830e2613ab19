"""The hand formula V S/(I t): on cuts, on walls, and against the elasticity solution."""
