"""The masked five-point problem with a sparse direct solver."""
import numpy as np
from scipy.sparse import coo_matrix
from scipy.sparse.linalg import spsolve
from timing import milliseconds, write

held = {}


def setup(n, folder):
    def read(name, rows, columns):
        return np.fromfile(f"{folder}/{name}", dtype=np.float64).reshape(rows, columns)
    x, y, b = read("x", n, n + 1), read("y", n + 1, n), read("b", n, n)
    diagonal = x[:, 1:] + x[:, :-1] + y[1:] + y[:-1]
    open_cells = diagonal > 0
    number = np.full((n, n), -1)
    number[open_cells] = np.arange(open_cells.sum())
    rows, columns, values = [number[open_cells]], [number[open_cells]], [diagonal[open_cells]]
    for k, here, there in ((x[:, 1:-1], number[:, :-1], number[:, 1:]), (y[1:-1], number[:-1], number[1:])):
        used = k > 0
        for a, c in ((here, there), (there, here)):
            rows.append(a[used])
            columns.append(c[used])
            values.append(-k[used])
    size = int(open_cells.sum())
    matrix = coo_matrix((np.concatenate(values), (np.concatenate(rows), np.concatenate(columns))), shape=(size, size)).tocsc()
    held.update(n=n, open_cells=open_cells, matrix=matrix, b=b[open_cells])
    return size


def result(path):
    out = np.zeros((held["n"], held["n"]))
    out[held["open_cells"]] = spsolve(held["matrix"], held["b"])
    write(out, path)


def time_spsolve(repetitions):
    return milliseconds(lambda: spsolve(held["matrix"], held["b"]), repetitions)
