"""Checks verdict documents against the schema, strictly and beyond what a schema can say.

    validate.py SCHEMA DOCUMENT|DIRECTORY...     exits 1 with one line a fault

The schema as shipped lets later programs add keys; here every object that lists its keys is closed, so
that a misspelt key is a fault. What spans several places (names that must exist, lengths that must
agree, values beside their states) is checked in code. Before that the checker itself is checked: each
of a list of damages to a good document must be found.
"""
import copy
import json
import math
import pathlib
import sys

import jsonschema


def closed(schema):
    """The schema with every object that lists its keys closed. Branches of if/then/else stay open."""
    if isinstance(schema, list):
        return [closed(item) for item in schema]
    if not isinstance(schema, dict):
        return schema
    result = {key: value if key in ("if", "then", "else") else closed(value) for key, value in schema.items()}
    if schema.get("type") == "object" and "properties" in schema:
        result.setdefault("additionalProperties", False)
    return result


def refuse_constant(name):
    raise ValueError(f"{name} is no JSON")


def load(path):
    return json.loads(pathlib.Path(path).read_text(encoding="utf-8"), parse_constant=refuse_constant)


def objects(value, place="$"):
    """Every object of a document with its place."""
    if isinstance(value, dict):
        yield place, value
        for key, item in value.items():
            yield from objects(item, f"{place}.{key}")
    elif isinstance(value, list):
        for index, item in enumerate(value):
            yield from objects(item, f"{place}[{index}]")


def state_faults(document):
    """A value is null exactly where its state is not finite."""
    for place, item in objects(document):
        for key, state in item.items():
            if not key.endswith("_state"):
                continue
            value = item.get(key[: -len("_state")])
            pairs = list(zip(value, state)) if isinstance(state, list) else [(value, state)]
            if isinstance(state, list) and len(value) != len(state):
                yield f"{place}.{key}: {len(state)} states of {len(value)} values"
            for number, word in pairs:
                if (number is None) == (word == "finite"):
                    yield f"{place}.{key}: {word} beside {number}"


def name_faults(document):
    labels = {column["name"] for column in document["design"]["columns"]}
    families = {family["name"] for family in document["design"]["families"]}
    terms = {term["name"] for term in document["design"]["terms"]}
    named = [("kept", document["kept"]), ("left_out", document["left_out"])]
    named.append(("coefficients_lost", document["verdict"]["coefficients_lost"]))
    named.append(("inflation", [item["column"] for item in document["inflation"]]))
    named.append(("certificate", document["rank"].get("certificate", {}).get("columns", [])))
    for relation in document["relations"]:
        named.append((relation["text"], [term["column"] for term in relation["terms"]] + relation["removable"]))
    for place, names in named:
        for name in names:
            if name not in labels:
                yield f"{place}: {name!r} is no column of the design"
    for name in document["families_between"]["families"]:
        if name not in families:
            yield f"families_between: {name!r} is no family"
    for column in document["design"]["columns"]:
        if column["family"] not in families or column["term"] not in terms:
            yield f"design: family or term of {column['name']!r} is not listed"


def size_faults(document):
    rank, conditioning = document["rank"], document["conditioning"]
    kept = len(document["kept"])
    if rank["rank"] + rank["nullity"] != rank["columns"]:
        yield "rank: rank and nullity do not add up to columns"
    within = sum(relation["standing"] == "within_rounding" for relation in document["relations"])
    if rank["numerical"] != rank["rank"] - within:
        yield "rank: numerical is not rank less the relations within rounding"
    if rank.get("rank_of_the_doubles", 0) > rank["columns"]:
        yield "rank: the doubles have more rank than columns"
    if len(document["design"]["columns"]) != kept + len(document["left_out"]):
        yield "kept and left_out are not the columns of the design"
    if len(conditioning["proportions"]) != len(conditioning["proportions_rows"]):
        yield "conditioning: proportions and proportions_rows differ in length"
    if any(len(row) != kept for row in conditioning["proportions"]):
        yield "conditioning: a row of proportions is not one number a kept column"
    for relation in document["relations"]:
        if relation["standing"] == "near":
            continue
        if len(relation["violations"]) != min(relation["rows_violating"], 50):
            yield f"{relation['text']}: {len(relation['violations'])} of {relation['rows_violating']} violations"
        coefficients = [term["coefficient"] for term in relation["terms"]]
        texts = sum(isinstance(coefficient, str) for coefficient in coefficients)
        if texts == 0 and relation["standing"].startswith("within_"):
            continue
        if texts != len(coefficients):
            yield f"{relation['text']}: whole numbers beside others"
            continue
        numbers = [int(coefficient) for coefficient in coefficients]
        if numbers[0] <= 0 or math.gcd(*numbers) != 1:
            yield f"{relation['text']}: coefficients are not primitive with a positive first one"


def faults(validator, document):
    for error in validator.iter_errors(document):
        yield f"{error.json_path}: {error.message[:200]}"
        return
    yield from state_faults(document)
    yield from name_faults(document)
    yield from size_faults(document)


def damages(document):
    """Damaged copies of a document with a word on each."""

    def damaged(word, change):
        copied = copy.deepcopy(document)
        change(copied)
        return word, copied

    yield damaged("a misspelt key", lambda d: d["verdict"].update(overal="sound"))
    yield damaged("a missing key", lambda d: d["conditioning"].pop("condition_number"))
    yield damaged("an unknown grade", lambda d: d["verdict"]["grounds"]["recorded"].update(grade="good"))
    yield damaged("a number as text", lambda d: d["conditioning"].update(condition_number="12"))
    yield damaged("a state that lies", lambda d: d["conditioning"].update(condition_number_state="infinite"))
    yield damaged("an unknown column", lambda d: d["kept"].__setitem__(0, "nowhere"))
    yield damaged("a lost column", lambda d: d["kept"].pop())
    yield damaged("a numerical rank above the rank", lambda d: d["rank"].update(numerical=d["rank"]["rank"] + 1))
    yield damaged("another version", lambda d: d.update(schema_version=2))
    yield damaged("a node unknown", lambda d: d["design"]["columns"][0].update(definition={"sine": [{"cell": "x"}]}))
    yield damaged("an exact number as a double", lambda d: d["design"]["columns"][0].update(definition={"number": 0.1}))


def documents_in(arguments):
    for argument in map(pathlib.Path, arguments):
        yield from sorted(argument.glob("*.json")) if argument.is_dir() else [argument]


def main(arguments):
    paths = list(documents_in(arguments[1:]))
    if not paths:
        sys.exit(__doc__)
    schema = load(arguments[0])
    jsonschema.Draft202012Validator.check_schema(schema)
    shipped, strict = (jsonschema.Draft202012Validator(one) for one in (schema, closed(schema)))
    found = []
    for path in paths:
        document = load(path)
        found += [f"{path}: {fault}" for fault in faults(strict, document)]
        extended = {**document, "a_key_of_a_later_program": 1}
        if not shipped.is_valid(extended):
            found.append(f"{path}: the schema as shipped refuses a further key")
    for word, document in damages(load(paths[0])):
        if not list(faults(strict, document)):
            found.append(f"{word}: damage that is not found")
    if found:
        sys.exit("\n".join(found))
    print(f"{len(paths)} documents keep to the schema")


if __name__ == "__main__":
    main(sys.argv[1:])
