"""Shared by the peers: repeated timing, versions and raw arrays in files."""
import time
import numpy as np


def versions():
    import scipy
    return {"numpy": np.__version__, "scipy": scipy.__version__}


def milliseconds(work, repetitions):
    """Processor time of this process, one thread."""
    start = time.process_time()
    for _ in range(repetitions):
        work()
    return (time.process_time() - start) * 1e3 / repetitions


def write(array, path):
    np.ascontiguousarray(array).tofile(path)
