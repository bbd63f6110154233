"""Circular references: named cell by cell, or worked off by iteration where the book asks for that.

A circle is iterated from its saved values, cell after cell in the order in which they wait for one another, as often as
the book allows or until nothing changes any more. Its saved values hold where one more round changes none of them by
more than the book allows, or where they lie so near to the values at which the circle settles. They are then kept, so
that what depends on them is verified against what the file says; else the settled values stand, and a comparison shows
the difference.

Source of the rounds and the change allowed, 100 and 0.001 where a book does not say: ISO/IEC 29500-1, 18.2.2
(iterateCount, iterateDelta); OpenDocument 1.3 part 3, 9.4.3 (steps, maximum difference).
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.workbook.keys import position
from cellsection.workbook.machine import SETTLING, Pending, Place, Special, Taint
from cellsection.workbook.results import Status
from cellsection.workbook.values import Scalar

if TYPE_CHECKING:
    from cellsection.workbook.recalculate import Driver

__all__ = ["Circles"]

SHOWN = 12  # cells of a circle that a report names
STILL = 1e-14  # relative change at which a circle has come to rest: the last digits of a number


class Circles:
    """The circles of one book, as its driver comes upon them."""

    def __init__(self, driver: Driver) -> None:
        self.driver, self.machine = driver, driver.machine
        self.heads: dict[Place, None] = {}  # cells read by their saved value until they are computed themselves
        self.members: dict[Place, None] = {}  # cells computed from heads, in the order to iterate them
        self.running = False

    def close(self, start: Place) -> None:
        """The cells on hold wait for one another from `start` on."""
        circle: list[Place] = []
        for place in reversed(self.driver.open):
            circle.append(place)
            if place == start:
                break
        if self.machine.book.iterate:
            self.machine.settle_saved(*start, SETTLING)
            self.heads[start] = None
            return
        circle.reverse()
        for place in circle:
            self.machine.settle_saved(*place, Taint(Status.CYCLE, self.named(circle)))
            self.driver.open.pop(place, None)

    def named(self, circle: list[Place]) -> str:
        """The circle cell by cell."""
        names = [self.machine.address(*place) for place in circle]
        shown = names if len(names) <= SHOWN else [*names[: SHOWN - 1], f"... {len(names) - SHOWN} more ...", names[-1]]
        return "circular reference " + " -> ".join([*shown, names[0]])

    def computed(self, place: Place) -> None:
        """A head is computed; when it was the last one, the circle can be iterated."""
        del self.heads[place]
        if not self.heads and not self.running:
            self.running = True
            self.iterate()
            self.running = False
            self.members.clear()

    def iterate(self) -> None:
        """Round after round until the circle rests, and what that says of the saved values."""
        machine, book = self.machine, self.machine.book
        saved = {place: self.saved(place) for place in self.members}
        first = last = self.largest(saved, self.values())
        rounds, lost = 1, True  # one more round at least: the heads themselves may be beyond verifying
        while lost or (rounds < book.rounds and not self.resting(last)):
            before, many = self.values(), len(self.members)
            for place in list(self.members):
                self.again(place)
            last, lost = self.largest(before, self.values()), len(self.members) < many
            rounds += 1
        circle = list(self.members)
        if not circle:
            return  # what it reads cannot be verified, and so neither can the circle
        if last > book.change_allowed:
            reason = (
                f"{self.named(circle)}; {rounds:,} rounds of iteration do not settle it: it still changes by {last:.3g}"
            )
            for place in circle:
                machine.settle_saved(*place, Taint(Status.CYCLE, reason))
            return
        apart = self.largest({place: self.saved(place) for place in circle}, self.values())
        holds = min(first, apart) <= book.change_allowed
        remark = (
            f"{self.named(circle).removeprefix('circular reference ')} is a circle that the book asks to iterate: "
            f"settled in {rounds:,} round{'s' * (rounds > 1)}, "
        )
        remark += f"{apart:.3g} from the saved values at most" if holds else "away from the saved values"
        for place in circle:
            self.rest(place, remark, keep_saved=holds)

    def again(self, place: Place) -> None:
        """Compute a cell of the circle once more; what it newly asks for is computed first."""
        index, key = place
        while True:
            try:
                self.driver.compute(index, key, self.machine.formulas[index][key])
                break
            except Pending as hold:
                for each in hold.places:
                    self.driver.settle(self.driver.owning(each), Pending([]))
        value = self.machine.stores[index][key]
        if value.__class__ is not Special or value.taint is not SETTLING:
            self.members.pop(place, None)  # it came to depend on what cannot be verified, or left the circle

    def rest(self, place: Place, remark: str, *, keep_saved: bool) -> None:
        """A cell of a settled circle, and the area its array formula fills, become plain values."""
        machine = self.machine
        index, key = place
        machine.remarks[place] = remark
        store, owners = machine.stores[index], machine.owners[index]
        values = machine.book.sheets[index].values
        for each in (key, *(other for other, owner in owners.items() if owner == key)) if owners else (key,):
            value = store.get(each)
            if value.__class__ is Special and value.taint is SETTLING:
                known = values.get(position(each))
                store[each] = known if keep_saved and known is not None else value.value

    def saved(self, place: Place) -> Scalar:
        """What the file says of a cell; the application begins from 0 where it says nothing."""
        known = self.machine.book.sheets[place[0]].values.get(position(place[1]))
        return 0.0 if known is None else known

    def values(self) -> dict[Place, Scalar]:
        """The present values of the circle."""
        stores = self.machine.stores
        found = {(index, key): stores[index][key] for index, key in self.members}
        return {place: value.value if value.__class__ is Special else value for place, value in found.items()}

    @staticmethod
    def largest(before: dict[Place, Scalar], after: dict[Place, Scalar]) -> float:
        """The largest change of a number; boundless where a cell changes its kind, or another value than a number."""
        changes = [0.0]
        for place, now in after.items():
            then = before.get(place)
            if isinstance(now, float) and isinstance(then, float):
                changes.append(abs(now - then))
            elif now != then:
                changes.append(float("inf"))
        return max(changes)

    def resting(self, change: float) -> bool:
        """Whether a change is none beside the values."""
        sizes = [abs(value) for value in self.values().values() if isinstance(value, float)]
        return change <= STILL * max(sizes, default=0.0)
