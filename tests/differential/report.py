"""A differential run as it is printed, and the page on differences that is written from the records.

`python -m tests.differential.report` writes docs/differences.md anew.
"""

from __future__ import annotations

from collections import Counter, defaultdict
from pathlib import Path
from typing import TYPE_CHECKING

from cellsection.workbook.values import ErrorValue, Scalar
from tests.differential.comparison import ABSOLUTE, RELATIVE, Difference, Outcome
from tests.differential.known import Known, explanation, records

if TYPE_CHECKING:
    from collections.abc import Iterable

__all__ = ["PAGE", "added", "page", "summary"]

PAGE = Path(__file__).resolve().parents[2] / "docs" / "differences.md"


def added(outcomes: Iterable[Outcome]) -> Outcome:
    """Several outcomes as one."""
    whole = Outcome()
    for each in outcomes:
        whole.cells += each.cells
        whole.equal += each.equal
        whole.follows += each.follows
        whole.unsupported += each.unsupported
        whole.differences += each.differences
    return whole


def summary(outcome: Outcome) -> tuple[str, int]:
    """What a run found, and how many differences no record explains."""
    explained: Counter[str] = Counter()
    rest: dict[str, list[Difference]] = defaultdict(list)
    for difference in outcome.differences:
        record = explanation(difference)
        if record is None:
            rest[difference.group].append(difference)
        else:
            explained[record.key] += 1
    unexplained = sum(map(len, rest.values()))
    unsupported = outcome.unsupported.total()
    lines = [f"{'kind of difference':52} {'cells':>9}"]
    lines += [f"  {key:50} {count:9,}" for key, count in explained.most_common()]
    lines += ["", f"{'unexplained, by function and kinds of argument':52} {unexplained:9,}"]
    for group, met in sorted(rest.items(), key=lambda item: -len(item[1])):
        lines.append(f"  {group[:110]}  ×{len(met)}\n      {example(min(met, key=lambda d: len(d.piece.text)))}")
    lines += ["", f"{'not supported, or depending on what is not':52} {unsupported:9,}"]
    lines += [f"  {reason[:90]:90} {count:9,}" for reason, count in outcome.unsupported.most_common(12)]
    lines += [
        "",
        f"{'formula cells compared':52} {outcome.cells:9,}",
        f"{'  equal':52} {outcome.equal:9,}  {outcome.equal / max(outcome.cells, 1):7.2%}",
        f"{'  different, explained':52} {explained.total():9,}  {explained.total() / max(outcome.cells, 1):7.2%}",
        f"{'  different because a call within is':52} {outcome.follows:9,}",
        f"{'  not supported':52} {unsupported:9,}",
        f"{'  unexplained':52} {unexplained:9,}",
    ]
    return "\n".join(lines), unexplained


def example(difference: Difference) -> str:
    """The formula with both values."""
    where = f" [element {difference.element}]" if difference.array else ""
    theirs = difference.shown or told(difference.theirs)
    return (
        f"={difference.piece.text[:140]}{where} ours {told(difference.ours)}, LibreOffice {theirs} ({difference.path})"
    )


def told(value: Scalar) -> str:
    """A value in a report."""
    return value.code if isinstance(value, ErrorValue) else repr(value)[:60]


INTRODUCTION = f"""\
# Differences from LibreOffice

Random workbooks are recalculated here and in LibreOffice 7.4, which is a second opinion and not the truth, and every
formula cell is compared: numbers to {RELATIVE:g} of the larger one or {ABSOLUTE:g}, errors by their code, complex
numbers in text as numbers; LibreOffice's logicals are the numbers 1 and 0 and count as equal to ours. Each workbook is
recalculated twice: as the .xlsx file that was made and as the .ods file that LibreOffice saved of it. A cell differs on
its own account only where every call within its formula, repeated in a cell of its own, agrees.

    python -m benchmarks differential --cells 100000 --seed 1

prints how many cells are equal and how many differ in which of the ways below, and fails at a difference that is in
none. The page is written from `tests/differential/known*.py` by `python -m tests.differential.report`. "Standard" is
OpenFormula (ODF 1.3 part 4) or ISO/IEC 29500-1 18.17; "silent" means that it leaves the matter open, "both" that it
allows both, "ours" and "LibreOffice" that this side does as it says; the same words stand for Excel. No Excel was run:
what it does is taken from its function reference, from workbooks it saved, or from memory; "unknown" where none says.
"""


def page() -> str:
    """The page on differences."""
    kinds = [record for record in records() if record.key not in codes()]
    parts = [INTRODUCTION, "## Values\n"]
    parts += [entry(record) for record in kinds]
    parts.append(
        "## Codes of errors\n\nBoth programs refuse the same arguments, with different codes. OpenFormula asks for an "
        "error and leaves open which; ours are those that Excel's reference documents where it does.\n"
    )
    parts.append("| difference | functions | why |\n|---|---|---|")
    parts += [f"| {each.key} | {functions(each)} | {each.reason} |" for each in records() if each.key in codes()]
    return "\n".join(parts) + "\n"


def codes() -> frozenset[str]:
    """The keys of the records on codes of errors."""
    from tests.differential.known_codes import CODES

    return frozenset(each.key for each in CODES)


def functions(record: Known) -> str:
    """The functions and operators of a record, safe in a table."""
    names = [f"`{name}`" for name in sorted(record.heads)]
    return " ".join(names) or "any"


def entry(record: Known) -> str:
    """A record as a paragraph."""
    return (
        f"### {record.key[0].upper()}{record.key[1:]}\n\n{record.reason}\n\n"
        f"- when: {record.when.words}\n- standard: {record.standard} · Excel: {record.excel}\n"
        f"- in: {functions(record)}\n"
    )


if __name__ == "__main__":
    PAGE.write_text(page(), encoding="utf-8")
