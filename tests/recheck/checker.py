#!/usr/bin/env python3
"""Checks the proofs in a verdict against its data, apart from gramproof: the standard library alone.

    checker.py VERDICT.json FILE...     prints what is not upheld; exits 0 if all is, 1 if not, 2 if nothing was checked

The same claims as `gramproof recheck`, written apart from it: rows used and left out, rank, relations, violations, kept.
"""
import csv
import functools
import json
import math
import operator
import re
import sys
from fractions import Fraction

COMPARE = {"=": operator.eq, "!=": operator.ne, "<": operator.lt, "<=": operator.le, ">": operator.gt, ">=": operator.ge}
FOLD = {"add": operator.add, "subtract": operator.sub, "multiply": operator.mul, "divide": lambda a, b: Fraction(a) / b,
        "power": lambda a, b: Fraction(a) ** b, "and": lambda a, b: int(a != 0 and b != 0), "or": lambda a, b: int(a != 0 or b != 0)}


@functools.lru_cache(maxsize=1 << 18)
def decimal(text, mark="."):
    """A number as written; an int where it is whole, which is faster."""
    if not re.fullmatch(rf"[+-]?([0-9]+[{mark}]?[0-9]*|[{mark}][0-9]+)([eE][+-]?[0-9]{{1,4}})?", text):
        raise ValueError(f"{text!r} is no number")
    value = Fraction(text.replace(mark, "."))
    return int(value) if value.denominator == 1 else value


def formula(tree, mark):
    """The definition as a function of a row; it gives None for a value that is not rational."""
    key, inside = next((k, v) for k, v in tree.items() if k not in ("of", "exponent"))
    leaves = {"cell": lambda row: decimal(row[inside], mark), "number": lambda row: decimal(inside), "row": lambda row: row[None],
              "level": lambda row: int(row[inside["column"]] == inside["is"].strip(" \t")),
              "same_text": lambda row: int(row[inside[0]] == row[inside[1]])}
    if key in leaves:
        return leaves[key]
    if key == "not":
        return formula({"compare": "=", "of": [inside, {"number": "0"}]}, mark)
    exponent = tree.get("exponent", 1)
    parts = [formula(part, mark) for part in tree.get("of", inside)] + [lambda row: exponent] * (key == "power")

    def value(row):
        operands = [part(row) for part in parts]
        if None in operands:
            assert key not in ("log", "sqrt", "divide") and exponent > 0, "it cannot be said whether this value is defined"
            return None
        if (key == "log" and operands[0] <= 0) or (key == "sqrt" and operands[0] < 0):
            raise ZeroDivisionError  # undefined, as a quotient by zero is
        if key == "compare":
            return int(COMPARE[inside](*operands))
        return functools.reduce(FOLD[key], operands) if key in FOLD else None
    return value


def records(path, separator):
    """The rows of a file: line, cells by column."""
    with open(path, encoding="utf-8-sig", newline="") as file:
        reader, end, blank, header = csv.reader(file, delimiter=separator, skipinitialspace=True, strict=True), 0, [], None
        for cells in reader:
            line, end = end + 1, reader.line_num
            cells = [cell.strip(" \t") for cell in cells]
            header = header or cells
            if not cells:
                blank.append((line, {header[0]: ""}))
            elif len(cells) != len(header) or (blank and len(header) > 1):
                raise ValueError(f"{path}:{line}: not as many cells as the header has")
            elif line > 1:
                yield from [*blank, (line, dict(zip(header, cells)))]
                blank.clear()


def used_rows(document, paths, found):
    """The rows used: file, line, cells, values. What is left out, and how many rows a file has, goes to `found`."""
    source, design, number = document["source"], document["design"], 0
    mark, missing, weight = source["decimal_mark"], set(source["missing"]), design["weight"]
    keep = formula(source["filter"], mark) if source["filter"] else lambda row: 1
    columns = [(column["name"], formula(column["definition"], mark)) for column in design["columns"]]
    for path, stated in zip(paths, source["files"]):
        found["files"].append(0)
        for line, row in records(path, source["separator"]):
            found["files"][-1], number = found["files"][-1] + 1, number + 1
            row, values = {None: number, **{name: cell for name, cell in row.items() if cell not in missing}}, []
            reasons = [("missing", name) for name in source["must_be_present"] if name not in row]
            try:
                reasons = reasons if keep(row) else [("filter", None)]
            except ZeroDivisionError:
                reasons = [("undefined", None)]
            except KeyError:  # a missing cell in the filter: the row is left to the missing
                assert reasons
            if not reasons and weight is not None and decimal(row[weight], mark) == 0:
                reasons = [("weight_zero", weight)]
            for name, definition in columns if not reasons else ():
                try:
                    values.append(definition(row))
                except ZeroDivisionError:
                    reasons.append(("undefined", name))
            for reason in reasons:
                found["excluded"][reason] = found["excluded"].get(reason, 0) + 1
            if not reasons:
                yield stated["name"], line, row, values


def rank(rows):
    """By elimination, one column a call."""
    if not rows or not rows[0]:
        return 0
    pivot = next((row for row in rows if row[0]), None)
    rest = [row for row in rows if row is not pivot]
    return bool(pivot) + rank([[a - Fraction(row[0]) / pivot[0] * b for a, b in zip(row[1:], pivot[1:])] if pivot
                               else row[1:] for row in rest])


def is_prime(number):
    """Miller and Rabin's test; these bases settle every number below 2^64 (Sorenson & Webster 2015)."""
    bases = (2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37)
    if number < 2 or any(number % base == 0 for base in bases):
        return number in bases
    twos = range(1, ((number - 1) & (1 - number)).bit_length())
    chains = [[pow(base, (number - 1) >> i, number) for i in twos] for base in bases]
    return all(chain[-1] == 1 or number - 1 in chain for chain in chains)


def determinant(matrix, prime):
    product = 1
    for step in range(len(matrix)):
        pivot = next((i for i in range(step, len(matrix)) if matrix[i][step]), step)
        matrix[pivot], matrix[step] = matrix[step], matrix[pivot]
        product = (product if pivot == step else -product) * matrix[step][step] % prime
        scale = pow(matrix[step][step], -1, prime) if product else 0
        for row in matrix[step + 1:]:
            row[:] = [(a - row[step] * scale * b) % prime for a, b in zip(row, matrix[step])]
    return product % prime


def check(document, paths):
    """The claims that are not upheld. Raises what Python raises where the document or the data make no sense."""
    source, design, stated = document["source"], document["design"], document["rank"]
    place = {column["name"]: i for i, column in enumerate(design["columns"])}
    relations = [relation for relation in document["relations"] if relation["standing"].startswith("exact")]
    terms = [[(place[term["column"]], int(term["coefficient"])) for term in relation["terms"]] for relation in relations]
    proof = stated.get("certificate") or {"prime": "2", "rows": [], "columns": [], "residue": "1"}
    prime, rows, used, matrix = int(proof["prime"]), set(proof["rows"]), 0, {}
    found, broken, refused = {"files": [], "excluded": {}}, [{} for _ in relations], []
    for used, (file, line, row, values) in enumerate(used_rows(document, paths, found), 1):
        if row[None] in rows:
            cells = [Fraction(values[place[name]]) for name in proof["columns"]]
            matrix[row[None]] = [cell.numerator * pow(cell.denominator, -1, prime) % prime for cell in cells]
        for parts, breaks in zip(terms, broken):
            if residual := sum(factor * values[column] for column, factor in parts):
                breaks[row[None]] = (file, line, residual, row)

    def violated(violation, breaks):
        file, line, residual, row = breaks.get(violation["row"], (None, None, None, {}))
        same = [row.get(name) == text or decimal(row[name], source["decimal_mark"]) == decimal(text)
                for name, text in violation["cells"].items()] if row else [False]
        return (file, line, residual) == (violation["file"], violation["line"], Fraction(violation["residual"])) and all(same)

    claim = lambda holds, text: holds or refused.append(text)  # noqa: E731
    claim(len(paths) == len(source["files"]) and found["files"] == [file["rows"] for file in source["files"]]
          and source["rows_read"] == sum(found["files"]), "rows read")
    tested = proof.get("rows_tested", used)
    claim(used == source["rows_used"] == design["rows"] and (tested == used or tested < used and not stated["nullity"]), "rows used")
    claim(found["excluded"] == {(p["reason"], p["column"]): p["rows"] for p in source["rows_excluded"]}, "rows left out")
    claim(stated["rank"] + stated["nullity"] == stated["columns"] == len(place), "rank and nullity")
    irrational = sum(bool(re.search('{"(log|sqrt|exp|asinh)": ', json.dumps(c["definition"]))) for c in design["columns"])
    claim(len(proof["columns"]) == stated["rank"] - irrational and is_prime(prime)
          and len(proof["columns"]) == len(proof["rows"]) == len(matrix)
          and determinant([matrix[row] for row in proof["rows"]], prime) == int(proof["residue"]) != 0, "the certificate")
    for i, (relation, parts, breaks) in enumerate(zip(relations, terms, broken), 1):
        factors = [coefficient for _, coefficient in parts]
        claim(math.gcd(*factors) == 1 and factors[0] > 0 and all(factors) and len(dict(parts)) == len(parts), f"{i}: primitive")
        claim((used - len(breaks), len(breaks)) == (relation["rows_holding"], relation["rows_violating"])
              and (relation["standing"] == "exact") == (not breaks), f"relation {i}: rows")
        claim(Fraction(relation["largest_residual"]) == max([0, *(abs(row[2]) for row in breaks.values())]), f"{i}: largest")
        listed = {violation["row"]: violated(violation, breaks) for violation in relation["violations"]}
        claim(len(listed) == len(relation["violations"]) and bool(listed) == bool(breaks) and all(listed.values()), f"{i}: violations")
    basis = [[dict(parts).get(column, 0) for column in range(len(place))]
             for relation, parts in zip(relations, terms) if relation["standing"] == "exact"]
    kept, left_out, omitted = document["kept"], document["left_out"], document["relations_omitted"]
    claim(rank(basis) == len(basis) == stated["nullity"] - omitted, "independent relations, as many as the nullity")
    claim(sorted(kept + left_out) == sorted(place) and len(kept) == stated.get("numerical", stated["rank"])
          and (omitted or rank([[row[place[name]] for name in left_out] for row in basis]) == stated["nullity"]), "columns kept")
    claim(omitted or len(kept) < stated["rank"] or set(document["verdict"]["coefficients_lost"])
          == {name for name, column in place.items() if any(row[column] for row in basis)}, "coefficients lost")
    claim((document["verdict"]["grounds"]["identified"]["grade"] == "fail") == (stated["nullity"] > 0)
          == (document["verdict"]["overall"] == "singular"), "the grade")
    return refused


if __name__ == "__main__":
    try:
        with open(sys.argv[1], encoding="utf-8") as text:
            not_upheld = check(json.load(text), sys.argv[2:])
    except Exception as fault:  # whatever it is, nothing was checked
        sys.exit(print("nothing was checked:", repr(fault)) or 2)
    print(*[f"NOT upheld: {claim}" for claim in not_upheld] or ["all upheld"], sep="\n")
    sys.exit(1 if not_upheld else 0)
