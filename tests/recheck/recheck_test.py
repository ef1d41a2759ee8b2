"""Verdicts of the real program, upheld by `gramproof recheck` and by checker.py; tampered ones, refused by both.

    recheck_test.py GRAMPROOF ROOT     ROOT holds fixtures/ and examples/
"""
import copy
import csv
import gzip
import json
import pathlib
import random
import subprocess
import sys
import tempfile

import checker
import tampering

SEED = 20261201
TAMPERED = 200
IN_DATA = 30  # of them, changes of the data under a verdict that stays
# Made here: what the fixtures' plain tables do not have. Name, files (name, text), arguments of check.
MADE = [
    ("filter, weights and missing cells", [("a.csv", "y,x,z,w,g\n1,2,4,1,n\n2,3,6,0,s\n3,NA,8,2,n\n4,5,10,1,s\n5,7,14,0.5,\n6,8,16,1,n\n7,9,18,2,s\n")],
     ["--design", "constant, x, z, levels(g)", "--weight", "w", "--rows", "row != 6 and x < 100", "--response", "y"]),
    ("undefined values", [("a.csv", "x,z\n0,1\n1,0\n2,1\n3,5\n4,1\n5,2\n6,0\n7,9\n")], ["--design", "constant, 1 / z, x^-1, x / x, log(z)"]),
    ("two files, columns in another order", [("a.csv", "p,q,r\n1,2,3\n4,5,9\n2,2,4\n"), ("b.csv", "r,p,q\n10,3,7\n12,4,8\n5,1,4\n")],
     ["--design", "constant, p, q, r"]),
    ("decimal comma, quotes, CRLF and a byte order mark",
     [("a.csv", '\ufeffname;"a b";c\r\n"x;1";1,5;3\r\n"say ""no""";2,25;4,5\r\n"x;1";-3e1;-60\r\n"two\r\nlines";0,5;1\r\n\r\n')],
     ["--design", 'constant, "a b", c, levels(name)']),
    ("numbers that look alike", [("a.csv", "a,b,k\n1.0,1e0,01\n.5,5e-1,1\n-0,0.00,2\n+3.,0.3e1,2.0\n1e2,100,3\n7,7.000,3.00\n")],
     ["--design", "a, b, levels(k), [a = b], max(a, b, k), min(a, k), abs(a - k), hinge(a, 2)"]),
    ("one column, with an empty line", [("a.csv", "x\n1\n\n3\n4\n\n\n")], ["--design", "constant, x, x^2"]),
    ("one row is off", [("a.csv", "p,q,total\n" + "".join(f"{i % 7},{i * i % 11},{i % 7 + i * i % 11 + (i == 40) * 5}\n" for i in range(90)))],
     ["--design", "constant, p, q, total"]),
    ("a relation of logarithms", [("a.csv", "x,y,z\n" + "".join(f"{1 + i * 7 % 31},{1 + i * i % 37},{i * 5 % 17}\n" for i in range(60)))],
     ["--design", "constant, log(x), log(y), log(x * y), z, 2 * z, [log(z + 2) > 1], sqrt(abs(z - 3)), exp(z / 9), asinh(x)"]),
    ("texts compared", [("a.csv", "g,h,x\n" + "".join(f"{'ab c'[i % 4]},{'abd'[i % 3]},{i}\n" for i in range(50)))],
     ["--design", 'constant, all_levels(g), all_levels(h), [g = column("h")], x, [x >= 3] * [x < 40]', "--rows", "not (row = 7 or x = 9)"]),
    ("compressed", [("a.csv.gz", "p,q,r\n1,2,3\n4,5,9\n2,2,4\n9,1,10\n")], ["--design", "constant, p, q, r"]),
]


class Failure(Exception):
    pass


class Program:
    def __init__(self, executable, scratch):
        self.executable, self.scratch = executable, pathlib.Path(scratch)

    def run(self, *arguments):
        return subprocess.run([self.executable, *map(str, arguments)], capture_output=True, text=True, check=False)

    def verdict(self, files, *arguments):
        """The document of `check`; None where the program finds nothing to audit."""
        done = self.run("check", *files, "--json", "-", "--quiet", *arguments)
        return json.loads(done.stdout) if done.returncode in (0, 1) else None

    def recheck(self, document, files):
        path = self.scratch / "verdict.json"
        path.write_text(json.dumps(document), encoding="utf-8")
        return self.run("recheck", path, *files)


def checked_by_python(document, files):
    """The exit status that checker.py would have, and what it says."""
    try:
        refused = checker.check(document, [str(file) for file in files])
    except Exception as fault:  # whatever it is, nothing was checked
        return 2, [repr(fault)]
    return (1 if refused else 0), refused


def cases(root, scratch):
    """Name, files, arguments."""
    for folder in ("known/adversarial", "reference"):
        for path in sorted((root / "fixtures" / folder).glob("*.csv")):
            if path.name != "null_spaces.csv":
                yield f"{folder}/{path.stem}", [path], []
    survey = root / "examples/ternholm_energy.csv"
    yield "demonstration", [survey], ["--design-file", root / "examples/design.txt", "--response", "annual_kwh"]
    yield "demonstration, repaired", [survey], ["--design-file", root / "examples/repaired.txt", "--weight", "weight"]
    for number, (name, files, arguments) in enumerate(MADE):
        paths = []
        for file, text in files:
            paths.append(scratch / f"{number}-{file}")
            data = text.encode()
            paths[-1].write_bytes(gzip.compress(data, mtime=0) if file.endswith(".gz") else data)
        yield name, paths, arguments


def upheld_by_both(program, name, files, document):
    done = program.recheck(document, files)
    if done.returncode != 0:
        raise Failure(f"{name}: recheck gives {done.returncode}:\n{done.stdout}{done.stderr}")
    if any(str(file).endswith(".gz") for file in files):
        return  # checker.py reads plain text
    status, said = checked_by_python(document, files)
    if status != 0:
        raise Failure(f"{name}: checker.py gives {status}: {said}")


def refused_by_both(program, name, files, document):
    done = program.recheck(document, files)
    if done.returncode not in (1, 2) or (done.returncode == 1) != ("NOT upheld" in done.stdout):
        raise Failure(f"{name}: recheck gives {done.returncode}:\n{done.stdout}{done.stderr}")
    status, _ = checked_by_python(document, files)
    if status not in (1, 2):
        raise Failure(f"{name}: checker.py upholds it")


def with_changed_data(document, files, generator, scratch):
    """Data in which a cell of an exact relation, or the number of rows, is another; None where there is no such relation."""
    with open(files[0], encoding="utf-8", newline="") as file:
        rows = list(csv.reader(file))
    kind = generator.choice(["cell", "cell", "cell", "row less", "row twice", "column renamed"])
    plain = {column["name"]: column["definition"]["cell"] for column in document["design"]["columns"]
             if "cell" in column.get("definition", {})}
    columns = [plain[term["column"]] for relation in tampering.exact_relations(document, ("exact",))
               for term in relation["terms"] if term["column"] in plain]
    certified = document["rank"].get("certificate", {}).get("rows", [])
    if not columns or not certified:
        return None
    column, row = rows[0].index(generator.choice(columns)), generator.choice(certified)
    if kind == "cell":
        rows[row][column] = generator.choice(["1234.5", "-98765", "31415926535897932384626433832795"])
    elif kind == "row less":
        del rows[row]
    elif kind == "row twice":
        rows.insert(row, rows[row])
    else:
        rows[0][column] += "_2"
    path = scratch / "changed.csv"
    with open(path, "w", encoding="utf-8", newline="") as file:
        csv.writer(file, lineterminator="\n").writerows(rows)
    return kind, [path]


def tamper(program, verdicts, scratch):
    """TAMPERED changes, each kind in turn on a verdict drawn at random."""
    generator, made, kinds = random.Random(SEED), 0, {}
    while made < TAMPERED:
        name, files, document = generator.choice(verdicts)
        if made < IN_DATA:
            changed = with_changed_data(document, files, generator, scratch)
            kind, where = changed or (None, None)
            altered = document
        else:
            change = tampering.IN_DOCUMENT[made % len(tampering.IN_DOCUMENT)]
            altered, where = copy.deepcopy(document), files
            kind = change.__name__ if change(altered, generator) else None
        if kind is None:
            continue
        refused_by_both(program, f"{name}, {kind}, seed {SEED}, number {made}", where, altered)
        kinds[kind] = kinds.get(kind, 0) + 1
        made += 1
    return kinds


def main():
    executable, root = sys.argv[1], pathlib.Path(sys.argv[2])
    with tempfile.TemporaryDirectory() as folder:
        scratch = pathlib.Path(folder)
        program, verdicts = Program(executable, scratch), []
        for name, files, arguments in cases(root, scratch):
            document = program.verdict(files, *arguments)
            if document is None:
                raise Failure(f"{name}: nothing is audited")
            upheld_by_both(program, name, files, document)
            if not str(files[0]).endswith(".gz"):
                verdicts.append((name, files, document))
        print(f"upheld by both: {len(verdicts)} verdicts")
        kinds = tamper(program, verdicts, scratch)
        print(f"refused by both: {sum(kinds.values())} tampered", dict(sorted(kinds.items())))


if __name__ == "__main__":
    try:
        main()
    except Failure as failure:
        sys.exit(f"recheck_test.py: {failure}")
