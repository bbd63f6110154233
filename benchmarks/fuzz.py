"""An hour, or as long as is asked for, of random formulas and damaged books: no crash, no hang, no trespass.

Each trial runs in a worker that is watched from outside: a trial that takes longer than its time, more memory than is
allowed or its process down with it is a failure as an exception is. A failing case is kept as a file, and with the seed
every run can be had again.
"""

from __future__ import annotations

import multiprocessing
import os
import resource
import shutil
import sys
import tempfile
import time
import traceback
from collections import Counter
from multiprocessing.connection import Connection
from pathlib import Path
from random import Random
from typing import Any

__all__ = ["run"]

PATIENCE = 40.0  # seconds for one trial, in which the book's own limit of 3 s must have ended it
LONGEST_WAIT = 1200.0  # seconds on a machine that has no time for it
MEMORY = 1 << 30  # bytes that a worker may come to hold
A_WORKER = 2000  # trials, after which a new one takes over
SHOWN = 2  # cases of one fault that are printed and kept
ENDED = ("no answer", "the worker", "it takes")  # faults after which the worker is no more use
MIX = ("formulas", "formulas", "formulas", "markup", "markup", "zip")


def run(minutes: float, seed: int, kept: Path) -> int:
    """Run trials for so many minutes; the number of failing ones decides the exit code."""
    end, number = time.monotonic() + 60 * minutes, 0
    trials: Counter[str] = Counter()
    met: Counter[str] = Counter()
    alike: Counter[str] = Counter()
    slowest = (0.0, "")
    most, failures = 0, 0
    context = multiprocessing.get_context("spawn")
    with tempfile.TemporaryDirectory() as scratch:
        while time.monotonic() < end:
            folder = Path(scratch) / f"from {number}"
            folder.mkdir()
            here, there = context.Pipe()
            worker = context.Process(target=work, args=(there, seed, number, folder), daemon=True)
            worker.start()
            there.close()
            while time.monotonic() < end:
                fault, told = "", None
                try:
                    if not answered(here, worker.pid):
                        fault = f"no answer within {PATIENCE:g} s"
                    else:
                        told = here.recv()
                        fault = told["fault"]
                except EOFError:
                    fault = "the worker died"
                kind = MIX[number % len(MIX)]
                trials[kind] += 1
                if fault.startswith(ENDED):
                    worker.kill()
                    told = None
                if told:
                    met += told["met"]
                    slowest, most = max(slowest, (told["seconds"], f"{kind} {number}")), max(most, told["memory"])
                    if told["memory"] > MEMORY:
                        fault = fault or f"it takes {told['memory']:,} bytes"
                if fault:
                    failures += 1
                    alike[signature(fault)] += 1
                    if alike[signature(fault)] <= SHOWN:
                        keep(kept, folder, f"{seed}-{number}", fault)
                        print(f"FAILS {kind} {seed} {number}: {fault}", flush=True)
                number += 1
                if fault.startswith(ENDED) or not number % A_WORKER:
                    break
            worker.kill()
            worker.join()
            shutil.rmtree(folder, ignore_errors=True)
            print(f"{sum(trials.values()):,} trials, {failures} fail, slowest {slowest}, {most:,} bytes", flush=True)
    report(trials, met, failures, slowest, most, f"{minutes:g} minutes from seed {seed}")
    return 1 if failures else 0


def answered(here: Connection, worker: int | None) -> bool:
    """Whether a worker tells of its trial in time: its own time, where the system says how much of it it has had."""
    before, waited = worked(worker), 0.0
    while not here.poll(PATIENCE):
        waited += PATIENCE
        had = worked(worker)
        if had is None or before is None or had - before >= PATIENCE or waited > LONGEST_WAIT:
            return False
    return True


def worked(process: int | None) -> float | None:
    """Seconds that a process has been at work; None where the system does not say."""
    told = Path(f"/proc/{process}/stat")
    if not told.exists():
        return None
    user, system = told.read_text().rpartition(")")[2].split()[11:13]
    return (int(user) + int(system)) / os.sysconf("SC_CLK_TCK")


def work(there: Connection, seed: int, number: int, folder: Path) -> None:
    """Make one trial after another, and tell of each."""
    from tests.fuzz.trial import trial

    while True:
        kind = MIX[number % len(MIX)]
        started, fault, met = time.monotonic(), "", Counter[str]()
        for each in folder.iterdir():
            each.unlink()
        try:
            met = trial(Random(f"{seed} {number}"), folder, kind)
        except BaseException:  # whatever comes out is a finding
            fault = traceback.format_exc(limit=-6)
        told: dict[str, Any] = {"fault": fault, "met": met, "seconds": time.monotonic() - started, "memory": peak()}
        there.send(told)
        number += 1


def signature(fault: str) -> str:
    """What faults of one cause have in common: where they arise, and their kind."""
    lines = fault.strip().splitlines()
    places = [line for line in lines if line.lstrip().startswith("File")]
    return f"{places[-1] if places else ''} {lines[-1].partition(':')[0]}"


def peak() -> int:
    """The most memory this process has held, in bytes."""
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss * (1 if sys.platform == "darwin" else 1024)


def keep(kept: Path, folder: Path, name: str, fault: str) -> None:
    """Keep a failing case with what was said of it."""
    kept.mkdir(parents=True, exist_ok=True)
    for each in folder.iterdir():
        if each.name.startswith("case"):
            shutil.copyfile(each, kept / f"{name}{each.suffix}")
    (kept / f"{name}.txt").write_text(fault, encoding="utf-8", errors="backslashreplace")


def report(
    trials: Counter[str], met: Counter[str], failures: int, slowest: tuple[float, str], most: int, run_of: str
) -> None:
    """What the run came to."""
    print(f"\n{run_of}: {sum(trials.values()):,} trials, {failures} fail")
    print("  " + ", ".join(f"{kind} {count:,}" for kind, count in sorted(trials.items())))
    print("  " + ", ".join(f"{what} {count:,}" for what, count in sorted(met.items()) if not what.startswith("fault")))
    print(f"  slowest {slowest[0]:.1f} s ({slowest[1]}), peak memory {most / 1e6:,.0f} MB")
    for what, count in met.most_common():
        if what.startswith("fault"):
            print(f"  {count:5} × {what}")
