"""The extrema of a periodic history of two beats a cycle, and its period."""

import numpy as np


def extrema(time, value):
    """Times, values and kinds (+1 maximum, -1 minimum) of the turning points, each of a parabola through three rows."""
    found = []
    for k in range(1, len(time) - 1):
        if (value[k] - value[k - 1]) * (value[k + 1] - value[k]) >= 0:
            continue
        a, b, c = np.polyfit(time[k - 1 : k + 2] - time[k], value[k - 1 : k + 2], 2)
        found.append((time[k] - b / (2 * a), c - b * b / (4 * a), -np.sign(a)))
    return found


class Beats:
    """The last `cycles` cycles. A cycle: the larger maximum, the minimum after it, the smaller maximum, its minimum."""

    def __init__(self, time, value, cycles):
        points = extrema(time, value)
        while points[-1][2] > 0:  # end with a minimum
            points.pop()
        points = points[-4 * (cycles + 1) :]
        if np.mean([p[1] for p in points[0::4]]) < np.mean([p[1] for p in points[2::4]]):
            points = points[2:-2]
        else:
            points = points[4:]
        assert all(p[2] == (1 if k % 2 == 0 else -1) for k, p in enumerate(points)), "not one maximum a beat"
        self.cycles = len(points) // 4
        values = np.array([p[1] for p in points]).reshape(self.cycles, 4)
        self.maximum_1, self.minimum_1, self.maximum_2, self.minimum_2 = values.mean(axis=0)
        self.wander = np.ptp(values, axis=0)  # of each extremum over the cycles: 0 when two beats make a cycle
        times = np.array([p[0] for p in points]).reshape(self.cycles, 4)
        self.period = np.mean((times[-1] - times[0]) / (self.cycles - 1))
