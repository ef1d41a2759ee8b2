"""The program finds every trap that examples/README.md lists, and its document is valid.

    verdict_test.py GRAMPROOF PROJECT
"""
import json
import math
import pathlib
import subprocess
import sys
import unittest

import jsonschema

PROJECT = pathlib.Path(sys.argv.pop())
GRAMPROOF = sys.argv.pop()
DISTRICTS = {f"district_{name}" for name in ("harbour", "highmoor", "northsound", "saltings", "westerby")}


def audit(*options, design="design.txt"):
    command = [GRAMPROOF, "check", "examples/ternholm_energy.csv", "--design-file", f"examples/{design}"]
    command += ["--response", "annual_kwh", "--weight", "weight", *options]
    return subprocess.run(command, cwd=PROJECT, capture_output=True, text=True, encoding="utf-8", check=False)


class Verdict(unittest.TestCase):
    @classmethod
    def setUpClass(cls):
        cls.run_ = audit("--json", "-")
        cls.document = json.loads(cls.run_.stdout) if cls.run_.stdout else {}

    def relations(self, standing):
        return [relation for relation in self.document["relations"] if relation["standing"] == standing]

    @staticmethod
    def columns(relation):
        return frozenset(term["column"] for term in relation["terms"])

    def test_ends_as_documented(self):
        self.assertEqual(self.run_.returncode, 1, self.run_.stderr)
        for line in self.run_.stderr.splitlines():
            self.assertTrue(line.startswith("gramproof: "), line)

    def test_document_is_valid(self):
        schemas = sorted((PROJECT / "src" / "report").glob("*.json"))
        self.assertEqual(len(schemas), 1, "the JSON Schema lies in src/report")
        jsonschema.validate(self.document, json.loads(schemas[0].read_text(encoding="utf-8")))

    def test_threads_do_not_change_a_byte(self):
        self.assertEqual(audit("--json", "-", "--threads", "1").stdout, self.run_.stdout)

    # 2194 rows, rank 30 of 33: tests/demonstration/README.md says where these and the relations come from.
    def test_rows_and_rank(self):
        self.assertEqual(self.document["source"]["rows_read"], 2400)
        self.assertEqual(self.document["source"]["rows_used"], 2194)
        rank = self.document["rank"]
        self.assertEqual((rank["rank"], rank["columns"], rank["nullity"], rank["proved"]), (30, 33, 3, True))

    def test_exact_relations(self):
        self.assertEqual(
            {self.columns(relation) for relation in self.relations("exact")},
            {
                frozenset({"age", "birth_year", "interview_year"}),
                frozenset({"cost_heating", "cost_lighting", "cost_cooking", "cost_energy"}),
                frozenset({"constant"} | DISTRICTS),
            },
        )
        for relation in self.relations("exact"):
            self.assertEqual({abs(int(term["coefficient"])) for term in relation["terms"]}, {1})
            self.assertEqual((relation["rows_holding"], relation["rows_violating"]), (2194, 0))

    def test_one_column_of_each_exact_relation_is_left_out(self):
        left_out = set(self.document["left_out"])
        self.assertEqual(len(left_out), 3)
        for relation in self.relations("exact"):
            self.assertEqual(len(left_out & self.columns(relation)), 1)

    def test_the_mistyped_row(self):
        (relation,) = self.relations("exact_except")
        self.assertEqual(self.columns(relation), {"rooms", "rooms_heated", "rooms_unheated"})
        (violation,) = relation["violations"]
        self.assertEqual((violation["row"], violation["line"]), (1733, 1734))
        self.assertEqual(abs(int(violation["residual"])), 3)
        self.assertEqual(violation["cells"]["rooms"], "9")

    def test_near_relations(self):
        near = {self.columns(relation) for relation in self.relations("near")}
        self.assertTrue(any({"age", "age^2"} <= columns for columns in near), near)

    def test_two_relations_are_mere_rounding(self):
        within = {self.columns(relation) for relation in self.relations("within_recorded_precision")}
        shares = frozenset({"share_rent", "share_energy", "share_upkeep", "constant"})
        self.assertEqual(within, {frozenset({"floor_area_m2", "floor_area_sqft"}), shares})
        ratios = self.document["recording"]["distance_ratios"]
        self.assertLess(ratios[1], math.sqrt(2))
        self.assertGreater(ratios[2], 3)

    def test_grounds(self):
        verdict = self.document["verdict"]
        self.assertEqual(verdict["overall"], "singular")
        after = verdict["after_leaving_out"]
        self.assertEqual(after["overall"], "unreliable")
        grades = {ground: finding["grade"] for ground, finding in after["grounds"].items()}
        self.assertEqual(
            grades, {"identified": "pass", "computable": "pass", "recorded": "fail", "informative": "fail"}
        )

    def test_the_rare_level_is_mentioned(self):
        said = [note["text"] for note in self.document["notes"]]
        said.append(self.document["verdict"]["grounds"]["informative"]["finding"])
        self.assertTrue(any("peat" in text for text in said), said)

    def test_the_repaired_design_is_left_with_the_rare_level(self):
        run = audit("--json", "-", design="repaired.txt")
        self.assertEqual(run.returncode, 0, run.stderr)
        document = json.loads(run.stdout)
        self.assertEqual(document["rank"]["nullity"], 0)
        self.assertEqual(document["verdict"]["overall"], "guarded")
        grades = {ground: finding["grade"] for ground, finding in document["verdict"]["grounds"].items()}
        self.assertEqual(
            grades, {"identified": "pass", "computable": "pass", "recorded": "pass", "informative": "caution"}
        )


if __name__ == "__main__":
    unittest.main()
