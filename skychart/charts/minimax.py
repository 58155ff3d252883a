"""The stops that follow a curve of colours best: the least possible largest error, found exactly.

A stop may stand at any node of the curve, has the curve's own colour there, and between two stops the tristimulus
values run linearly. The error of a piece between two nodes does not depend on the other stops, so the best stops are
the path through the nodes whose worst piece is least: dynamic programming over the number of pieces (Bellman R. and
Roth R. 1969, Curve fitting by segmented straight lines, J. Am. Stat. Assoc. 64, 1079-1084).

Of most pieces only a lower bound of the error is ever needed, from a few of their points. A piece is looked at more
closely once a path that may still be the best leads over it; when the best path by these bounds has been measured at
every point, no other can beat it.
"""

from collections.abc import Callable

import numpy as np

from skychart.colour.differences import delta_e_2000_of_lab, lab

_PROBES = (3, 12)  # points of a piece, evenly between its ends, that bound its error from below
_FULL = len(_PROBES)
_BATCH = 600


class Pieces:
    """Errors of all pieces of a curve, found as far as a question needs them.

    `position` (n,) ascends; `XYZ` (n, 3) is the curve there, in the unit of `white_XYZ`, and `shown` turns tristimulus
    values into those that are compared; `node` (m,) are the indices where stops may stand, both ends among them.
    `worst` (start, end) is a lower bound of the error of a piece unless `level` says that it was measured in full; inf
    where the end is not behind the start.
    """

    def __init__(
        self,
        position: np.ndarray,
        XYZ: np.ndarray,
        node: np.ndarray,
        white_XYZ: np.ndarray,
        shown: Callable[[np.ndarray], np.ndarray] = np.asarray,
    ) -> None:
        self.position, self.XYZ, self.node, self._white, self._shown = position, XYZ, node, white_XYZ, shown
        self._lab = lab(shown(XYZ), white_XYZ)
        self.worst = np.full((len(node), len(node)), np.inf)
        self.level = np.full(self.worst.shape, _FULL)
        start, end = np.triu_indices(len(node), 1)
        self.worst[start, end], self.level[start, end] = 0, -1
        self._raise(start, end, 0)

    def error(self, path: np.ndarray) -> float:
        """Largest error of the stops at the nodes of `path`, at every point of the curve."""
        self._raise(path[:-1], path[1:], _FULL)
        return float(self.worst[path[:-1], path[1:]].max())

    def best(self, count: int) -> np.ndarray:
        """Nodes of the `count` stops whose largest error is least, both ends among them."""
        while True:
            path = self._path(self._reach(count - 1))
            if self._measured(path):
                return path
            self._look_closer(path, self.error(path))

    def fewest(self, limit: float, most: int) -> np.ndarray | None:
        """Nodes of the fewest stops whose largest error is at most `limit`; None if that takes more than `most`."""
        while True:
            ahead = self._reach(most - 1)
            enough = np.flatnonzero(ahead[:, -1] <= limit)
            if not len(enough):
                return None
            path = self._path(ahead[: enough[0] + 1])
            if self._measured(path):
                return path
            if not self._look_closer(path, limit):
                self.error(path)

    def _look_closer(self, path: np.ndarray, limit: float) -> int:
        """Bound better the pieces over which a path of as many stops may keep to `limit`; how many there were."""
        pieces = len(path) - 1
        ahead, behind = self._reach(pieces - 1), self._reach(pieces - 1, backward=True)
        through = np.min([np.maximum(ahead[k][:, None], behind[pieces - 1 - k]) for k in range(pieces)], axis=0)
        through = np.maximum(through, self.worst)
        start, end = np.nonzero((through <= limit) & (self.level < _FULL - 1))
        chosen = np.argsort(through[start, end], kind="stable")[:_BATCH]
        self._raise(start[chosen], end[chosen], _FULL - 1)
        return len(chosen)

    def _measured(self, path: np.ndarray) -> bool:
        return bool((self.level[path[:-1], path[1:]] == _FULL).all())

    def _raise(self, start: np.ndarray, end: np.ndarray, level: int) -> None:
        """Find the errors of pieces between nodes at the points of a level, or at all points of the curve."""
        lower = self.level[start, end] < level
        start, end = start[lower], end[lower]
        if not len(start):
            return
        inside = self.node[end] - self.node[start] - 1
        wanted = inside if level == _FULL else np.minimum(inside, _PROBES[level])
        filled = wanted > 0
        self.level[start, end] = np.where(wanted == inside, _FULL, level)
        start, end, inside, wanted = start[filled], end[filled], inside[filled], wanted[filled]
        if not len(start):
            return
        heads = np.cumsum(wanted) - wanted
        nth = np.arange(wanted.sum()) - np.repeat(heads, wanted) + 1
        piece = np.repeat(np.arange(len(start)), wanted)
        point = self.node[start][piece] + (nth * (inside[piece] + 1) + wanted[piece] // 2) // (wanted[piece] + 1)
        errors = self._errors(start[piece], end[piece], point)
        self.worst[start, end] = np.maximum(self.worst[start, end], np.maximum.reduceat(errors, heads))

    def _reach(self, pieces: int, backward: bool = False) -> np.ndarray:
        """Least worst error with 0 to `pieces` pieces from the first node to each, or from each to the last."""
        cost = self.worst.T if backward else self.worst
        found = np.full((pieces + 1, len(self.node)), np.inf)
        found[0, -1 if backward else 0] = 0
        for k in range(pieces):
            found[k + 1] = np.maximum(found[k][:, None], cost).min(axis=0)
        return found

    def _path(self, ahead: np.ndarray) -> np.ndarray:
        """Nodes of the best path to the last node."""
        path = [len(self.node) - 1]
        for reached in ahead[-2::-1]:
            path.append(int(np.argmin(np.maximum(reached, self.worst[:, path[-1]]))))
        return np.array(path[::-1])

    def _errors(self, start: np.ndarray, end: np.ndarray, point: np.ndarray) -> np.ndarray:
        """CIEDE2000 at points of the curve between the curve and the pieces from `start` to `end`, all (k,)."""
        first, last = self.node[start], self.node[end]
        share = (self.position[point] - self.position[first]) / (self.position[last] - self.position[first])
        straight = self.XYZ[first] + share[:, None] * (self.XYZ[last] - self.XYZ[first])
        return delta_e_2000_of_lab(lab(self._shown(straight), self._white), self._lab[point])
