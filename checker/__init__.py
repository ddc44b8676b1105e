"""Samestrut: an independent audit of declared concrete beams in shear and torsion to Eurocode 2.

from checker import audit, load

report = audit("beam.yaml")      # AuditReport
report.outcome                   # "accept", "accept with remarks", "return", "incomplete"
print(report.text())
"""

from __future__ import annotations

from typing import TYPE_CHECKING

__version__ = "0.1.0"
__all__ = ["AuditReport", "Design", "Fault", "InputFaults", "RuleFaults", "__version__", "audit", "load"]

if TYPE_CHECKING:
    from checker.declared.model import Design
    from checker.errors import Fault, InputFaults, RuleFaults
    from checker.pipeline import audit, load
    from checker.report.audit_report import AuditReport

_HOMES = {
    "audit": "checker.pipeline",
    "load": "checker.pipeline",
    "AuditReport": "checker.report.audit_report",
    "Design": "checker.declared.model",
    "Fault": "checker.errors",
    "InputFaults": "checker.errors",
    "RuleFaults": "checker.errors",
}


def __getattr__(name: str) -> object:
    """Names are imported when first used, so that `import checker` costs nothing."""
    if name in _HOMES:
        from importlib import import_module

        return getattr(import_module(_HOMES[name]), name)
    raise AttributeError(f"module 'checker' has no attribute {name!r}")
