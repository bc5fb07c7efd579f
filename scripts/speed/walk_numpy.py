"""Reference: the plain walk of independent vesicles in a sealed terminal, vectorised over vesicles with numpy.

Same lattice, number of vesicles and stop rule as walk.c; numpy's own fast generator (SFC64), so the law is the same, not the bits.
Answers each line "FROM TO" with "milliseconds steps".
"""
import sys
import time

import numpy as np

HEAD, REALS = 16, 4


class Plan:
    """What this walk needs of the file that plan.h describes."""

    def __init__(self, path):
        raw = open(path, "rb").read()
        head = np.frombuffer(raw, np.int32, HEAD)
        exclusive, held, cells, free, boundary, self.sites, classes, self.steps, samples, self.vesicles, row, layer = (int(x) for x in head[:12])
        if exclusive or held or classes != 1:
            sys.exit("only the sealed independent walk with one kind of site")
        self.at = 4 * HEAD + 8 * REALS
        flags = self._take(raw, np.uint8, cells)
        behind = self._take(raw, np.int32, 6 * cells)
        self._take(raw, np.int32, self.sites)
        self._take(raw, np.uint8, self.sites)
        self._take(raw, np.uint32, samples)
        self.free = self._take(raw, np.int32, free) * 6
        offsets = np.array([1, -1, row, -row, layer, -layer])
        voxel = np.repeat(np.arange(cells), 6)
        target = np.clip(voxel + np.tile(offsets, cells), 0, cells - 1)
        # Where a hop from voxel v in direction d ends, times six; a blocked one stays, a hop at site s is -1 - s.
        hop = np.where(flags[target] == 0, target, voxel) * 6
        self.hop = np.where((flags[target] == 2) & (behind >= 0), -1 - behind, hop).astype(np.int32)

    def _take(self, raw, kind, count):
        array = np.frombuffer(raw, kind, count, self.at)
        self.at += (array.nbytes + 3) // 4 * 4
        return array


def refill(plan, random):
    """One replicate with certain attachment; returns the steps until every site is filled or time is over."""
    at = plan.free[random.integers(0, len(plan.free), plan.vesicles)]
    filled = np.zeros(plan.sites, bool)
    for step in range(plan.steps):
        if filled.all():
            return step
        after = plan.hop[at + random.integers(0, 6, len(at), dtype=np.uint8)]
        hits = np.flatnonzero(after < 0)
        if len(hits) == 0:
            at = after
            continue
        site = -1 - after[hits]
        after[hits] = at[hits]
        at = after
        # The first vesicle in list order takes a site that was empty.
        taken, first = np.unique(site, return_index=True)
        new = ~filled[taken]
        filled[taken[new]] = True
        gone = hits[first[new]]
        if len(gone):
            at = np.delete(at, gone)
    return plan.steps


def main():
    plan = Plan(sys.argv[1])
    for line in sys.stdin:
        first, last = (int(word) for word in line.split())
        start = time.perf_counter()
        steps = sum(refill(plan, np.random.Generator(np.random.SFC64([20261201, k]))) for k in range(first, last))
        print(f"{(time.perf_counter() - start) * 1e3:.6f} {steps}", flush=True)


if __name__ == "__main__":
    main()
