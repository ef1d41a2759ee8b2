"""Holds src/ to its order: a station includes only what stands above it.

    includes.py SRC        prints each include that breaks the order, exits 1 if there is one

Every .hpp, .cpp and .inl is read; an include in quotes must name a file as "station/file".
"""
import pathlib
import re
import sys

STATIONS = ("base", "table", "design", "factor", "exact", "scan", "audit", "report", "recheck", "command")
# The checker of proofs may share no code with the prover.
ONLY = {"recheck": ("base",)}
# The one header outside the stations gathers them for users of the library; it may not be used inside.
PUBLIC_HEADER = "gramproof.hpp"
NOT_FOR_THE_PUBLIC = ("command",)

INCLUDE = re.compile(r'^\s*#\s*include\s*(?:"([^"]*)"|<([^>]*)>)', re.MULTILINE)


def allowed(station):
    """The stations a file of `station` may include, its own among them."""
    above = ONLY.get(station, STATIONS[: STATIONS.index(station)])
    return (*above, station)


def breaches(path, source, text):
    """Sentences about the includes of one file that break the order."""
    place = path.relative_to(source)
    is_public_header = place == pathlib.Path(PUBLIC_HEADER)
    station = place.parts[0]
    if not is_public_header and (station not in STATIONS or len(place.parts) < 2):
        return [f"{place}: not in one of the stations {', '.join(STATIONS)}"]
    may = [name for name in STATIONS if name not in NOT_FOR_THE_PUBLIC] if is_public_header else allowed(station)
    found = []
    for match in INCLUDE.finditer(text):
        quoted, angled = match.groups()
        name = quoted or angled
        target = name.split("/")[0]
        line = text.count("\n", 0, match.start(1) if quoted else match.start(2)) + 1
        if quoted is None:
            # <table/piece.hpp> would get past a check of quoted includes alone.
            if (source / name).is_file():
                found.append(f"{place}:{line}: <{name}> is ours and is written in quotes")
        elif not (source / quoted).is_file():
            found.append(f'{place}:{line}: "{quoted}" is no file under src/ (write "station/file")')
        elif target not in may:
            found.append(f'{place}:{line}: "{quoted}": {station} may include only {", ".join(may)}')
    return found


def check(source):
    files = sorted(path for path in source.rglob("*") if path.suffix in (".hpp", ".cpp", ".inl"))
    return len(files), [line for path in files for line in breaches(path, source, path.read_text(encoding="utf-8"))]


def main(arguments):
    if len(arguments) != 1 or not pathlib.Path(arguments[0]).is_dir():
        sys.exit(__doc__)
    count, found = check(pathlib.Path(arguments[0]))
    if count == 0:
        sys.exit(f"no source file under {arguments[0]}")
    if found:
        sys.exit("\n".join(found))
    print(f"{count} files keep the order of the stations")


if __name__ == "__main__":
    main(sys.argv[1:])
