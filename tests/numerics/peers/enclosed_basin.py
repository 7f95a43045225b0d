"""
Reference values for a closed rectangular basin with a gyre: cosine-Galerkin in space, matrix exponential in time.

dc/dt + u . grad c = Kx c_xx + Ky c_yy with no flux through the sides, stream function
psi = A sin(pi x/L) sin(pi y/W), u = dpsi/dy, v = -dpsi/dx. In the basis cos(m pi x/L) cos(n pi y/W) spreading is
diagonal and the gyre couples (m, n) to (m +- 1, n +- 1) exactly: a sparse matrix, applied by scipy's action of the
matrix exponential. No grid, no limiter, no splitting: another route than finite volumes.

Writes the fixture, or with "compare" prints the values as JSON for a test to hold against the stored ones.
Case invented.
"""
import json
import sys

import numpy
import scipy
from scipy.sparse import coo_matrix
from scipy.sparse.linalg import expm_multiply

CASE = {
    "lengthM": 1000.0,
    "widthM": 600.0,
    "streamM2s": 12.0,
    "kxM2s": 1.0,
    "kyM2s": 0.4,
    "cloud": {"xM": 300.0, "yM": 200.0, "sigmaM": 60.0},
    "timesS": [5000.0, 15000.0, 40000.0],
    "placesM": [[300.0, 200.0], [500.0, 100.0], [800.0, 300.0], [500.0, 500.0], [200.0, 300.0], [500.0, 300.0], [50.0, 50.0], [950.0, 550.0]],
}
MODES = 56


def start(modes):
    """Cosine coefficients of the normal cloud, its images in the four sides included: exact for the even extension."""
    length, width, cloud = CASE["lengthM"], CASE["widthM"], CASE["cloud"]
    def along(x0, size):
        m = numpy.arange(modes)
        decay = numpy.exp(-0.5 * (m * numpy.pi * cloud["sigmaM"] / size) ** 2)
        return numpy.where(m == 0, 1.0, 2.0) / size * decay * numpy.cos(m * numpy.pi * x0 / size)
    return numpy.outer(along(cloud["xM"], length), along(cloud["yM"], width)).ravel()


def generator(modes):
    length, width, a = CASE["lengthM"], CASE["widthM"], CASE["streamM2s"]
    p, q = numpy.pi / length, numpy.pi / width
    rows, cols, values = [], [], []
    def put(m, n, m0, n0, value):
        # cos(-t) = cos(t): a mode below zero is its mirror.
        m, n = abs(m), abs(n)
        if m < modes and n < modes and value != 0.0:
            rows.append(m * modes + n)
            cols.append(m0 * modes + n0)
            values.append(value)
    for m in range(modes):
        for n in range(modes):
            put(m, n, m, n, -(CASE["kxM2s"] * (m * p) ** 2 + CASE["kyM2s"] * (n * q) ** 2))
            # u = A q sin(px) cos(qy), v = -A p cos(px) sin(qy); c = cos(m px) cos(n qy).
            # -u c_x = A q m p sin(px) sin(m px) cos(qy) cos(n qy); -v c_y = -A p n q cos(px) cos(m px) sin(qy) sin(n qy).
            for s in (-1, 1):
                for t in (-1, 1):
                    # sin sin -> (cos(m-1) - cos(m+1))/2; cos cos -> (cos(n-1) + cos(n+1))/2.
                    put(m + s, n + t, m, n, a * p * q * (m * (-s) - n * (-t)) / 4)
    size = modes * modes
    return coo_matrix((values, (rows, cols)), shape=(size, size)).tocsr()


def values(modes):
    matrix = generator(modes)
    state = start(modes)
    m = numpy.arange(modes)
    out, now = [], 0.0
    for time in CASE["timesS"]:
        state = expm_multiply(matrix * (time - now), state)
        now = time
        table = state.reshape(modes, modes)
        out.append([float(numpy.cos(m * numpy.pi * x / CASE["lengthM"]) @ table @ numpy.cos(m * numpy.pi * y / CASE["widthM"])) for x, y in CASE["placesM"]])
    return out


if __name__ == "__main__":
    found = values(MODES)
    if len(sys.argv) > 1 and sys.argv[1] == "compare":
        print(json.dumps(found))
    else:
        finer = values(MODES + 24)
        error = float(numpy.max(numpy.abs(numpy.array(finer) - numpy.array(found))) / numpy.max(found))
        print(json.dumps({"madeBy": "tests/numerics/peers/enclosed_basin.py", "numpy": numpy.__version__, "scipy": scipy.__version__, "modes": MODES, "changeWithMoreModes": error, "case": CASE, "valuesPerM2": found}, indent=1))
