#!/usr/bin/python3
"""Runs that are stopped, killed or run out of disk leave nothing behind, and an old result as it was."""
import os
import signal
import subprocess
import unittest

import numpy as np

from support import COMMAND, CommandTest, hills

ROWS, COLUMNS = 1100, 1100


class Stopping(CommandTest):
    def setUp(self):
        super().setUp()
        self.small_study()
        self.words = ["--elevation", "dem.tif", "--cover", "cover.tif", "--book", "book.csv", "--rain", "90 mm", "--replace"]
        self.done("run", *self.words)
        self.before = self.files()
        self.ground(values=hills(ROWS, COLUMNS))
        self.cover(values=np.ones((ROWS, COLUMNS), np.uint8))

    def files(self):
        return {path: path.read_bytes() for path in (self.folder / "result").rglob("*") if path.is_file()}

    def stopped_after(self, stage, with_signal, times=1):
        """Starts a larger run, and sends it a signal once it has told of a stage; gives its exit status and last line."""
        run = subprocess.Popen([COMMAND, "run", *self.words], cwd=self.folder, stderr=subprocess.PIPE, stdout=subprocess.PIPE, text=True)
        told = ""
        for line in run.stderr:
            told += line
            if line.startswith(stage):
                for _ in range(times):
                    run.send_signal(with_signal)
                break
        else:
            self.fail("the stage was never told: " + told)
        rest, errors = run.communicate(timeout=60)
        self.assertEqual(rest, "")
        return run.returncode, errors

    def test_an_interrupt_and_a_request_to_end_leave_all_as_it_was(self):
        for with_signal, status in ((signal.SIGINT, 130), (signal.SIGTERM, 143)):
            for stage in ("reading elevations", "flow directions", "travel times"):
                returned, errors = self.stopped_after(stage, with_signal)
                self.assertEqual(returned, status, stage)
                self.assertIn("stopped on request; nothing was written", errors)
                self.assert_nothing_left()
                self.assertEqual(self.files(), self.before)

    def test_the_same_signal_twice_at_once_is_one_wish(self):
        returned, _ = self.stopped_after("flow directions", signal.SIGINT, times=2)
        self.assertEqual(returned, 130)
        self.assert_nothing_left()

    def test_after_a_kill_the_old_result_stands_and_the_next_run_clears_up(self):
        returned, _ = self.stopped_after("travel times", signal.SIGKILL)
        self.assertEqual(returned, -signal.SIGKILL)
        self.assertEqual(self.files(), self.before)
        self.done("run", *self.words)
        self.assertNotEqual(self.files(), self.before)
        self.assert_nothing_left()

    def test_two_runs_into_one_folder_do_not_mix(self):
        first = subprocess.Popen([COMMAND, "run", *self.words], cwd=self.folder, stderr=subprocess.PIPE, stdout=subprocess.DEVNULL, text=True)
        for line in first.stderr:
            if line.startswith("reading elevations"):
                break
        second = self.rillclock("run", *self.words)
        first.communicate(timeout=60)
        self.assertEqual(first.returncode, 0)
        self.assertNotEqual(second.returncode, 0)
        self.assertIn("result", second.stderr)
        self.assert_nothing_left()


class Machine(CommandTest):
    def setUp(self):
        super().setUp()
        self.words = self.small_study()

    def test_a_place_that_cannot_be_written_to(self):
        if not os.path.ismount("/proc"):
            self.skipTest("no folder is known here that not even root may write to")
        self.refused(3, "run", *self.words, "--out", "/proc/rillclock-result", says=("/proc",))

    def test_a_place_that_is_not_there(self):
        self.refused(1, "run", *self.words, "--out", "missing/result", says=("missing", "does not exist"))

    def test_a_result_folder_that_is_a_file(self):
        (self.folder / "result").write_text("mine")
        self.refused(1, "run", *self.words, "--replace", says=("result", "not a folder"))
        self.assertEqual((self.folder / "result").read_text(), "mine")

    def test_a_file_size_limit_is_a_fault_of_the_machine(self):
        run = subprocess.run(["bash", "-c", 'ulimit -f 8; exec "$0" "$@"', COMMAND, "run", *self.words], cwd=self.folder,
                             capture_output=True, text=True, check=False)
        self.assertEqual(run.returncode, 3, run.stderr)
        self.assertFalse((self.folder / "result").exists())
        self.assert_nothing_left()


class FullDisk(CommandTest):
    def setUp(self):
        super().setUp()
        self.words = self.small_study()
        self.disk = self.folder / "disk"
        self.disk.mkdir()

    def mount(self, kilobytes):
        if os.geteuid() != 0:
            self.skipTest("only root can make a small disk to fill")
        made = subprocess.run(["mount", "-t", "tmpfs", "-o", f"size={kilobytes}k", "tmpfs", self.disk], capture_output=True, text=True, check=False)
        if made.returncode != 0:
            self.skipTest("a small disk cannot be mounted here: " + made.stderr.strip())
        self.addCleanup(subprocess.run, ["umount", self.disk], check=False)

    def test_a_full_disk_fails_the_run_wherever_it_fills_up(self):
        self.ground(values=hills(400, 400))
        self.cover(values=np.ones((400, 400), np.uint8))
        self.mount(16)
        for kilobytes in (16, 128, 400, 900):
            subprocess.run(["mount", "-o", f"remount,size={kilobytes}k", self.disk], check=True)
            sentence = self.refused(3, "run", *self.words, "--out", "disk/result", says=(str(self.disk),))
            self.assertRegex(sentence, "[Ss]pace|disk")
            self.assertEqual(list(self.disk.iterdir()), [], kilobytes)

    def test_the_old_result_outlives_a_full_disk(self):
        self.mount(2000)
        self.done("run", *self.words, "--out", "disk/result")
        before = {path: path.read_bytes() for path in self.disk.rglob("*") if path.is_file()}
        self.ground(values=hills(700, 700))
        self.cover(values=np.ones((700, 700), np.uint8))
        self.assertEqual(self.rillclock("run", *self.words, "--out", "disk/result", "--replace").returncode, 3)
        self.assertEqual({path: path.read_bytes() for path in self.disk.rglob("*") if path.is_file()}, before)


if __name__ == "__main__":
    unittest.main()
