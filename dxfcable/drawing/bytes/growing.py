"""Arrays that grow where they lie, so that what they hold is never held twice."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, Generic, TypeVar

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

Number = TypeVar("Number", bound=np.generic)


class Growing(Generic[Number]):
    """A row of numbers to which blocks are added.

    Parameters
    ----------
    kind : numpy type
        Of the numbers; what is added is converted.
    """

    def __init__(self, kind: type[Number]) -> None:
        self._numbers: NDArray[Number] = np.empty(0, kind)
        self._count = 0

    def __len__(self) -> int:
        """Return how many numbers there are."""
        return self._count

    def add(self, block: NDArray[Any]) -> None:
        """Add numbers, those of a table row by row."""
        count = self._count + block.size
        if count > self._numbers.size:
            # An eighth more than is needed: rarely again, and little that stays unused.
            self._numbers.resize(max(count, self._numbers.size * 9 // 8), refcheck=False)
        self._numbers[self._count : count] = block.reshape(-1)
        self._count = count

    def taken(self) -> NDArray[Number]:
        """Give the numbers away; nothing is left here."""
        numbers, self._numbers = self._numbers, np.empty(0, self._numbers.dtype)
        numbers.resize(self._count, refcheck=False)
        self._count = 0
        return numbers
