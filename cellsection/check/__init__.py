"""Whether a saved workbook holds: recalculated, compared with what the file says, its acceptance checks read.

    >>> from cellsection.check import check_book
    >>> report = check_book("workbooks/no such book.xlsx")
    >>> report.verdict.words, report.verdict.value
    ('unreadable', 3)

compare.py says when two values agree, findings.py what can be found, examine.py how cells become findings; report.py
and layout.py put a report in words, record.py makes it plain data for `--json`. many.py checks many books at once, with
the worker processes of pool.py.
"""

from cellsection.check.compare import Tolerance
from cellsection.check.examine import check_book, examine
from cellsection.check.findings import Report, Verdict, worst
from cellsection.check.many import books_in, check_books

__all__ = ["Report", "Tolerance", "Verdict", "books_in", "check_book", "check_books", "examine", "worst"]
