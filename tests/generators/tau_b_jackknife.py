#!/usr/bin/python3
"""Writes tests/values/tau_b_jackknife.csv: the jackknife standard error of Kendall's tau-b, most of
the data sets with ties, from SciPy's kendalltau alone, by leaving out each row in turn.
"""

import csv
import math
import pathlib

import scipy
from scipy.stats import kendalltau

VALUES = pathlib.Path(__file__).parents[1] / "values"
OWN_FILES = ["cats", "faithful"]


def rows_of(name):
    with open(VALUES / name, encoding="utf-8", newline="") as file:
        yield from csv.DictReader(file)


def datasets():
    """Each data set by its name: a list of pairs."""
    every = {}
    for row in rows_of("kendall_datasets_small.csv"):
        every.setdefault(row["dataset"], []).append((float(row["x"]), float(row["y"])))
    for name in OWN_FILES:
        every[name] = [(float(row["x"]), float(row["y"])) for row in rows_of("data_%s.csv" % name)]
    return every


def tau_b(pairs):
    return float(kendalltau(*zip(*pairs), variant="b").statistic)


def jackknife_error(pairs):
    n = len(pairs)
    without = [tau_b(pairs[:k] + pairs[k + 1:]) for k in range(n)]
    mean = math.fsum(without) / n
    return math.sqrt((n - 1) / n * math.fsum((tau - mean) ** 2 for tau in without))


def main():
    sources = {row["dataset"]: row["source"] for row in rows_of("kendall_examples.csv")}
    status = "recomputed: scipy %s kendalltau, each row left out" % scipy.__version__
    path = VALUES / "tau_b_jackknife.csv"
    with open(path, "w", encoding="utf-8", newline="") as file:
        out = csv.writer(file, lineterminator="\n")
        out.writerow(["dataset", "n", "tau_b", "jackknife_error", "tolerance", "source", "status"])
        for name, pairs in datasets().items():
            out.writerow([name, len(pairs), "%.17g" % tau_b(pairs),
                          "%.17g" % jackknife_error(pairs), "1e-10 relative", sources[name],
                          status])


if __name__ == "__main__":
    main()
