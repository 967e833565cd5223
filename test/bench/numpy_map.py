"""The two passes as a scientist would write them with numpy: a rolling code, bincount, take.

With a file of raw states, answers every line on standard input with one line of JSON. With an .npy
file and an output name, it is the whole script: load, count, map, save.
"""

import json
import sys
import time

import numpy as np

CELLS, STEPS, HISTORY = 10_000, 1_000, 16
BLOCKS = 2 ** (HISTORY + 1)


def codes(states):
    windows = states.shape[0] - HISTORY
    code = np.zeros((windows, states.shape[1]), dtype=np.int32)
    for lag in range(HISTORY, -1, -1):
        code <<= 1
        code |= states[HISTORY - lag : HISTORY - lag + windows]
    return code


def table_of(counts):
    joint = counts.reshape(-1, 2).astype(float)
    past = joint.sum(axis=1, keepdims=True)
    next_value = joint.sum(axis=0, keepdims=True)
    with np.errstate(divide="ignore", invalid="ignore"):
        bits = np.log2(joint / past * (next_value.sum() / next_value))
    return bits.ravel().astype(np.float32)


def whole_script(source, target):
    states = np.load(source)
    code = codes(states)
    table = table_of(np.bincount(code.ravel(), minlength=BLOCKS))
    bits = np.full(states.shape, np.nan, dtype=np.float32)
    np.take(table, code, out=bits[HISTORY:], mode="clip")
    np.save(target, bits)
    print(float(np.mean(bits[HISTORY:], dtype=np.float64)))


def companion(source):
    states = np.fromfile(source, dtype=np.uint8).reshape(STEPS, CELLS)
    for _ in sys.stdin:
        start = time.perf_counter()
        counts = np.bincount(codes(states).ravel(), minlength=BLOCKS)
        counted = time.perf_counter()
        table = table_of(counts)
        tabled = time.perf_counter()
        bits = np.take(table, codes(states), mode="clip")
        mapped = time.perf_counter()
        check = int((counts * np.arange(1, BLOCKS + 1)).sum() % 2**32)
        result = {
            "count": (counted - start) * 1e3,
            "map": (mapped - tabled) * 1e3,
            "mean": float(np.mean(bits, dtype=np.float64)),
            "check": check,
        }
        print(json.dumps(result), flush=True)


if len(sys.argv) == 3:
    whole_script(sys.argv[1], sys.argv[2])
else:
    companion(sys.argv[1])
