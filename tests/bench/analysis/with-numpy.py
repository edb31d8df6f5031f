"""The same analysis in NumPy, vectorised throughout. Arguments: file of doubles, JSON of factors; prints JSON."""

import json
import sys
import time

import numpy as np

weights = np.fromfile(sys.argv[1])
factors = json.loads(sys.argv[2])
n = factors["n"]


def run_length(on):
    """How many true values in a row end at each place."""
    place = np.arange(1, len(on) + 1)
    return place - np.maximum.accumulate(np.where(on, 0, place))


def in_last(on, window):
    """How many of the last `window` values are true; fewer values at the start."""
    total = np.concatenate(([0], np.cumsum(on)))
    start = np.maximum(0, np.arange(1, len(on) + 1) - window)
    return total[1:] - total[start]


def signals(x, center, sigma, lower, upper, with_zones):
    step = np.diff(x)
    turns = step[1:] * step[:-1] < 0
    count = np.count_nonzero((x > upper) | (x < lower))
    count += np.count_nonzero(run_length(x > center) >= 9) + np.count_nonzero(run_length(x < center) >= 9)
    count += np.count_nonzero(run_length(step > 0) >= 5) + np.count_nonzero(run_length(step < 0) >= 5)
    count += np.count_nonzero(run_length(turns) >= 12)
    if not with_zones:
        return count
    for zone, needed in ((2, 2), (1, 4)):
        for beyond in (x > center + zone * sigma, x < center - zone * sigma):
            count += np.count_nonzero(beyond & (in_last(beyond, needed + 1) >= needed))
    above = x > center + sigma
    outside = above | (x < center - sigma)
    count += np.count_nonzero(run_length(~outside) >= 15)
    high = in_last(above, 8)
    count += np.count_nonzero((run_length(outside) >= 8) & (high > 0) & (high < 8))
    return count


def analyse():
    rows = weights.reshape(-1, n)
    mean = rows.mean(axis=1)
    sd = rows.std(axis=1, ddof=1)
    low = rows.min(axis=1)
    high = rows.max(axis=1)
    spread = high - low
    center = mean.mean()
    count = 0
    for points, per_sigma, sd_of_point in ((spread, factors["d2"], factors["d3"]), (sd, factors["c4"], np.sqrt(1 - factors["c4"] ** 2))):
        sigma = points.mean() / per_sigma
        se = sigma / np.sqrt(n)
        count += signals(mean, center, se, center - 3 * se, center + 3 * se, True)
        middle, width = per_sigma * sigma, sd_of_point * sigma
        count += signals(points, middle, width, max(0, middle - 3 * width), middle + 3 * width, False)
    within = np.sqrt(np.mean(sd**2))
    overall = weights.std(ddof=1)
    nearest = min(center - factors["lower"], factors["upper"] - center)
    return {"mean": center, "signals": int(count), "cpk": nearest / (3 * within), "ppk": nearest / (3 * overall)}


seconds = []
for _ in range(factors["rounds"]):
    started = time.perf_counter()
    figures = analyse()
    seconds.append(time.perf_counter() - started)
print(json.dumps({"milliseconds": 1000 * min(seconds), "figures": figures}))
