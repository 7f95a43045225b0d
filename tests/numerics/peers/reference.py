"""Reference values by other routes than the engine's: ordinary differential equations, quadrature, Fourier inversion and
sparse finite volumes with numpy and scipy.

    /usr/bin/python3 tests/numerics/peers/reference.py            prints every case as JSON
    /usr/bin/python3 tests/numerics/peers/reference.py --write    stores them in tests/fixtures/reference/

Nothing here shares a formula with the engine's closed forms: only the differential equations are common to both.
SI units throughout. Figures of the cases are invented unless a source is named.
"""
import json
import os
import sys

import numpy as np
import scipy
from scipy import sparse
from scipy.integrate import quad, solve_ivp
from scipy.sparse.linalg import splu
from scipy.special import ive

FIXTURES = os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "..", "fixtures", "reference")


def tidal_ellipse():
    """Cloud in a residual and a tidal ellipse, its tensor turning with the current: moments by an ordinary differential
    equation, the cloud by inverting its transform exp(-k V k / 2) on a grid of wave numbers."""
    residual, major, minor, period, max_flood = (0.05, -0.02), 0.6, 0.15, 44712.0, 5000.0
    along, across, amount, depth = 12.0, 1.5, 500.0, 8.0
    w = 2 * np.pi / period

    def velocity(t):
        # Flood toward 070: the long axis of the ellipse lies 20 degrees north of east, minor axis anticlockwise.
        e = (np.sin(np.radians(70.0)), np.cos(np.radians(70.0)))
        a, b = major * np.cos(w * (t - max_flood)), minor * np.sin(w * (t - max_flood))
        return residual[0] + a * e[0] - b * e[1], residual[1] + a * e[1] + b * e[0]

    def slope(t, _):
        u, v = velocity(t)
        c, s = u / np.hypot(u, v), v / np.hypot(u, v)
        return [u, v, 2 * (along * c * c + across * s * s), 2 * (along - across) * s * c, 2 * (along * s * s + across * c * c)]

    times = [6000.0, 20000.0, 50000.0, 90000.0]
    solved = solve_ivp(slope, (0, times[-1]), np.zeros(5), method="DOP853", rtol=1e-12, atol=1e-9, t_eval=times, max_step=200)
    rows = []
    for t, (x, y, xx, xy, yy) in zip(times, solved.y.T):
        dx, dy = 300.0, -200.0
        # Even spacing well inside the period of the alias: 14 standard deviations each way.
        reach = 14 * np.sqrt(max(xx, yy)) + np.hypot(dx, dy)
        step = 2 * np.pi / (2 * reach)
        n = int(np.ceil(9 / np.sqrt(min(xx, yy) - xy * xy / max(xx, yy)) / step))
        k = step * np.arange(-n, n + 1)
        kx, ky = np.meshgrid(k, k)
        transform = np.exp(-0.5 * (xx * kx * kx + 2 * xy * kx * ky + yy * ky * ky)) * np.cos(kx * dx + ky * dy)
        value = amount / depth * transform.sum() * step * step / (2 * np.pi) ** 2
        rows.append({"atS": t, "x": x, "y": y, "xx": xx, "xy": xy, "yy": yy, "offX": dx, "offY": dy, "concentration": value})
    return {
        "residual": list(residual), "majorMps": major, "minorMps": minor, "floodTowardDeg": 70.0, "periodS": period, "maxFloodS": max_flood,
        "alongM2s": along, "acrossM2s": across, "amountKg": amount, "depthM": depth, "rows": rows,
    }


def slug(x, t, speed, dispersion):
    return np.exp(-((x - speed * t) ** 2) / (4 * dispersion * t)) / np.sqrt(4 * np.pi * dispersion * t)


def finite_release():
    """A steady release of an hour along a line, with loss: quadrature over the age of what arrives."""
    rate, duration, area, speed, dispersion, loss = 0.5, 3600.0, 40.0, 0.4, 15.0, 3e-5

    def value(x, t):
        youngest = max(0.0, t - duration)
        middle = np.clip(abs(x) / speed, youngest, t)
        width = np.sqrt(2 * dispersion * max(middle, 1.0)) / speed
        cuts = sorted({youngest, t, *[float(np.clip(middle + k * width, youngest, t)) for k in (-8, -3, -1, 0, 1, 3, 8)]})
        total = sum(quad(lambda a: np.exp(-loss * a) * slug(x, a, speed, dispersion) if a > 0 else 0.0, lo, hi, epsabs=0, epsrel=1e-13, limit=400)[0] for lo, hi in zip(cuts, cuts[1:]))
        return rate / area * total

    places = [(2000, 3000), (2000, 6000), (2000, 9000), (-60, 3000), (500, 2000), (5000, 14000)]
    return {
        "rateKgS": rate, "durationS": duration, "areaM2": area, "speedMps": speed, "dispersionM2s": dispersion, "lossPerS": loss,
        "rows": [{"x": x, "atS": t, "concentration": value(x, t)} for x, t in places],
    }


def invert(transform, times, period, most):
    """f(t) = 1/pi int Re G(i w) exp(i w t) dw by the trapezoidal rule, which converges faster than any power here."""
    step = 2 * np.pi / period
    w = step * np.arange(0, int(most / step) + 1)
    g = transform(1j * w)
    g[0] *= 0.5
    return [float(step / np.pi * np.real(g * np.exp(1j * w * t)).sum()) for t in times]


def transient_storage():
    """Passage of a slug through a reach with dead zones (equations of Bencala & Walters 1983), by Fourier inversion, and
    where there is no loss also by the integral over the time spent in motion (Bessel I1); both are held to agree."""
    length, speed, dispersion, exchange, ratio = 2000.0, 0.3, 4.0, 2e-4, 0.25
    back = exchange / ratio
    times = [6000.0, 7000.0, 8000.0, 9000.0, 12000.0, 16000.0]

    def psi(s, loss=0.0, dead_loss=0.0):
        return s + loss + exchange * (1 - back / (s + back + dead_loss))

    def flux(s, **loss):
        return np.exp(length * speed / (2 * dispersion) * (1 - np.sqrt(1 + 4 * dispersion * psi(s, **loss) / speed**2)))

    def resident(s):
        # Unbounded reach, times speed x area / amount.
        return flux(s) / np.sqrt(1 + 4 * dispersion * psi(s) / speed**2)

    def moving(t):
        return length / np.sqrt(4 * np.pi * dispersion * t**3) * np.exp(-((length - speed * t) ** 2) / (4 * dispersion * t))

    def by_bessel(t):
        def part(moved):
            z = 2 * np.sqrt(exchange * back * moved * (t - moved))
            rest = np.exp(-((np.sqrt(exchange * moved) - np.sqrt(back * (t - moved))) ** 2))
            return moving(moved) * rest * np.sqrt(exchange * back * moved / (t - moved)) * ive(1, z)

        middle = min(length / speed, 0.99 * t)
        total = sum(quad(part, lo, hi, epsabs=1e-18, epsrel=1e-11, limit=400)[0] for lo, hi in ((1.0, 0.7 * middle), (0.7 * middle, middle), (middle, t - 1e-9)))
        return np.exp(-exchange * t) * moving(t) + total

    passage = invert(flux, times, 60000.0, 0.02)
    worst = max(abs(by_bessel(t) / f - 1) for t, f in zip(times, passage))
    assert worst < 1e-7, f"two routes to the passage differ by {worst}"
    return {
        "lengthM": length, "speedMps": speed, "dispersionM2s": dispersion, "exchangePerS": exchange, "areaRatio": ratio,
        "rows": [{"atS": t, "passagePerS": f, "residentPerS": r} for t, f, r in zip(times, passage, invert(resident, times, 60000.0, 0.02))],
        "withLoss": {"lossPerS": 1e-5, "deadLossPerS": 3e-5, "atS": 8000.0, "passagePerS": invert(lambda s: flux(s, loss=1e-5, dead_loss=3e-5), [8000.0], 60000.0, 0.02)[0]},
    }


def reach_chain():
    """Passage through three unlike reaches: transforms multiply; Fourier inversion."""
    reaches = [(3000.0, 0.4, 10.0), (5000.0, 0.6, 25.0), (8000.0, 0.5, 15.0)]
    times = [28000.0, 31000.0, 32000.0, 34000.0, 37000.0]

    def flux(s):
        return np.exp(sum(l * u / (2 * d) * (1 - np.sqrt(1 + 4 * d * s / u**2)) for l, u, d in reaches))

    def resident(s):
        # In the water at the end of the last reach, which goes on unchanged; times discharge / amount.
        return flux(s) / np.sqrt(1 + 4 * reaches[-1][2] * s / reaches[-1][1] ** 2)

    return {
        "reaches": [{"lengthM": l, "speedMps": u, "dispersionM2s": d} for l, u, d in reaches],
        "rows": [{"atS": t, "passagePerS": f, "residentPerS": r} for t, f, r in zip(times, invert(flux, times, 120000.0, 0.01), invert(resident, times, 120000.0, 0.01))],
    }


def spread_between_walls(start, tau):
    """d p / d tau = d2 p / d y2 on 0..1 without flux at the ends, cell means; by the eigenvectors of the cells' matrix."""
    n = len(start)
    matrix = (np.diag(np.full(n, -2.0)) + np.diag(np.ones(n - 1), 1) + np.diag(np.ones(n - 1), -1)) * n * n
    matrix[0, 0] = matrix[-1, -1] = -n * n
    values, vectors = np.linalg.eigh(matrix)
    return vectors @ (np.exp(values * tau) * (vectors.T @ start))


def read_at(cells, y):
    """Value at a place from cell means: at a wall by an even parabola, inside by a parabola through three cells."""
    n = len(cells)
    if y in (0.0, 1.0):
        a, b = (cells[0], cells[1]) if y == 0.0 else (cells[-1], cells[-2])
        return (9 * a - b) / 8
    j = int(np.clip(y * n, 1, n - 2))
    z = y * n - 0.5 - j
    a, b, c = cells[j - 1], cells[j], cells[j + 1]
    return b + z * (c - a) / 2 + z * z * (a - 2 * b + c) / 2


def extrapolated(run, n):
    """Second order in the cells: two widths give fourth."""
    return (4 * run(2 * n) - run(n)) / 3


def lateral_mixing():
    """A steady release across a river, in shares of discharge: from a bank, from within, and through a confluence where a
    clean tributary takes the left side. Finite volumes across and their eigenvectors; no image and no cosine series."""
    places = [0.0, 0.25, 0.5, 0.75, 1.0]

    def point(n, y0):
        # A start of standard deviation 0.02 about the place, folded at the walls, so that two cell widths can be compared.
        y = (np.arange(n) + 0.5) / n
        start = sum(np.exp(-((y - s) ** 2) / (2 * 0.02**2)) for s in (y0, -y0, 2 - y0))
        return start / start.mean()

    rows = []
    for y0 in (0.0, 0.3, 0.5):
        for tau in (0.005, 0.02, 0.1, 0.4):
            # The start already holds tau = 0.02**2 / 2.
            values = extrapolated(lambda n: np.array([read_at(spread_between_walls(point(n, y0), tau - 2e-4), y) for y in places]), 300)
            rows.append({"source": y0, "tau": tau, "at": places, "overEven": values.tolist()})

    share, above, below = 0.7, 0.03, 0.05
    places_below = [0.0, 0.15, 0.45, 0.7, 1.0]

    def through(n):
        up = spread_between_walls(point(n, 0.0), above - 2e-4)
        # The river keeps its order on the right; the tributary, 30 % of the joined water, is clean and on the left.
        joined = np.concatenate([np.zeros(int(round(n / share)) - n), up])
        joined /= joined.mean()
        return np.array([read_at(spread_between_walls(joined, below), y) for y in places_below])

    return {
        "rows": rows,
        "confluence": {"share": share, "tributaryOn": "left", "tauAbove": above, "tauBelow": below, "at": places_below, "overEven": extrapolated(through, 280).tolist()},
    }


def bounded_basin():
    """Spreading in a still basin with a corner (a square of 4 km less its north-eastern quarter): sparse finite volumes
    and the trapezoidal rule in time, extrapolated from two grids. Checked here on the whole square against the product of
    two one-dimensional solutions before it is used on the corner."""
    side, mixing, depth, amount = 4000.0, 100.0, 5.0, 1000.0
    source, sigma = (1000.0, 3000.0), 200.0
    times = [6000.0, 20000.0, 60000.0]
    places = [(1000.0, 3000.0), (1000.0, 1000.0), (1900.0, 1900.0), (3000.0, 1000.0)]

    def run(n, is_wet, steps):
        h = side / n
        c = (np.arange(n) + 0.5) * h
        x, y = np.meshgrid(c, c)
        wet = is_wet(x, y)
        index = -np.ones((n, n), dtype=int)
        index[wet] = np.arange(wet.sum())
        pairs = [(index[:, :-1].ravel(), index[:, 1:].ravel()), (index[:-1].ravel(), index[1:].ravel())]
        i = np.concatenate([a for a, _ in pairs])
        j = np.concatenate([b for _, b in pairs])
        kept = (i >= 0) & (j >= 0)
        i, j = i[kept], j[kept]
        m = int(wet.sum())
        face = np.full(len(i), mixing / h**2)
        matrix = sparse.coo_matrix((np.concatenate([face, face, -face, -face]), (np.concatenate([i, j, i, j]), np.concatenate([j, i, i, j]))), shape=(m, m)).tocsc()
        state = np.exp(-((x - source[0]) ** 2 + (y - source[1]) ** 2) / (2 * sigma**2))[wet]
        state *= amount / (state.sum() * h * h * depth)
        out = []
        now = 0.0
        for t in times:
            dt = (t - now) / steps
            solve = splu((sparse.identity(m) - dt / 2 * matrix).tocsc()).solve
            explicit = (sparse.identity(m) + dt / 2 * matrix).tocsc()
            for _ in range(steps):
                state = solve(explicit @ state)
            now = t
            grid = np.full((n, n), np.nan)
            grid[wet] = state
            # Places lie on corners of four cells on every grid used.
            out.append([float(np.mean([grid[int(round(py / h)) - b, int(round(px / h)) - a] for a in (0, 1) for b in (0, 1)])) for px, py in places])
        return np.array(out)

    def fine(is_wet):
        return (4 * run(160, is_wet, 120) - run(80, is_wet, 60)) / 3

    def line(at, start, t):
        def one(n):
            c = (np.arange(n) + 0.5) / n
            first = np.exp(-((c * side - start) ** 2) / (2 * sigma**2))
            cells = spread_between_walls(first / first.mean(), mixing * t / side**2)
            k = int(round(at / side * n))
            return (cells[k - 1] + cells[k]) / 2

        return extrapolated(one, 400) / side

    whole = fine(lambda x, y: np.ones_like(x, dtype=bool))
    exact = np.array([[amount / depth * line(px, source[0], t) * line(py, source[1], t) for px, py in places] for t in times])
    worst = np.abs(whole / exact - 1).max()
    assert worst < 2e-4, f"finite volumes on the whole square err by {worst}"
    values = fine(lambda x, y: ~((x > side / 2) & (y > side / 2)))
    return {
        "sideM": side, "mixingM2s": mixing, "depthM": depth, "amountKg": amount, "source": list(source), "sigmaM": sigma, "errorOnSquare": float(worst),
        "rows": [{"atS": t, "x": px, "y": py, "concentration": float(v)} for t, row in zip(times, values) for (px, py), v in zip(places, row)],
    }


CASES = {
    "tidal-ellipse": tidal_ellipse,
    "finite-release": finite_release,
    "transient-storage": transient_storage,
    "reach-chain": reach_chain,
    "lateral-mixing": lateral_mixing,
    "bounded-basin": bounded_basin,
}


def main():
    made = {name: {"about": " ".join(case.__doc__.split()), "madeBy": "tests/numerics/peers/reference.py --write", **case()} for name, case in CASES.items()}
    if "--write" in sys.argv:
        os.makedirs(FIXTURES, exist_ok=True)
        for name, values in made.items():
            with open(os.path.join(FIXTURES, name + ".json"), "w", encoding="utf-8") as file:
                json.dump(values, file, indent=1)
                file.write("\n")
    else:
        json.dump({"versions": {"numpy": np.__version__, "scipy": scipy.__version__}, "cases": made}, sys.stdout)


main()
