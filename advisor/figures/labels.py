"""Places for words in a figure, so that they do not lie on one another."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Literal

Anchor = Literal["right", "left", "above", "below", "above right", "above left", "below right",
                 "below left"]  # fmt: skip

# Width of a letter and height of a line as shares of the type size, rounded up from the fonts used.
_LETTER, _LINE = 0.6, 1.25
_SHIFT: dict[Anchor, tuple[str, str, int, int]] = {
    # xanchor, yanchor, then the way to shift in x and y
    "right": ("left", "middle", 1, 0),
    "left": ("right", "middle", -1, 0),
    "above": ("center", "bottom", 0, 1),
    "below": ("center", "top", 0, -1),
    "above right": ("left", "bottom", 0, 1),
    "above left": ("right", "bottom", 0, 1),
    "below right": ("left", "top", 0, -1),
    "below left": ("right", "top", 0, -1),
}


@dataclass
class Room:
    """The plotting area in px with what is already written or drawn in it."""

    width: float
    height: float
    x_range: tuple[float, float]
    y_range: tuple[float, float]
    taken: list[tuple[float, float, float, float]] = field(default_factory=list)

    def keep_clear(self, x: float, y: float, half: float) -> None:
        """Keep words off a mark at (x, y) that reaches ``half`` px each way."""
        left, low = self._px(x, y)
        self.taken.append((left - half, low - half, left + half, low + half))

    def fits(
        self,
        words: str,
        size: float,
        spots: Sequence[tuple[float, float, Anchor]],
        away: int = 0,
    ) -> bool:
        """Whether one of the ``spots`` is free for ``words`` of ``size`` px, ``away`` px off."""
        wide, tall = len(words) * size * _LETTER, size * _LINE
        return any(
            self._overlap(self._box(x, y, anchor, wide, tall, away)) <= 0.0
            for x, y, anchor in spots
        )

    def place(
        self,
        words: str,
        size: float,
        spots: Sequence[tuple[float, float, Anchor]],
        away: int = 0,
    ) -> dict[str, object]:
        """Annotation position for ``words``: the first spot (x, y, anchor) that is free.

        Where every spot is taken it is the one that overlaps least. ``away`` is the distance [px]
        kept from the spot in the way of its anchor.
        """
        wide, tall = len(words) * size * _LETTER, size * _LINE
        scored = [
            (self._overlap(self._box(x, y, anchor, wide, tall, away)), place)
            for place, (x, y, anchor) in enumerate(spots)
        ]
        x, y, anchor = spots[min(scored)[1]]
        self.taken.append(self._box(x, y, anchor, wide, tall, away))
        xanchor, yanchor, sideways, upward = _SHIFT[anchor]
        return {
            "x": x,
            "y": y,
            "xanchor": xanchor,
            "yanchor": yanchor,
            "xshift": sideways * away,
            "yshift": upward * away,
            "showarrow": False,
        }

    def _px(self, x: float, y: float) -> tuple[float, float]:
        (left, right), (low, high) = self.x_range, self.y_range
        return (x - left) / (right - left) * self.width, (y - low) / (high - low) * self.height

    def _box(
        self, x: float, y: float, anchor: Anchor, wide: float, tall: float, away: int
    ) -> tuple[float, float, float, float]:
        xanchor, yanchor, sideways, upward = _SHIFT[anchor]
        left, low = self._px(x, y)
        left += sideways * away - {"left": 0.0, "center": wide / 2, "right": wide}[xanchor]
        low += upward * away - {"bottom": 0.0, "middle": tall / 2, "top": tall}[yanchor]
        return left, low, left + wide, low + tall

    def _overlap(self, box: tuple[float, float, float, float]) -> float:
        left, low, right, high = box
        outside = max(0.0, -left) + max(0.0, right - self.width)
        outside += max(0.0, -low) + max(0.0, high - self.height)
        shared = sum(
            max(0.0, min(right, b[2]) - max(left, b[0]))
            * max(0.0, min(high, b[3]) - max(low, b[1]))
            for b in self.taken
        )
        return shared + 40 * outside
