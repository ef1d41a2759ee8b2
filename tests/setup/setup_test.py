"""Runs .ci/setup with stand-ins for dpkg-query, apt-get and sudo, so that nothing is installed by a test.

    setup_test.py SETUP
"""
import os
import pathlib
import subprocess
import sys
import tempfile
import unittest

SETUP = pathlib.Path(sys.argv.pop(1))
NOBODY = 65534

# Each stand-in notes how it was called. dpkg-query knows the packages named in $MISSING to be absent.
STAND_INS = {
    "dpkg-query": 'for last; do :; done\ncase " $MISSING " in *" $last "*) exit 1 ;; esac\necho installed\n',
    "apt-get": 'echo "apt-get $*" >>"$CALLS"\nexit "${APT_STATUS:-0}"\n',
    "sudo": 'test -n "$SUDO_ALLOWED" || exit 1\ntest "$1" = -n && shift\necho "sudo $1" >>"$CALLS"\nexec "$@"\n',
}


class Setup(unittest.TestCase):
    def setUp(self):
        folder = tempfile.TemporaryDirectory()
        self.addCleanup(folder.cleanup)
        self.folder = pathlib.Path(folder.name)
        self.folder.chmod(0o777)
        for name, body in STAND_INS.items():
            (self.folder / name).write_text("#!/bin/sh\n" + body, encoding="ascii")
            (self.folder / name).chmod(0o755)
        # A copy, because nobody may have no way into the folder of the project.
        (self.folder / "setup").write_bytes(SETUP.read_bytes())
        self.calls = self.folder / "calls"
        self.calls.touch()
        self.calls.chmod(0o666)

    def run_setup(self, *arguments, missing="", as_root=False, sudo=False, apt_status=0):
        environment = {
            "PATH": f"{self.folder}:/usr/bin:/bin",
            "MISSING": missing,
            "CALLS": str(self.calls),
            "APT_STATUS": str(apt_status),
            "SUDO_ALLOWED": "yes" if sudo else "",
        }
        if as_root and os.geteuid() != 0:
            self.skipTest("needs root")
        user = NOBODY if os.geteuid() == 0 and not as_root else None
        command = ["bash", str(self.folder / "setup"), *arguments]
        run = subprocess.run(
            command, env=environment, user=user, capture_output=True, text=True, cwd=self.folder, check=False
        )
        return run, self.calls.read_text(encoding="ascii").splitlines()

    def test_nothing_is_done_when_all_is_there(self):
        for purpose in ("build", "tests"):
            run, calls = self.run_setup(purpose)
            self.assertEqual((run.returncode, calls, run.stdout, run.stderr), (0, [], "", ""))

    def test_root_installs_what_is_missing_and_no_more(self):
        run, calls = self.run_setup("tests", missing="zstd libfmt-dev", as_root=True)
        self.assertEqual((run.returncode, run.stdout), (0, ""), run.stderr)
        self.assertEqual(len(calls), 2)
        self.assertTrue(calls[0].endswith(" update"), calls)
        self.assertTrue(calls[1].endswith(" install --no-install-recommends libfmt-dev zstd"), calls)

    def test_sudo_is_used_where_it_asks_for_no_password(self):
        run, calls = self.run_setup("build", missing="cmake", sudo=True)
        self.assertEqual(run.returncode, 0, run.stderr)
        self.assertEqual(sum(call.startswith("apt-get") for call in calls), 2)
        self.assertTrue(calls[-1].endswith("install --no-install-recommends cmake"), calls)

    def test_others_are_told_the_command(self):
        run, calls = self.run_setup("build", missing="cmake g++")
        self.assertEqual((run.returncode, calls), (2, []), run.stderr)
        self.assertIn("apt-get install --no-install-recommends g++ cmake\n", run.stdout)

    def test_building_does_without_the_packages_of_the_tests(self):
        run, calls = self.run_setup("build", missing="doctest-dev")
        self.assertEqual((run.returncode, calls), (0, []), run.stderr)

    def test_a_failed_installation_is_no_success(self):
        run, _ = self.run_setup("build", missing="cmake", sudo=True, apt_status=100)
        self.assertEqual(run.returncode, 100)

    def test_the_purpose_must_be_said(self):
        for arguments in ((), ("everything",)):
            run, calls = self.run_setup(*arguments)
            self.assertEqual((run.returncode, calls), (2, []))
            self.assertIn(".ci/setup tests", run.stderr)


if __name__ == "__main__":
    unittest.main()
