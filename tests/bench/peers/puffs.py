"""Rotated normal clouds on a grid: an exponential at every node of each puff's bounding box."""
import numpy as np
from timing import milliseconds, write

CUT2 = 2 * np.log(1e7)
held = {}


def setup(n, puffs):
    held.update(n=n, puffs=np.array(puffs))


def box_sum(dtype):
    n = held["n"]
    out = np.zeros((n, n), dtype)
    axis = np.arange(n, dtype=dtype)
    cut = dtype(CUT2)
    for x, y, sxx, sxy, syy, amount in held["puffs"]:
        det = sxx * syy - sxy * sxy
        half_x, half_y = np.sqrt(CUT2 * sxx), np.sqrt(CUT2 * syy)
        i0, i1 = max(0, int(np.ceil(x - half_x))), min(n - 1, int(np.floor(x + half_x)))
        j0, j1 = max(0, int(np.ceil(y - half_y))), min(n - 1, int(np.floor(y + half_y)))
        if i0 > i1 or j0 > j1:
            continue
        dx = axis[i0:i1 + 1] - dtype(x)
        dy = (axis[j0:j1 + 1] - dtype(y))[:, None]
        r2 = dx * dx * dtype(syy / det) - dx * dy * dtype(2 * sxy / det) + dy * dy * dtype(sxx / det)
        out[j0:j1 + 1, i0:i1 + 1] += np.where(r2 < cut, dtype(amount / (2 * np.pi * np.sqrt(det))) * np.exp(dtype(-0.5) * r2), dtype(0))
    return out


def result(path):
    write(box_sum(np.float64), path)


def time_box64(repetitions):
    return milliseconds(lambda: box_sum(np.float64), repetitions)


def time_box32(repetitions):
    return milliseconds(lambda: box_sum(np.float32), repetitions)
