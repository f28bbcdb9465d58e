#!/usr/bin/python3
"""The drainage network of the demo, held against networkx: order, critical path, slack; and the laws its tables must keep."""
import unittest

import networkx

from support import CommandTest, demo_town, table

SUBAREAS_ALL = '\n[output]\nfolder = "result"\nsubareas = "all"\n'


class DemoNetwork(CommandTest):
    def setUp(self):
        super().setUp()
        demo_town(self.folder / "town")
        study = self.folder / "town/study.toml"
        study.write_text(study.read_text().replace('\n[output]\nfolder = "result"\n', SUBAREAS_ALL))
        self.assertIn('subareas = "all"', study.read_text())
        self.repeated("run", "town/study.toml")
        self.outlets = table(self.folder / "town/result/tables/outlets.csv")
        self.subareas = table(self.folder / "town/result/tables/subareas.csv")

    def own_graph(self):
        """Each subarea as an edge from a source into its point, as long as its own time; ways between points beside."""
        graph = networkx.DiGraph()
        own = {r["subarea"]: float(r["own_time_min"]) for r in self.subareas}
        for row in self.outlets:
            graph.add_edge("source", row["name"], minutes=own[row["name"]])
            if row["next_point"]:
                graph.add_edge(row["name"], row["next_point"], minutes=float(row["way_min"]))
        return graph

    def test_the_points_make_a_directed_tree(self):
        graph = self.own_graph()
        graph.remove_node("source")
        self.assertTrue(networkx.is_directed_acyclic_graph(graph))
        self.assertTrue(networkx.is_forest(graph.to_undirected()))
        self.assertGreater(graph.number_of_edges(), 3)

    def test_critical_ways_run_down_the_order_of_networkx(self):
        graph = self.own_graph()
        graph.remove_node("source")
        place = {name: i for i, name in enumerate(networkx.topological_sort(graph))}
        self.assertEqual(set(place), {row["name"] for row in self.outlets})
        longest = 0
        for row in self.outlets:
            way = row["critical_way"].split(" > ")
            self.assertEqual(way, sorted(way, key=place.get), row["name"])
            self.assertEqual(way[-1], row["name"])
            longest = max(longest, len(way))
        self.assertGreater(longest, 2)

    def test_what_lies_above_a_point_is_listed_and_nothing_else(self):
        graph = self.own_graph()
        graph.remove_node("source")
        for row in self.outlets:
            above = networkx.ancestors(graph, row["name"]) | {row["name"]}
            self.assertEqual({r["subarea"] for r in self.subareas if r["point"] == row["name"]}, above)
            self.assertEqual(int(row["subareas"]), len(above))

    def test_the_critical_path_is_that_of_networkx(self):
        # Times in the tables are to 0.001 and 0.0001 min; a path of n ways adds n roundings.
        for row in self.outlets:
            graph = self.own_graph()
            above = networkx.ancestors(graph, row["name"]) | {row["name"]}
            path = networkx.dag_longest_path(graph.subgraph(above), weight="minutes")
            self.assertEqual(row["critical_way"], " > ".join(path[1:]), row["name"])
            self.assertEqual(row["last_subarea"], path[1])
            length = networkx.path_weight(graph, path, "minutes")
            self.assertAlmostEqual(length, float(row["time_of_concentration_min"]), delta=0.0005 * (len(path) + 1))

    def test_the_slack_is_that_of_networkx(self):
        for row in self.outlets:
            graph = self.own_graph()
            below = networkx.shortest_path_length(graph.reverse(), row["name"], weight="minutes")
            latest = {name: below[name] + graph["source"][name]["minutes"] for name in below if name != "source"}
            for subarea in (r for r in self.subareas if r["point"] == row["name"]):
                slack = max(latest.values()) - latest[subarea["subarea"]]
                self.assertAlmostEqual(slack, float(subarea["slack_min"]), delta=0.01, msg=subarea)
                self.assertEqual(subarea["arrives_last"] == "yes", subarea["subarea"] == row["last_subarea"])

    def test_rows_add_up_and_shares_make_the_whole(self):
        for row in self.outlets:
            rows = [r for r in self.subareas if r["point"] == row["name"]]
            for r in rows:
                self.assertAlmostEqual(float(r["own_time_min"]) + float(r["way_min"]), float(r["arrival_min"]), delta=1.01e-4)
                self.assertAlmostEqual(float(r["arrival_min"]) + float(r["slack_min"]), float(row["time_of_concentration_min"]),
                                       delta=6.1e-4)
            self.assertAlmostEqual(sum(float(r["share_of_area_percent"]) for r in rows), 100, delta=0.01 * len(rows))
            others = [float(r["slack_min"]) for r in rows if r["arrives_last"] == "no"]
            if others:
                self.assertAlmostEqual(min(others), float(row["lead_min"]), delta=6e-4)
            else:
                self.assertEqual(row["lead_min"], "")
            self.assertEqual([float(r["slack_min"]) for r in rows], sorted(float(r["slack_min"]) for r in rows))

    def test_the_shares_of_a_way_make_its_length(self):
        ways = [r for r in self.outlets if r["next_point"]]
        self.assertGreater(len(ways), 3)
        for row in ways:
            shares = [float(row[f"way_{regime}_percent"]) for regime in ("sheet", "shallow", "channel", "water")]
            self.assertAlmostEqual(sum(shares), 100, delta=0.01)
        for row in (r for r in self.outlets if not r["next_point"]):
            self.assertEqual(row["way_min"], "")


class ListedSubareas(CommandTest):
    def test_without_the_key_eleven_rows_a_point_are_listed_at_most(self):
        demo_town(self.folder / "town")
        self.done("run", "town/study.toml")
        rows = table(self.folder / "town/result/tables/subareas.csv")
        counts = {}
        for row in rows:
            counts[row["point"]] = counts.get(row["point"], 0) + 1
        self.assertLessEqual(max(counts.values()), 11)
        self.assertEqual(sum(r["arrives_last"] == "yes" for r in rows), len(counts))


if __name__ == "__main__":
    unittest.main()
