"""Changes that make a verdict untrue, one claim at a time; each returns what it changed, or None where there is nothing to change."""
import copy


def exact_relations(document, standings=("exact", "exact_except")):
    return [relation for relation in document["relations"] if relation["standing"] in standings]


def with_violation(document):
    return [relation for relation in exact_relations(document, ("exact_except",)) if relation["violations"]]


def other_integer(random, text):
    return str(int(text) + random.choice([-3, -2, -1, 1, 2, 3]))


def coefficient(document, random):
    """A coefficient is changed: the terms no longer cancel."""
    relations = exact_relations(document)
    if not relations:
        return None
    term = random.choice(random.choice(relations)["terms"])
    term["coefficient"] = other_integer(random, term["coefficient"])
    return f"coefficient of {term['column']}"


def sign(document, random):
    """All coefficients of a relation with the other sign: the first is to be positive."""
    relations = exact_relations(document)
    if not relations:
        return None
    relation = random.choice(relations)
    for term in relation["terms"]:
        term["coefficient"] = str(-int(term["coefficient"]))
    return "sign"


def multiple(document, random):
    """Twice a relation holds too, but is not primitive."""
    relations = exact_relations(document, ("exact",))
    if not relations:
        return None
    for term in random.choice(relations)["terms"]:
        term["coefficient"] = str(2 * int(term["coefficient"]))
    return "twice a relation"


def certificate_row(document, random):
    """A row of the certificate becomes one that it holds already: the determinant is zero."""
    rows = document["rank"].get("certificate", {}).get("rows", [])
    if len(rows) < 2:
        return None
    here, there = random.sample(range(len(rows)), 2)
    rows[here] = rows[there]
    return f"certificate row {here} becomes {rows[there]}"


def certificate_order(document, random):
    """Two rows of the certificate change places: the determinant has the other sign."""
    rows = document["rank"].get("certificate", {}).get("rows", [])
    if len(rows) < 2:
        return None
    here, there = random.sample(range(len(rows)), 2)
    rows[here], rows[there] = rows[there], rows[here]
    return f"certificate rows {here} and {there}"


def certificate_row_beyond(document, random):
    """A row that the data do not have."""
    rows = document["rank"].get("certificate", {}).get("rows", [])
    if not rows:
        return None
    rows[random.randrange(len(rows))] = document["source"]["rows_read"] + random.randint(1, 9)
    return "certificate row beyond the data"


def residue(document, random):
    certificate = document["rank"].get("certificate")
    if not certificate:
        return None
    certificate["residue"] = other_integer(random, certificate["residue"])
    return "residue"


def prime(document, random):
    """The prime becomes a multiple of itself or its neighbour, an even number."""
    certificate = document["rank"].get("certificate")
    if not certificate:
        return None
    old = int(certificate["prime"])
    certificate["prime"] = str(random.choice([old + 1, old - 1, 3 * old]))
    return "prime"


def rows_used(document, random):
    document["source"]["rows_used"] += random.choice([1, 2, 10])
    return "rows used"


def rows_read(document, random):
    document["source"]["rows_read"] += random.choice([1, 2, 10])
    return "rows read"


def file_rows(document, random):
    random.choice(document["source"]["files"])["rows"] += random.choice([1, 5])
    return "rows of a file"


def excluded(document, random):
    """A count of rows left out is changed, or rows are said to be left out that are not."""
    parts = document["source"]["rows_excluded"]
    if parts:
        part = random.choice(parts)
        part["rows"] += random.choice([1, 2])
    else:
        column = document["source"]["must_be_present"]
        parts.append({"reason": "missing", "column": column[0] if column else "x", "rows": 1})
    return "rows left out"


def rows_tested(document, random):
    certificate = document["rank"].get("certificate")
    if not certificate:
        return None
    certificate["rows_tested"] += random.choice([-1, 1]) if document["rank"]["nullity"] else document["source"]["rows_used"]
    return "rows tested"


def holding(document, random):
    relations = exact_relations(document)
    if not relations:
        return None
    random.choice(relations)["rows_holding"] += random.choice([-1, 1])
    return "rows holding"


def violating(document, random):
    relations = exact_relations(document)
    if not relations:
        return None
    random.choice(relations)["rows_violating"] += 1
    return "rows violating"


def rank(document, random):
    """One more or less, with the nullity that goes with it."""
    step = random.choice([-1, 1])
    document["rank"]["rank"] += step
    document["rank"]["nullity"] -= step
    return "rank" if document["rank"]["nullity"] >= 0 and document["rank"]["rank"] >= 0 else None


def violation_residual(document, random):
    relations = with_violation(document)
    if not relations:
        return None
    violation = random.choice(random.choice(relations)["violations"])
    violation["residual"] = violation["residual"][1:] if violation["residual"].startswith("-") else "-" + violation["residual"]
    return "residual"


def largest_residual(document, random):
    relations = with_violation(document)
    if not relations:
        return None
    random.choice(relations)["largest_residual"] += "1"
    return "largest residual"


def violation_line(document, random):
    relations = with_violation(document)
    if not relations:
        return None
    random.choice(random.choice(relations)["violations"])["line"] += random.choice([-1, 1])
    return "line of a violation"


def violation_row(document, random):
    relations = with_violation(document)
    if not relations:
        return None
    random.choice(random.choice(relations)["violations"])["row"] += random.choice([1, 2])
    return "row of a violation"


def violation_cell(document, random):
    relations = [relation for relation in with_violation(document) if relation["violations"][0]["cells"]]
    if not relations:
        return None
    cells = random.choice(relations)["violations"][0]["cells"]
    cells[random.choice(sorted(cells))] += "7"
    return "cell of a violation"


def violation_file(document, random):
    relations = with_violation(document)
    if not relations:
        return None
    random.choice(relations)["violations"][0]["file"] += ".old"
    return "file of a violation"


def drop_relation(document, random):
    """A relation disappears, and the nullity stays."""
    relations = exact_relations(document, ("exact",))
    if not relations:
        return None
    document["relations"].remove(random.choice(relations))
    return "a relation dropped"


def repeat_relation(document, random):
    """A relation takes the place of another: as many, but not independent."""
    relations = exact_relations(document, ("exact",))
    if len(relations) < 2:
        return None
    here, there = random.sample(relations, 2)
    here.clear()
    here.update(copy.deepcopy(there))
    return "a relation twice"


def keep_left_out(document, random):
    """A column changes sides: more are kept than the rank."""
    if not document["left_out"]:
        return None
    document["kept"].append(document["left_out"].pop(random.randrange(len(document["left_out"]))))
    return "a column left out is kept"


def swap_kept(document, random):
    """A column in no relation is left out in place of one that is: what is kept is not independent."""
    basis = exact_relations(document, ("exact",))
    in_relation = {term["column"] for relation in basis for term in relation["terms"]}
    free = [name for name in document["kept"] if name not in in_relation]
    if not free or not document["left_out"]:
        return None
    here = random.randrange(len(document["left_out"]))
    there = document["kept"].index(random.choice(free))
    document["left_out"][here], document["kept"][there] = document["kept"][there], document["left_out"][here]
    return "kept and left out"


def exception_is_exact(document, random):
    """A relation that rows violate is called exact, and fits in every count but that of the rows."""
    relations = exact_relations(document, ("exact_except",))
    if not relations:
        return None
    relation = random.choice(relations)
    relation.update(standing="exact", rows_holding=document["source"]["rows_used"], rows_violating=0, violations=[],
                    largest_residual="0")
    document["rank"]["nullity"] += 1
    document["rank"]["rank"] -= 1
    return "an exception called exact"


IN_DOCUMENT = (coefficient, sign, multiple, certificate_row, certificate_order, certificate_row_beyond, residue, prime, rows_used,
               rows_read, file_rows, excluded, rows_tested, holding, violating, rank, violation_residual, largest_residual,
               violation_line, violation_row, violation_cell, violation_file, drop_relation, repeat_relation, keep_left_out,
               swap_kept, exception_is_exact)
