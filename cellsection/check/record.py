"""A report as plain data, as `--json` and `--jsonl` print it.

docs/checking.md describes the schema; a change of meaning raises its number.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, TypeAlias

import cellsection
from cellsection.check.findings import (
    Cycle,
    Difference,
    Error,
    NotVerified,
    UnmetCheck,
    Unsupported,
    worst,
)
from cellsection.check.places import address
from cellsection.check.report import moment_in_words
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from collections.abc import Sequence

    from cellsection.check.findings import Cells, Finding, Report, Spot
    from cellsection.workbook.values import Scalar

__all__ = ["LINE_SCHEMA", "SCHEMA", "book_record", "line_record", "record"]

SCHEMA = "cellsection check 1"
LINE_SCHEMA = "cellsection check line 1"
Record: TypeAlias = dict[str, Any]


def record(reports: Sequence[Report]) -> Record:
    """The whole result of one run."""
    verdict = worst(report.verdict for report in reports)
    return {
        "schema": SCHEMA,
        **_terms(reports[0]),
        "verdict": verdict.words,
        "exit code": verdict.value,
        "books": [book_record(report) for report in reports],
    }


def line_record(report: Report) -> Record:
    """One book, with what else must be known to read it apart from its run."""
    return {"schema": LINE_SCHEMA, **_terms(report), **book_record(report)}


def _terms(report: Report) -> Record:
    """What checked the book, and what was asked for; the same for all books of a run."""
    return {
        "version": cellsection.__version__,
        "tolerance": {"relative": report.tolerance.relative, "absolute": report.tolerance.absolute},
        "clock": None if report.clock is None else moment_in_words(report.clock),
        "seed": report.seed,
    }


def book_record(report: Report) -> Record:
    """One book of it."""
    tally = report.tally
    return {
        "book": report.path,
        "verdict": report.verdict.words,
        "exit code": report.verdict.value,
        "unreadable": report.unreadable or None,
        "sheets": list(report.sheets),
        "formula cells": {
            "all": tally.cells,
            "hold": tally.hold,
            "do not hold": tally.differ,
            "volatile": tally.volatile,
            "not verified": tally.not_verified,
            "no saved value": tally.unsaved,
        },
        "reading other books": tally.external,
        "acceptance checks": {"all": tally.checks, "met": tally.checks_met},
        "findings": [_finding(finding) for finding in report.findings],
        "notes": [{"text": note.text, "cells": _addresses(note.cells)} for note in report.notes],
    }


def _finding(finding: Finding) -> Record:
    """A finding: its kind, whether it counts, and the facts of its kind."""
    return {"kind": finding.kind, "verdict": finding.verdict.words, **_facts(finding)}


def _facts(finding: Finding) -> Record:
    match finding:
        case Difference():
            values = {"saved": _value(finding.saved), "recalculated": _value(finding.recalculated)}
            return {**_spot(finding.spot), **values, "volatile": finding.volatile}
        case UnmetCheck():
            values = {
                "expected": _value(finding.expected),
                "saved": _value(finding.saved),
                "recalculated": _value(finding.recalculated),
            }
            return {**_spot(finding.spot), **values, "cause": finding.cause}
        case Error():
            return {
                **_spot(finding.spot),
                "error": finding.code,
                "cause": finding.cause,
                "saved": _value(finding.saved),
                "saved alike": finding.saved_alike,
                "input refused": finding.refused,
                "cells": _addresses(finding.cells),
                "passed on to": _addresses(finding.echoes),
            }
        case Unsupported():
            cells = {"cells": _addresses(finding.cells), "dependants": _addresses(finding.dependants)}
            return {"construct": finding.construct, **_spot(finding.example), **cells}
        case Cycle():
            cells = {"cells": _addresses(finding.cells), "dependants": _addresses(finding.dependants)}
            return {"circle": finding.circle, **cells}
        case NotVerified():
            return {"reason": finding.reason, "cells": _addresses(finding.cells)}
        case _:
            return {"cells": _addresses(finding.cells)}


def _spot(spot: Spot) -> Record:
    return {"sheet": spot.sheet, "cell": spot.cell, "address": str(spot), "formula": spot.formula}


def _value(value: Scalar) -> Any:
    """A cell's value: null for a blank, an object for an error, else the JSON value of its kind."""
    return {"error": value.code} if isinstance(value, ErrorValue) else value


def _addresses(cells: Cells) -> list[str]:
    return [address(sheet, cell) for sheet, cell in cells]
