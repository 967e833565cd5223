"""Answers each line "CELLS LEVEL FILE" with the time that scipy takes to label a map, as JSON."""

import json
import sys
import time

import numpy as np
from scipy import ndimage

EVERY_NEIGHBOUR = np.ones((3, 3))

for line in sys.stdin:
    cells, level, path = line.split(maxsplit=2)
    storage = np.fromfile(path.strip(), dtype=np.float32).reshape(-1, int(cells))
    mask = storage <= np.float32(level)
    start = time.perf_counter()
    labels, regions = ndimage.label(mask, structure=EVERY_NEIGHBOUR)
    elapsed = time.perf_counter() - start
    print(json.dumps({"milliseconds": elapsed * 1e3, "regions": regions}), flush=True)
