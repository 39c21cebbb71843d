"""Times scipy on the networks of network.bench.ts, one request a line: form and size; answers milliseconds.

Each time covers building the sparse matrix from the arrays of channels and one solve (SuperLU).
"""
import os

os.environ["OMP_NUM_THREADS"] = "1"
os.environ["OPENBLAS_NUM_THREADS"] = "1"

import sys
import time

import numpy as np
import scipy
import scipy.sparse as sparse
import scipy.sparse.linalg as linalg


def conductance(count):
    return 1 / (0.5 + (np.arange(count) * 7919 % 1000) / 1000)


def grid(side):
    """Channels of a square grid; the first corner is driven through tubing, the last is at zero."""
    number = np.arange(side * side).reshape(side, side)
    a = np.concatenate([number[:, :-1].ravel(), number[:-1, :].ravel()])
    b = np.concatenate([number[:, 1:].ravel(), number[1:, :].ravel()])
    ground = np.zeros(side * side)
    ground[0] = 10.0
    ground[-1] = 10.0
    return a, b, ground


def tree(nodes):
    """A binary tree; the root is driven and every tip lets out through tubing."""
    b = np.arange(1, nodes)
    a = (b - 1) // 2
    ground = np.zeros(nodes)
    ground[0] = 10.0
    ground[(nodes - 1) // 2 :] = 1.0
    return a, b, ground


def run(a, b, g, ground, right):
    start = time.perf_counter()
    every = np.arange(len(ground))
    rows = np.concatenate([a, b, a, b, every])
    columns = np.concatenate([a, b, b, a, every])
    values = np.concatenate([g, g, -g, -g, ground])
    matrix = sparse.coo_matrix((values, (rows, columns)), shape=(len(ground), len(ground))).tocsc()
    linalg.spsolve(matrix, right)
    return 1000 * (time.perf_counter() - start)


print("scipy", scipy.__version__, flush=True)
kept = {}
for line in sys.stdin:
    form, size = line.split()
    if (form, size) not in kept:
        a, b, ground = {"grid": grid, "tree": tree}[form](int(size))
        right = np.zeros(len(ground))
        right[0] = 10000.0
        kept[form, size] = (a, b, conductance(len(a)), ground, right)
    print(run(*kept[form, size]), flush=True)
