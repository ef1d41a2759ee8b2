"""The generator writes the file in the repository byte for byte, and the traps that examples/README.md lists are in it.

    data_test.py EXAMPLES
"""
import csv
import pathlib
import subprocess
import sys
import unittest
from fractions import Fraction

EXAMPLES = pathlib.Path(sys.argv.pop(1))
DATA = EXAMPLES / "ternholm_energy.csv"


class Data(unittest.TestCase):
    @classmethod
    def setUpClass(cls):
        with DATA.open(encoding="ascii", newline="") as lines:
            cls.rows = list(csv.DictReader(lines))

    def sums(self, *columns):
        """Exact sums of the columns in the rows where all are present; a minus sign before a name subtracts it."""
        names = [column.lstrip("-") for column in columns]
        signs = [-1 if column.startswith("-") else 1 for column in columns]
        return [
            sum(sign * Fraction(row[name]) for sign, name in zip(signs, names))
            for row in self.rows
            if all(row[name] for name in names)
        ]

    def test_regenerating_gives_the_same_bytes(self):
        made = subprocess.run([sys.executable, EXAMPLES / "make_survey.py", "-"], capture_output=True, check=True)
        self.assertEqual(made.stdout, DATA.read_bytes())

    def test_exact_relations(self):
        self.assertEqual(set(self.sums("age", "birth_year", "-interview_year")), {0})
        self.assertEqual(set(self.sums("cost_heating", "cost_lighting", "cost_cooking", "-cost_energy")), {0})
        districts = [name for name in self.rows[0] if name.startswith("district_")]
        self.assertEqual(len(districts), 5)
        self.assertEqual(set(self.sums(*districts)), {1})
        self.assertTrue(all(sum(self.sums(district)) >= 100 for district in districts))

    def test_one_mistyped_row(self):
        residuals = self.sums("rooms", "-rooms_heated", "-rooms_unheated")
        self.assertEqual([(row + 1, off) for row, off in enumerate(residuals) if off], [(1733, 3)])
        self.assertNotIn("", self.rows[1732].values())

    def test_shares_sum_to_about_100(self):
        self.assertEqual(
            set(self.sums("share_rent", "share_energy", "share_upkeep")),
            {Fraction("99.9"), Fraction(100), Fraction("100.1")},
        )

    def test_floor_area_in_two_units(self):
        factor = Fraction("10.7639104")
        off = [
            abs(Fraction(row["floor_area_m2"]) * factor - Fraction(row["floor_area_sqft"])) for row in self.rows
        ]
        self.assertLessEqual(max(off), Fraction(1, 2))
        self.assertGreater(max(off), 0)

    def test_three_peat_rows_without_gaps(self):
        peat = [row for row in self.rows if row["heating"] == "peat"]
        self.assertEqual(len(peat), 3)
        self.assertTrue(all(cell for row in peat for cell in row.values()))

    def test_gaps_and_weights(self):
        gaps = {name: sum(row[name] == "" for row in self.rows) for name in self.rows[0]}
        self.assertEqual(
            {name for name, count in gaps.items() if count},
            {"income", "build_year", "insulation_cm", "share_upkeep", "annual_kwh"},
        )
        self.assertLess(max(gaps.values()), len(self.rows) // 25)
        self.assertTrue(all(Fraction(row["weight"]) > 0 for row in self.rows))


if __name__ == "__main__":
    unittest.main()
