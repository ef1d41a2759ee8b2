"""What README.md says of the program is so: its examples run, its table of the design language is understood term by term, and its
table of options is that of --help.

    readme_test.py GRAMPROOF PROJECT
"""
import os
import pathlib
import re
import subprocess
import sys
import tempfile
import unittest

PROJECT = pathlib.Path(sys.argv.pop())
GRAMPROOF = pathlib.Path(sys.argv.pop())
README = (PROJECT / "README.md").read_text(encoding="utf-8")


def section(title):
    return re.search(rf"^## {re.escape(title)}\n(.*?)(?=^## |\Z)", README, re.MULTILINE | re.DOTALL).group(1)


def first_cells(text):
    """First cells of a table's rows, without head and rule."""
    rows = [line.split(" | ")[0].lstrip("| ") for line in text.splitlines() if line.startswith("| ")]
    return rows[2:]


def small_table():
    """Forty rows with the columns of which the README speaks."""
    head = 'age,"net income",income,residents,a,b,c,x,tenure,region,grade,share_rent,share_food'
    lines = [head]
    for row in range(40):
        numbers = [19 + row * 7 % 53, 900 + row * 311 % 977, 700 + row * 173 % 881, 1 + row * 5 % 7]
        numbers += [1 + row * 11 % 17, 2 + row * 13 % 19, 3 + row * 3 % 23, 1 + row * 29 % 31, row * 17 % 37]
        texts = [("north", "south", "North East")[row % 3], ("low", "mid", "high")[row * row % 7 % 3]]
        shares = [row * 23 % 29, row * 19 % 41]
        lines.append(",".join(str(cell) for cell in numbers + texts + shares))
    return "\n".join(lines) + "\n"


class Readme(unittest.TestCase):
    def setUp(self):
        folder = tempfile.TemporaryDirectory()
        self.addCleanup(folder.cleanup)
        self.folder = pathlib.Path(folder.name)
        (self.folder / "examples").symlink_to(PROJECT / "examples")
        (self.folder / "small.csv").write_text(small_table(), encoding="utf-8")

    def run_in_folder(self, command, **options):
        path = f"{GRAMPROOF.parent}:{os.environ['PATH']}"
        return subprocess.run(
            command, cwd=self.folder, env={**os.environ, "PATH": path}, capture_output=True, text=True, check=False, **options
        )

    def test_the_examples_run(self):
        examples = re.findall(r"^    (.*gramproof check .*)$", section("Auditing a design"), re.MULTILINE)
        self.assertGreaterEqual(len(examples), 4)
        for example in examples:
            with self.subTest(example):
                run = self.run_in_folder(["bash", "-o", "pipefail", "-c", example])
                self.assertIn(run.returncode, (0, 1), run.stderr)

    def test_a_verdict_is_checked_as_shown(self):
        commands = re.findall(r"^    (gramproof .*)$", section("Checking a verdict"), re.MULTILINE)
        self.assertEqual([command.split()[1] for command in commands], ["check", "recheck"])
        self.assertIn(self.run_in_folder(commands[0].split()).returncode, (0, 1))
        run = self.run_in_folder(commands[1].split())
        self.assertEqual((run.returncode, run.stderr), (0, ""))

    def test_the_examples_of_why_run(self):
        examples = re.findall(r"^    (gramproof why .*)$", section("Why a column goes"), re.MULTILINE)
        self.assertGreaterEqual(len(examples), 3)
        for example in examples:
            with self.subTest(example):
                run = self.run_in_folder(["bash", "-c", example])
                self.assertEqual((run.returncode, run.stderr), (0, ""))
                self.assertIn("can", run.stdout.splitlines()[0])

    def check_design(self, term):
        design = term if term == "constant" else f"constant, {term}"
        return self.run_in_folder([GRAMPROOF, "check", "small.csv", "--design", design])

    def test_each_term_of_the_language_is_understood(self):
        terms = [term for cell in first_cells(section("The design language")) for term in re.findall("`([^`]+)`", cell)]
        self.assertGreaterEqual(len(terms), 20)
        for term in terms:
            with self.subTest(term):
                run = self.check_design(term)
                self.assertIn(run.returncode, (0, 1), run.stderr)

    def test_what_is_not_built_says_so(self):
        for term in ("lag(age, 1)", "difference(age, 1)", "effects(region)", "year(a)", "month(a)", "day_number(a)"):
            with self.subTest(term):
                run = self.check_design(term)
                self.assertEqual((run.returncode, run.stdout), (2, ""))
                self.assertIn("not built yet", run.stderr)

    def test_the_options_are_those_of_help(self):
        written = {
            option for cell in first_cells(section("Options of `check`")) for option in re.findall(r"--[a-z-]+", cell)
        }
        run = self.run_in_folder([GRAMPROOF, "check", "--help"])
        self.assertEqual(run.returncode, 0, run.stderr)
        offered = set(re.findall(r"^\s*(--[a-z-]+)", run.stdout, re.MULTILINE))
        self.assertEqual(written - {"--version"}, offered - {"--version"})


if __name__ == "__main__":
    unittest.main()
