#!/usr/bin/python3
"""Mapped lines and points as folders, archives and virtual layers; nothing that a file names elsewhere is fetched."""
import http.server
import shlex
import subprocess
import threading
import unittest
import zipfile

from osgeo import gdal, ogr

from support import CommandTest, system_of, table

BROOK = "LINESTRING(500021 5399959,500041 5399949)"
GML = """<?xml version="1.0"?><wfs:FeatureCollection xmlns:wfs="http://www.opengis.net/wfs" xmlns:gml="http://www.opengis.net/gml" xmlns:t="http://t/"
 xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance"
 xsi:schemaLocation="http://t/ {server}/?SERVICE=WFS&amp;VERSION=1.0.0&amp;REQUEST=DescribeFeatureType&amp;TYPENAME=t:a">
 <gml:featureMember><t:a fid="a.1"><t:shape><gml:LineString srsName="EPSG:25832"><gml:coordinates>500021,5399959 500041,5399949</gml:coordinates>
 </gml:LineString></t:shape></t:a></gml:featureMember></wfs:FeatureCollection>"""


class Listener:
    """A server on this machine that counts what is asked of it."""

    def __init__(self, test):
        asked = self.asked = []

        class Handler(http.server.BaseHTTPRequestHandler):
            def do_GET(self):
                asked.append(self.path)
                self.send_error(404)

            do_HEAD = do_POST = do_GET

            def log_message(self, *_):
                pass

        server = http.server.ThreadingHTTPServer(("127.0.0.1", 0), Handler)
        threading.Thread(target=server.serve_forever, daemon=True).start()
        test.addCleanup(server.server_close)
        test.addCleanup(server.shutdown)
        self.address = "http://127.0.0.1:%d" % server.server_port


class VectorFormats(CommandTest):
    def setUp(self):
        super().setUp()
        self.small_study()

    def brook(self, driver, name):
        file = ogr.GetDriverByName(driver).CreateDataSource(str(self.folder / name))
        layer = file.CreateLayer("brook", system_of(25832), ogr.wkbLineString)
        feature = ogr.Feature(layer.GetLayerDefn())
        feature.SetGeometry(ogr.CreateGeometryFromWkt(BROOK))
        layer.CreateFeature(feature)
        del feature, layer, file

    def study(self, name, more=""):
        (self.folder / "study.toml").write_text(
            f'[terrain]\nelevation = "dem.tif"\nchannels = "{name}"\n[surface]\ncover = "cover.tif"\nbook = "book.csv"\n'
            f'[rain]\ntwo_year_24_hour = "90 mm"\n{more}')
        return "study.toml"

    def test_a_file_geodatabase_an_archive_and_a_virtual_layer_give_one_result(self):
        self.brook("GPKG", "brook.gpkg")
        self.brook("OpenFileGDB", "brook.gdb")
        self.brook("ESRI Shapefile", "brook.shp")
        with zipfile.ZipFile(self.folder / "brook.zip", "w") as archive:
            for path in self.folder.glob("brook.[sdp]??"):
                if path.is_file():
                    archive.write(path, "of the town/" + path.name)
        (self.folder / "brook.vrt").write_text('<OGRVRTDataSource><OGRVRTLayer name="brook"><SrcDataSource relativeToVRT="1">brook.gdb</SrcDataSource>'
                                               "</OGRVRTLayer></OGRVRTDataSource>")
        azimuths = set()
        for name in ("brook.gpkg", "brook.gdb", "brook.zip", "brook.vrt"):
            self.done("run", self.study(name), "--replace")
            azimuths.add(gdal.Open(str(self.folder / "result/rasters/flow_azimuth.tif")).ReadAsArray().tobytes())
            (used,) = [file for file in self.result()["inputs"] if file["file"] == name]
            self.assertEqual(len(used["sha256"]), 64)
            self.assertIn("terrain-edited", [row["notice"] for row in table(self.folder / "result/tables/review.csv")])
        self.assertEqual(len(azimuths), 1)

    def test_the_command_that_states_a_reference_system_makes_a_table_of_points_usable(self):
        (self.folder / "inlets.csv").write_text("name,easting,northing\nMill,500040,5399940\n")
        words = self.small_study()
        sentence = self.refused(1, "run", *words, "--points", "inlets.csv", says=("inlets.csv has no reference system",))
        command = sentence[sentence.index("ogr2ogr"):].rstrip(".").replace("nnnnn", "25832")
        subprocess.run(shlex.split(command), cwd=self.folder, check=True)
        self.done("run", *words, "--points", "inlets-placed.gpkg")
        (row,) = table(self.folder / "result/tables/outlets.csv")
        self.assertEqual(row["name"], "Mill")

    def test_nothing_that_a_file_names_elsewhere_is_fetched(self):
        listener = Listener(self)
        self.brook("GPKG", "brook.gpkg")
        (self.folder / "brook.gml").write_text(GML.format(server=listener.address))
        source = '<SrcDataSource relativeToVRT="1">%s</SrcDataSource>'
        layers = {
            "of gml.vrt": source % "brook.gml",
            "system.vrt": source % "brook.gpkg" + f"<LayerSRS>{listener.address}/system</LayerSRS>",
            "away.vrt": f"<SrcDataSource>/vsicurl/{listener.address}/brook.gpkg</SrcDataSource>",
            "service.vrt": source % "service.xml"}
        for name, content in layers.items():
            (self.folder / name).write_text(f'<OGRVRTDataSource><OGRVRTLayer name="brook">{content}</OGRVRTLayer></OGRVRTDataSource>')
        (self.folder / "service.xml").write_text(f"<OGRWFSDataSource><URL>{listener.address}/</URL></OGRWFSDataSource>")
        for name in ("brook.gml", *layers, "service.xml", listener.address + "/brook.gpkg", f"WFS:{listener.address}/"):
            run = self.rillclock("check", self.study(name))
            self.assertIn(run.returncode, (0, 1), run.stderr)
            if name == "brook.gml":
                self.assertEqual([path.name for path in self.folder.glob("*.gfs")], [])
        self.assertEqual(listener.asked, [])


if __name__ == "__main__":
    unittest.main()
