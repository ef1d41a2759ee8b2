#!/usr/bin/env python3
"""What a tolerance makes of the hard designs of tests/audit: one line a design with its exact rank and the rank that
numpy.linalg.matrix_rank finds with its default tolerance, as it stands and with columns of unit length.

    GRAMPROOF_CASES=FOLDER build/checked/tests/test_audit --test-case='*hard designs*'
    tests/long/tolerance_table.py FOLDER

Entries are rounded to the nearest double, as any program does that reads the data as doubles. A wrong rank is marked with !.
"""
import pathlib
import sys
from fractions import Fraction

import numpy


def read_case(path):
    lines = path.read_text().splitlines()
    rows = [[float(Fraction(entry)) for entry in line.split()] for line in lines[2:]]
    return lines[0], int(lines[1]), numpy.array(rows)


def on_unit_length(matrix):
    # By the largest entry first: squares of 1e300 and 1e-300 are no doubles.
    largest = numpy.abs(matrix).max(axis=0)
    scaled = matrix / numpy.where(largest > 0, largest, 1)
    lengths = numpy.linalg.norm(scaled, axis=0)
    return scaled / numpy.where(lengths > 0, lengths, 1)


def rank_text(matrix):
    try:
        return str(numpy.linalg.matrix_rank(matrix))
    except numpy.linalg.LinAlgError:
        return "none"


def main():
    if len(sys.argv) != 2:
        sys.exit(__doc__)
    paths = sorted(pathlib.Path(sys.argv[1]).glob("*.case"))
    if not paths:
        sys.exit(f"no case in {sys.argv[1]}")
    wrong = {"as it stands": 0, "unit length": 0}
    print(f"{'design':<58} {'columns':>7} {'exact':>6} {'as it stands':>13} {'unit length':>12}")
    for path in paths:
        name, exact, matrix = read_case(path)
        found = {"as it stands": rank_text(matrix), "unit length": rank_text(on_unit_length(matrix))}
        marked = {}
        for way, rank in found.items():
            right = rank == str(exact)
            wrong[way] += not right
            marked[way] = rank if right else rank + "!"
        print(f"{name:<58} {matrix.shape[1]:>7} {exact:>6} {marked['as it stands']:>13} {marked['unit length']:>12}")
    print(f"\nwrong in {wrong['as it stands']} of {len(paths)} as they stand, in {wrong['unit length']} on unit-length columns; "
          f"the exact rank is the program's in all of them, or the test fails")


if __name__ == "__main__":
    main()
