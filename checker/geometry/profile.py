"""A section as bending sees it: widths by depth, and bars by height; one section, or many rows of sections.

- Levels of strips are depths from the compression face: the top when sagging, the bottom when hogging.
- Many rows are padded arrays, one column a distinct section; numpy is imported only when they are made.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, NamedTuple, TypeAlias

from checker.geometry.polygons import Strip

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

Floats: TypeAlias = "NDArray[np.float64]"


class Profile(NamedTuple):
    """One section: strips in mm by depth from either face, bars as (height from the bottom mm, area mm2)."""

    strips_sagging: tuple[Strip, ...]
    strips_hogging: tuple[Strip, ...]
    bars: tuple[tuple[float, float], ...]
    h: float
    y_c: float
    """Height of the concrete's centroid above the bottom, mm."""


@dataclass(frozen=True, slots=True, eq=False)
class ProfileColumns:
    """Many rows of sections, row k being column `index[k]` of the tables.

    - `strips` is (5, strips, 2 x sections): y0, y1, w0, w1 and slope; the hogging sections follow the
      sagging ones.
    - `bars` is (2, bars, sections): height from the bottom and area. Padding has no depth and no area.
    - `levels` is (2, sections): h and y_c.
    """

    strips: Floats
    bars: Floats
    levels: Floats
    index: NDArray[np.intp]

    @staticmethod
    def stack(profiles: Sequence[Profile], index: Any = None) -> ProfileColumns:
        """Return the rows `profiles[index[0]], ...`; without `index`, one row a profile."""
        import numpy as np

        count = len(profiles)
        both = [p.strips_sagging for p in profiles] + [p.strips_hogging for p in profiles]
        strips = np.zeros((5, max(map(len, both), default=0), 2 * count))
        for column, rows in enumerate(both):
            for k, (y0, y1, w0, w1) in enumerate(rows):
                strips[:, k, column] = y0, y1, w0, w1, (w1 - w0) / (y1 - y0)
        bars = np.zeros((2, max((len(p.bars) for p in profiles), default=0), count))
        for column, profile in enumerate(profiles):
            for k, bar in enumerate(profile.bars):
                bars[:, k, column] = bar
        levels = np.array([[p.h for p in profiles], [p.y_c for p in profiles]], dtype=np.float64)
        which = np.arange(count) if index is None else np.asarray(index, dtype=np.intp)
        return ProfileColumns(strips, bars, levels, which)

    def block(self, i: int, j: int) -> ProfileColumns:
        """Return the rows from i up to but not including j; the tables are shared, not copied."""
        return ProfileColumns(self.strips, self.bars, self.levels, self.index[i:j])
