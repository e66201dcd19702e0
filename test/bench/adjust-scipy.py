"""
The same adjustment by plain SciPy, ours, as a yardstick: minimise sum |p - p0|^2 + w sum m (z - t)^2 subject to
a_f . p_v + c_f = z_v for every corner and the held rise; unknowns are positions, heights and planes together, each step one
sparse LU of the KKT matrix (SuperLU, column minimum degree). Rim nodes slide, corners stay. No bounds, no line search.
Usage: adjust-scipy.py plan.obj out.obj
"""
import resource
import sys
import time

import numpy as np
from scipy.sparse import bmat, coo_matrix, diags
from scipy.sparse.linalg import splu

W = 0.1


def read(path):
    points, faces = [], []
    for line in open(path):
        if line.startswith("v "):
            points.append([float(v) for v in line.split()[1:4]])
        elif line.startswith("f "):
            faces.append([int(v) - 1 for v in line.split()[1:]])
    return np.array(points), faces


def main():
    begin = time.perf_counter()
    points, faces = read(sys.argv[1])
    low, high = points[:, :2].min(0), points[:, :2].max(0)
    span = (high - low).max()
    p0 = (points[:, :2] - (low + high) / 2) / span
    t = points[:, 2] / span
    nodes, panels = len(points), len(faces)
    corner = np.concatenate([np.array(face) for face in faces])
    panel = np.repeat(np.arange(panels), [len(face) for face in faces])
    areas = np.zeros(nodes)
    for face in faces:
        x, y = p0[face].T
        areas[face] += abs(np.dot(x, np.roll(y, -1)) - np.dot(y, np.roll(x, -1))) / 2 / len(face)
    m = areas / areas.mean()
    tilt = np.column_stack([np.ones(nodes), p0])
    shape = t - tilt @ np.linalg.lstsq(tilt * np.sqrt(m)[:, None], t * np.sqrt(m), rcond=None)[0]
    edge = 1e-9
    box = (high - low) / span / 2
    free = np.column_stack([np.abs(np.abs(p0[:, 0]) - box[0]) > edge, np.abs(np.abs(p0[:, 1]) - box[1]) > edge])

    # Unknowns: x, y of free coordinates, z, then a_x, a_y, c of each panel.
    index = -np.ones((nodes, 2), int)
    index[free] = np.arange(free.sum())
    moving = int(free.sum())
    size = moving + nodes + 3 * panels
    weight = np.concatenate([np.ones(moving), W * m, np.full(3 * panels, 1e-14)])
    p, z = p0.copy(), t.copy()
    planes = np.array([np.linalg.lstsq(np.column_stack([p0[f], np.ones(len(f))]), t[f], rcond=None)[0] for f in faces])
    rows = np.arange(len(corner))
    steps = 0
    for steps in range(1, 40):
        a = planes[panel]
        misfit = a[:, 0] * p[corner, 0] + a[:, 1] * p[corner, 1] + a[:, 2] - z[corner]
        i, j, v = [rows], [moving + corner], [-np.ones(len(corner))]
        for axis in (0, 1):
            on = free[corner, axis]
            i.append(rows[on])
            j.append(index[corner[on], axis])
            v.append(a[on, axis])
        for k, value in enumerate((p[corner, 0], p[corner, 1], np.ones(len(corner)))):
            i.append(rows)
            j.append(moving + nodes + 3 * panel + k)
            v.append(value)
        jacobian = coo_matrix((np.concatenate(v), (np.concatenate(i), np.concatenate(j))), (len(corner), size)).tocsc()
        gradient = np.concatenate([(p - p0)[free], W * m * (z - t), np.zeros(3 * panels)])
        right = np.concatenate([-gradient, -misfit])
        # The rise is a dense row: bordered on, since in the matrix it would spoil the order.
        border = np.zeros(len(right))
        border[moving : moving + nodes] = m * shape
        kkt = bmat([[diags(weight), jacobian.T], [jacobian, None]], format="csc")
        found = splu(kkt, permc_spec="COLAMD").solve(np.column_stack([right, border]))
        share = (border @ found[:, 0] - (m * shape) @ (t - z)) / (border @ found[:, 1])
        step = (found[:, 0] - share * found[:, 1])[:size]
        order = np.argsort(index[free])
        move = np.zeros((nodes, 2))
        move[free] = step[:moving][order][np.argsort(order)]
        p = p + move
        z = z + step[moving : moving + nodes]
        planes = planes + step[moving + nodes :].reshape(-1, 3)
        if np.sqrt((move**2).mean()) < 1e-3 * np.sqrt(((p - p0) ** 2).mean()) and np.abs(misfit).max() < 1e-9:
            break
    flat = max(abs(np.linalg.lstsq(np.column_stack([p[f], np.ones(len(f))]), z[f], rcond=None)[1]).max(initial=0) for f in faces if len(f) > 3)
    with open(sys.argv[2], "w") as out:
        for (x, y), h in zip(p, z):
            out.write(f"v {x * span!r} {y * span!r} {h * span!r}\n")
    rms = np.sqrt(((p - p0) ** 2).sum() / nodes) * span * 1000
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss // 1024
    print(f"{steps},{rms:.4f},{np.sqrt(flat):.1e},{time.perf_counter() - begin:.2f},{memory}")


main()
