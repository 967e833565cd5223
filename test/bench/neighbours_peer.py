"""Nearest-neighbour storage as an experienced scientist would write it with scipy and scikit-learn.

Answers every line on standard input, "scipy K HISTORY FILE" or "sklearn K HISTORY FILE", with one line
of JSON. FILE holds float64 values of one series. "permuted:N K HISTORY FILE" takes the mean over N
shuffles of the next values against the pasts, by scipy.
"""

import json
import sys
import time

import numpy as np
from scipy.spatial import cKDTree
from scipy.special import digamma
from sklearn.feature_selection import mutual_info_regression


def windows(series, history):
    count = len(series) - history
    past = np.column_stack([series[history - j : history - j + count] for j in range(1, history + 1)])
    return past, series[history:]


def by_scipy(past, following, neighbours):
    count = len(following)
    joint = np.column_stack([past, following])
    tree = cKDTree(joint)
    distance = tree.query(joint, k=neighbours + 1, p=np.inf)[0][:, -1]
    radius = distance * (1 - 1e-10)  # strictly within, safe from rounding in the sorted search
    if past.shape[1] == 1:
        near_past = count_sorted(past[:, 0], radius)
    else:
        near_past = cKDTree(past).query_ball_point(past, radius, p=np.inf, return_length=True)
    near_next = count_sorted(following, radius)
    local = digamma(neighbours) + digamma(count) - digamma(near_past) - digamma(near_next)
    return float(local.mean() / np.log(2))


def count_sorted(values, radius):
    ordered = np.sort(values)
    low = np.searchsorted(ordered, values - radius, side="left")
    high = np.searchsorted(ordered, values + radius, side="right")
    return high - low


for line in sys.stdin:
    peer, neighbours, history, name = line.split()
    series = np.fromfile(name)
    past, following = windows(series, int(history))
    start = time.perf_counter()
    if peer.startswith("permuted:"):
        count = int(peer.split(":")[1])
        shuffles = np.random.default_rng(1)
        runs = [by_scipy(past, shuffles.permutation(following), int(neighbours)) for _ in range(count)]
        bits = float(np.mean(runs))
    elif peer == "scipy":
        bits = by_scipy(past, following, int(neighbours))
    else:
        nats = mutual_info_regression(past, following, n_neighbors=int(neighbours), random_state=0)
        bits = float(nats[0] / np.log(2))
    spent = (time.perf_counter() - start) * 1e3
    print(json.dumps({"milliseconds": spent, "bits": bits}), flush=True)
