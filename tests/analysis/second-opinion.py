"""Analyses simulated tracks with numpy and scipy: dense matrices, none of the engine's transforms. JSON in, JSON out."""

import json
import sys

import numpy as np
from scipy.linalg import cholesky, solve_triangular
from scipy.optimize import brentq, minimize, minimize_scalar

ROOM = 3.841458820694124


def minus2_log_likelihood(series, e, delta, s):
    """Gaussian -2 ln L of displacements without the constant; inf where the covariance is not positive definite."""
    total = 0.0
    for length, rows in series.items():
        same = 2 * delta * (1 - e / 3) + 2 * s
        next_one = delta * e / 3 - s
        cov = np.diag(np.full(length, same))
        cov += np.diag(np.full(length - 1, next_one), 1) + np.diag(np.full(length - 1, next_one), -1)
        try:
            root = cholesky(cov, lower=True)
        except np.linalg.LinAlgError:
            return np.inf
        white = solve_triangular(root, rows.T, lower=True)
        total += 2 * rows.shape[0] * np.log(np.diag(root)).sum() + (white**2).sum()
    return total


def analyse(case):
    tracks = [np.array(track) for track in case["tracks"]]
    series = {}
    for track in tracks:
        for axis in np.diff(track, axis=1):
            series.setdefault(len(axis), []).append(axis)
    series = {length: np.array(rows) for length, rows in series.items()}
    msd = []
    for lag in case["lags"]:
        steps = [((t[:, lag:] - t[:, :-lag]) ** 2).sum(axis=0) for t in tracks if t.shape[1] > lag]
        msd.append(float(np.concatenate(steps).mean()))

    e = case["exposure"]
    scale = np.mean([(rows**2).mean() for rows in series.values()])

    def at(delta, s):
        return minus2_log_likelihood(series, e, delta, s)

    starts = [(np.log(scale * f), scale * g) for f, g in ((0.5, 0.0), (0.3, 0.2), (0.1, 0.4))]
    fits = []
    for start in starts:
        found = minimize(lambda p: at(np.exp(p[0]), p[1] * scale), (start[0], start[1] / scale), method="Nelder-Mead",
                         options={"xatol": 1e-9, "fatol": 1e-11, "maxiter": 4000})
        fits.append(found)
    best = min(fits, key=lambda found: found.fun)
    delta = float(np.exp(best.x[0]))
    s = float(best.x[1] * scale)

    def excess(log_delta):
        d = np.exp(log_delta)
        found = minimize_scalar(lambda p: min(at(d, p), 1e300), bounds=(-d * 0.4, 2 * scale), method="bounded",
                                options={"xatol": 1e-10 * scale})
        return found.fun - best.fun - ROOM

    centre = np.log(delta)
    lo = brentq(excess, centre - 5, centre, xtol=1e-9)
    hi = brentq(excess, centre, centre + 3, xtol=1e-9)
    return {
        "msd": msd,
        "delta": delta,
        "s": s,
        "best": float(best.fun),
        "lo": float(np.exp(lo)),
        "hi": float(np.exp(hi)),
        "at": [float(at(*point)) for point in case["points"]],
    }


print(json.dumps([analyse(case) for case in json.load(sys.stdin)]))
