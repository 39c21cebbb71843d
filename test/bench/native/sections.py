"""Times scipy on the meshes of section.bench.ts, one request a line.

"mesh" and JSON keeps a mesh of six-node triangles (x, y, triangles, wall nodes); "solve" assembles and solves
-div grad u = 1 on it with quadratic elements, u = 0 on the wall, and answers milliseconds; "flow" answers the
integral of u.
"""
import os

os.environ["OMP_NUM_THREADS"] = "1"
os.environ["OPENBLAS_NUM_THREADS"] = "1"

import json
import sys
import time

import numpy as np
import scipy
import scipy.sparse as sparse
import scipy.sparse.linalg as linalg

A, B = 0.445948490915965, 0.091576213509771
U = np.array([A, 1 - 2 * A, A, B, 1 - 2 * B, B])
V = np.array([A, A, 1 - 2 * A, B, B, 1 - 2 * B])
WEIGHT = np.repeat([0.223381589678011, 0.109951743655322], 3) / 2
W = 1 - U - V
VALUE = np.array([W * (2 * W - 1), U * (2 * U - 1), V * (2 * V - 1), 4 * W * U, 4 * U * V, 4 * V * W])
ZERO = 0 * U
DU = np.array([1 - 4 * W, 4 * U - 1, ZERO, 4 * (W - U), 4 * V, -4 * V])
DV = np.array([1 - 4 * W, ZERO, 4 * V - 1, -4 * U, 4 * U, 4 * (W - V)])


def solve(mesh):
    start = time.perf_counter()
    x, y, triangles, free = mesh
    tx, ty = x[triangles], y[triangles]
    xu, xv, yu, yv = tx @ DU, tx @ DV, ty @ DU, ty @ DV
    det = xu * yv - xv * yu
    gx = (DU[None] * yv[:, None] - DV[None] * yu[:, None]) / det[:, None]
    gy = (DV[None] * xu[:, None] - DU[None] * xv[:, None]) / det[:, None]
    w = WEIGHT * det
    k = np.einsum("tq,tiq,tjq->tij", w, gx, gx) + np.einsum("tq,tiq,tjq->tij", w, gy, gy)
    rows = np.repeat(triangles, 6, axis=1).ravel()
    columns = np.tile(triangles, (1, 6)).ravel()
    matrix = sparse.coo_matrix((k.ravel(), (rows, columns)), shape=(len(x), len(x))).tocsc()
    load = np.bincount(triangles.ravel(), (w @ VALUE.T).ravel(), len(x))
    u = np.zeros(len(x))
    u[free] = linalg.splu(
        matrix[free][:, free], permc_spec="MMD_AT_PLUS_A", options={"SymmetricMode": True}, diag_pivot_thresh=0
    ).solve(load[free])
    return 1000 * (time.perf_counter() - start), load @ u


print("scipy", scipy.__version__, flush=True)
kept = None
for line in sys.stdin:
    verb, _, rest = line.strip().partition(" ")
    if verb == "mesh":
        data = json.loads(rest)
        x, y = np.array(data["x"]), np.array(data["y"])
        triangles = np.array(data["triangles"]).reshape(-1, 6)
        free = np.setdiff1d(np.arange(len(x)), data["wall"])
        kept = (x, y, triangles, free)
        print(0, flush=True)
    elif verb == "solve":
        print(solve(kept)[0], flush=True)
    else:
        print(solve(kept)[1], flush=True)
