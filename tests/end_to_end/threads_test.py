#!/usr/bin/python3
"""A run works on as many threads as --threads or GDAL_NUM_THREADS says."""
import collections
import os
import pathlib
import subprocess
import time
import unittest

import numpy as np

from support import COMMAND, CommandTest, hills


class Threads(CommandTest):
    def setUp(self):
        super().setUp()
        self.words = self.small_study()
        self.ground(values=hills(700, 700))
        self.cover(values=np.ones((700, 700), np.uint8))

    def lasting_threads(self, *words, **variables):
        """How many threads are there for more than half of a run. What reads ahead, writes files or makes checksums beside the work is there for less."""
        environment = {name: value for name, value in os.environ.items() if name != "GDAL_NUM_THREADS"} | variables
        run = subprocess.Popen([COMMAND, "run", *self.words, "--replace", *words], cwd=self.folder, env=environment,
                               stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        seen, looks = collections.Counter(), 0
        while run.poll() is None:
            try:
                seen.update(thread.name for thread in pathlib.Path(f"/proc/{run.pid}/task").iterdir())
                looks += 1
            except FileNotFoundError:   # it ended meanwhile
                pass
            time.sleep(0.001)
        self.assertEqual(run.returncode, 0)
        return sum(count > looks / 2 for count in seen.values())

    def test_one_thread_is_one_and_more_are_more(self):
        self.assertEqual(self.lasting_threads("--threads", "1"), 1)
        self.assertGreaterEqual(self.lasting_threads("--threads", "4"), 4)

    def test_the_variable_of_the_raster_library_counts_where_no_option_does(self):
        self.assertEqual(self.lasting_threads(GDAL_NUM_THREADS="1"), 1)
        self.assertGreaterEqual(self.lasting_threads(GDAL_NUM_THREADS="4"), 4)


if __name__ == "__main__":
    unittest.main()
