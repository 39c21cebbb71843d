"""Times scipy's SuperLU on the plane finite-element matrix of sparse.bench.ts, one request a line.

Request: factor or solve, and the number of squares along a side; answers milliseconds.
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


def matrix(side):
    """Sum over quadratic triangles, two a square, of 6 on the diagonal and -1 off it; the rim held fixed."""
    across = 2 * side + 1
    number = np.full((across, across), -1)
    number[1:-1, 1:-1] = np.arange((across - 2) ** 2).reshape(across - 2, across - 2)
    corners = [
        [(0, 0), (2, 0), (2, 2), (1, 0), (2, 1), (1, 1)],
        [(0, 0), (2, 2), (0, 2), (1, 1), (1, 2), (0, 1)],
    ]
    y, x = np.meshgrid(2 * np.arange(side), 2 * np.arange(side), indexing="ij")
    local = np.where(np.eye(6) > 0, 6.0, -1.0).ravel()
    rows, columns, values = [], [], []
    for shape in corners:
        nodes = np.stack([number[(y + b).ravel(), (x + a).ravel()] for a, b in shape], axis=1)
        i = np.repeat(nodes, 6, axis=1).ravel()
        j = np.tile(nodes, (1, 6)).ravel()
        free = (i >= 0) & (j >= 0)
        rows.append(i[free])
        columns.append(j[free])
        values.append(np.tile(local, len(nodes))[free])
    n = (across - 2) ** 2
    entries = (np.concatenate(values), (np.concatenate(rows), np.concatenate(columns)))
    return sparse.coo_matrix(entries, shape=(n, n)).tocsc()


def symmetric(a):
    return linalg.splu(a, permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options={"SymmetricMode": True})


print("scipy", scipy.__version__, flush=True)
kept = {}
for line in sys.stdin:
    what, side = line.split()
    if side not in kept:
        a = matrix(int(side))
        kept[side] = (a, symmetric(a), np.ones((a.shape[0], 4)))
    a, factor, right = kept[side]
    start = time.perf_counter()
    if what == "factor":
        symmetric(a)
    else:
        factor.solve(right)
    print(1000 * (time.perf_counter() - start), flush=True)
