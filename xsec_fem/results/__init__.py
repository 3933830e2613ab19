"""Frozen result objects and results.json; nothing here knows how a result was made."""

from xsec_fem.results.cases import CaseResult, CornerReading, CutComparison, PartResult, ProbeResult
from xsec_fem.results.constants import Certificate, Contact, ConvergenceRow, MeshStep, Properties
from xsec_fem.results.result import SCHEMA, Result
from xsec_fem.results.trust import Caution, Check

__all__ = [
    "SCHEMA",
    "CaseResult",
    "Caution",
    "Certificate",
    "Check",
    "Contact",
    "ConvergenceRow",
    "CornerReading",
    "CutComparison",
    "MeshStep",
    "PartResult",
    "ProbeResult",
    "Properties",
    "Result",
]
