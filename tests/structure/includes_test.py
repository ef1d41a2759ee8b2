"""Shows that includes.py lets the order pass and catches each way of breaking it."""
import pathlib
import tempfile
import unittest

import includes

TREE = {
    "base/result.hpp": "",
    "table/piece.hpp": '#include "base/result.hpp"\n#include <vector>\n',
    "exact/rank.hpp": '#include "table/piece.hpp"\n',
    "audit/audit.cpp": '#include "audit/audit.hpp"\n\n  #  include "exact/rank.hpp"\n',
    "audit/audit.hpp": "",
    "recheck/recheck.cpp": '#include "base/result.hpp"\n',
    "command/main.cpp": '#include "recheck/recheck.hpp"\n#include "audit/audit.hpp"\n',
    "recheck/recheck.hpp": "",
    "gramproof.hpp": '#include "audit/audit.hpp"\n',
}


class Includes(unittest.TestCase):
    def breaches_of(self, changes):
        with tempfile.TemporaryDirectory() as folder:
            source = pathlib.Path(folder)
            for name, text in {**TREE, **changes}.items():
                (source / name).parent.mkdir(exist_ok=True)
                (source / name).write_text(text, encoding="utf-8")
            return includes.check(source)[1]

    def test_the_order_passes(self):
        self.assertEqual(self.breaches_of({}), [])

    def test_each_breach_is_caught(self):
        cases = (
            ("a station below", "table/piece.cpp", '#include "exact/rank.hpp"\n', "table/piece.cpp:1"),
            ("the line is counted", "base/a.cpp", '\n\n#include "table/piece.hpp"\n', "base/a.cpp:3"),
            ("an .inl counts too", "base/a.inl", '#include "table/piece.hpp"\n', "base/a.inl:1"),
            ("recheck sees base alone", "recheck/a.cpp", '#include "exact/rank.hpp"\n', "recheck/a.cpp:1"),
            ("recheck is not in the chain", "audit/a.cpp", '#include "recheck/recheck.hpp"\n', "audit/a.cpp:1"),
            ("relative paths hide the station", "audit/a.cpp", '#include "audit.hpp"\n', "audit/a.cpp:1"),
            ("angle brackets do not hide it", "base/a.cpp", "#include <table/piece.hpp>\n", "base/a.cpp:1"),
            ("a folder that is no station", "helpers/a.cpp", "", "helpers/a.cpp"),
            ("a file outside the stations", "loose.cpp", "", "loose.cpp"),
            ("the public header is for others", "audit/a.cpp", '#include "gramproof.hpp"\n', "audit/a.cpp:1"),
            ("the public header without main", "gramproof.hpp", '#include "command/run.hpp"\n', "gramproof.hpp:1"),
        )
        for why, name, text, place in cases:
            with self.subTest(why):
                found = self.breaches_of({"command/run.hpp": "", name: text})
                self.assertEqual(len(found), 1, found)
                self.assertTrue(found[0].startswith(place), found[0])


if __name__ == "__main__":
    unittest.main()
