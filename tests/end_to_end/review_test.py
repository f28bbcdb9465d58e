#!/usr/bin/python3
"""The review table over several runs: a person's words stay with what they were written for."""
import csv
import unittest

from support import CommandTest, demo_town, table


class Review(CommandTest):
    def setUp(self):
        super().setUp()
        demo_town(self.folder / "town")
        self.repeated("run", "town/study.toml", "-q")
        self.path = self.folder / "town/result/tables/review.csv"

    def write_words(self, words):
        """Writes words into the reviewed column, by point and notice."""
        rows = table(self.path)
        for row in rows:
            row["reviewed"] = words.get((row["point"], row["notice"]), "")
        with open(self.path, "w", encoding="utf-8", newline="") as file:
            writer = csv.DictWriter(file, fieldnames=rows[0].keys())
            writer.writeheader()
            writer.writerows(rows)

    def words(self):
        return {(row["point"], row["notice"]): row["reviewed"] for row in table(self.path) if row["reviewed"]}

    def change(self, old, new):
        study = self.folder / "town/study.toml"
        text = study.read_text()
        self.assertIn(old, text)
        study.write_text(text.replace(old, new))

    def key(self, part, point):
        return next((row["point"], row["notice"]) for row in table(self.path) if row["point"] == point and part in row["text"])

    def test_rows_come_by_their_effect_on_the_time(self):
        effects = [float(row["effect_min"] or 0) for row in table(self.path)]
        self.assertEqual(effects, sorted(effects, reverse=True))

    def test_words_stay_when_the_study_is_run_again_with_other_rain(self):
        tail = self.key("the last 1 %", "Mill pond outlet")
        self.write_words({tail: 'A wet meadow: "known", MB'})
        self.change('"62 mm"', '"70 mm"')
        self.done("run", "town/study.toml", "--replace")
        self.assertEqual(self.words(), {tail: 'A wet meadow: "known", MB'})

    def test_a_word_on_what_is_noticed_no_longer_is_dropped_and_told(self):
        moved = self.key("was moved", "Market inlet")
        tail = self.key("the last 1 %", "Mill pond outlet")
        self.write_words({moved: "on the kerb", tail: "fine"})
        self.change('move_within = "5 m"', 'move_within = "0.5 m"')
        run = self.rillclock("run", "town/study.toml", "--replace")
        self.assertEqual(run.returncode, 0, run.stderr)
        self.assertIn(f"review: the notice {moved[1]} at 'Market inlet' applies no longer; its word \"on the kerb\" was dropped", run.stderr)
        self.assertNotIn(moved, self.words())

    def test_a_table_that_cannot_be_read_stops_the_run_before_words_are_lost(self):
        text = self.path.read_text().replace(",", ";")
        self.path.write_text(text)
        self.refused(1, "run", "town/study.toml", "--replace", says=("review.csv", "would be lost"))
        self.assertEqual(self.path.read_text(), text)


if __name__ == "__main__":
    unittest.main()
