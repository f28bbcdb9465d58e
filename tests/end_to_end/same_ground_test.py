#!/usr/bin/python3
"""One ground written in several ways: the answers are the same."""
import unittest

import numpy as np
from osgeo import gdal

from support import CommandTest, FOOT, hills, write_points

# Heights in steps of 2^-6 m: exact in every type used here.
GROUND = np.round(hills() * 64) / 64
RASTERS = ("travel_time", "contributing_area", "flow_azimuth", "catchment", "regime")
# What a study says once about all of them, since defaults depend on the elevations' own step.
SETTINGS = '[terrain]\nelevation = "dem.tif"\nvertical_step = "0.2 m"\npond_depth = "0.3 m"\n'
REST = ('[surface]\ncover = "cover.tif"\nbook = "book.csv"\n[points]\nfile = "points.geojson"\n'
        '[rain]\ntwo_year_24_hour = "90 mm"\n')


class SameGround(CommandTest):
    def answer(self, folder, terrain="", **options):
        """Runs the ground as `options` write it; gives the rasters and the times of the points."""
        self.ground(**({"values": GROUND} | options))
        codes = np.ones(GROUND.shape, np.uint8)
        codes[10:20, 5:30], codes[25:, 20:] = 2, 3
        grid = {key: options[key] for key in ("cell", "corner", "epsg") if key in options}
        self.cover(**({"values": codes} | grid))
        self.book()
        unit = grid.get("cell", 2.0) / 2.0
        write_points(self.folder / "points.geojson", [(name, (x * unit, y * unit)) for name, x, y in
                     (("upper", 500_041, 5_399_961), ("lower", 500_047, 5_399_925))], grid.get("epsg", 25832))
        (self.folder / "study.toml").write_text(SETTINGS + terrain + REST)
        self.done("run", "study.toml", "--out", folder)
        rasters = {}
        for name in RASTERS:
            file = gdal.Open(str(self.folder / folder / "rasters" / f"{name}.tif"))
            rasters[name] = file.ReadAsArray()
        return rasters, self.result(folder)["outlets"]

    def assert_same(self, one, other):
        for name in RASTERS:
            np.testing.assert_array_equal(one[0][name], other[0][name], name)
        self.assertEqual(one[1], other[1])

    def test_a_grid_that_begins_in_the_south(self):
        self.assert_same(self.answer("north"), self.answer("south", south_up=True))

    def test_whole_numbers_with_scale_and_offset(self):
        stored = (GROUND - 50.0) * 64
        self.assertTrue((stored == np.round(stored)).all())
        self.assert_same(self.answer("plain"), self.answer("scaled", values=stored, kind=gdal.GDT_Int32, scale=1 / 64, offset=50.0))

    def test_single_precision_in_place_of_double(self):
        self.assert_same(self.answer("double"), self.answer("single", kind=gdal.GDT_Float32))

    def test_tiled_and_packed(self):
        self.assert_same(self.answer("plain"), self.answer("packed", options=["TILED=YES", "COMPRESS=DEFLATE", "PREDICTOR=3"]))

    def test_heights_in_feet_and_in_metres_differ_by_rounding_only(self):
        metres, feet = self.answer("metres"), self.answer("feet", values=GROUND / FOOT, unit="ft")
        for name in ("flow_azimuth", "catchment", "regime", "contributing_area"):
            np.testing.assert_array_equal(metres[0][name], feet[0][name], name)
        np.testing.assert_allclose(metres[0]["travel_time"], feet[0]["travel_time"], rtol=1e-6)
        for one, other in zip(metres[1], feet[1]):
            self.assertAlmostEqual(one["time_of_concentration_s"] / other["time_of_concentration_s"], 1, delta=1e-9)

    def test_a_grid_in_feet_and_one_in_metres_differ_by_rounding_only(self):
        system = "+proj=tmerc +lat_0=0 +lon_0=9 +k=0.9996 +x_0=500000 +y_0=0 +ellps=GRS80 +units={unit} +type=crs"
        for unit, metres_per_unit in (("ft", FOOT), ("us-ft", 1200 / 3937)):
            metres = self.answer(f"metres-{unit}", epsg=system.format(unit="m"))
            feet = self.answer(unit, epsg=system.format(unit=unit), cell=2 / metres_per_unit,
                               corner=(500_000 / metres_per_unit, 5_400_000 / metres_per_unit))
            for name in ("flow_azimuth", "catchment", "regime"):
                np.testing.assert_array_equal(metres[0][name], feet[0][name], name)
            for name in ("contributing_area", "travel_time"):
                np.testing.assert_allclose(metres[0][name], feet[0][name], rtol=1e-6)

    def test_a_unit_in_the_study_stands_in_for_one_in_the_file(self):
        self.assert_same(self.answer("file", values=GROUND / FOOT, unit="ft"),
                         self.answer("study", terrain='elevation_unit = "ft"\n', values=GROUND / FOOT, unit=None))

    def test_void_cells_by_value_and_by_not_a_number(self):
        holes = GROUND.copy()
        holes[5:8, 30:36] = np.nan
        by_value = np.where(np.isnan(holes), -9999.0, holes)
        self.assert_same(self.answer("nan", values=holes), self.answer("value", values=by_value, nodata=-9999.0))


if __name__ == "__main__":
    unittest.main()
