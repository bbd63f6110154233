"""An archive checked on a Dask cluster: its executor handed in as it is."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from distributed import Client, LocalCluster

from cellsection.check import Verdict, check_books
from tests.check.small_book import write_book


@pytest.fixture(scope="module")
def client() -> Iterator[Client]:
    with (
        LocalCluster(n_workers=2, threads_per_worker=1, processes=False, dashboard_address=None) as cluster,
        Client(cluster) as client,
    ):
        yield client


def test_books_are_checked_on_a_cluster_in_their_order(client: Client, tmp_path: Path) -> None:
    cells = {"A1": 300.0, "B1": ("A1*2", 600.0), "C1": ("RAND()", 0.5)}
    good = write_book(tmp_path / "good.xlsx", cells)
    bad = write_book(tmp_path / "bad.xlsx", {**cells, "B1": ("A1*2", 601.0)})
    none = tmp_path / "none.xlsx"
    with client.get_executor() as executor:
        reports = list(check_books([good, bad, none, good] * 5, executor=executor, ahead=6))
    expected = [Verdict.HOLDS, Verdict.DOES_NOT_HOLD, Verdict.UNREADABLE, Verdict.HOLDS] * 5
    assert [report.verdict for report in reports] == expected
    assert [report.tally.volatile for report in reports[:2]] == [1, 1]
