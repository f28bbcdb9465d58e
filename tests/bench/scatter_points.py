"""Design points scattered over a terrain by contributing area: as many with small catchments as with large ones.

    scatter_points.py RESULT FOLDER COUNT...

Reads contributing areas from the rasters of a result and writes FOLDER/COUNT.geojson. The point of a study of one is where most of the
terrain leaves it.
"""
import json
import pathlib
import sys

import numpy as np
from osgeo import gdal, osr

gdal.UseExceptions()
LEAST_CELLS = 2000      # of a catchment
CLASSES = 40            # of area, each as likely as any other


def scattered(area_cells, count):
    """Positions of cells; the same ones for the same areas."""
    if count == 1:
        return [int(np.nanargmax(area_cells))]
    large = np.flatnonzero(area_cells > min(LEAST_CELLS, np.nanmax(area_cells) / 50))
    size = np.log(area_cells.ravel()[large])
    cells, edges = np.histogram(size, CLASSES)
    chance = 1 / cells[np.clip(np.digitize(size, edges) - 1, 0, CLASSES - 1)]
    return np.random.default_rng(5).choice(large, size=count, replace=False, p=chance / chance.sum()).tolist()


def collection(raster, cells):
    left, width, _, top, _, height = raster.GetGeoTransform()
    code = osr.SpatialReference(wkt=raster.GetProjection()).GetAuthorityCode(None)
    def feature(number, cell):
        row, column = divmod(cell, raster.RasterXSize)
        place = [left + (column + 0.5) * width, top + (row + 0.5) * height]
        return {"type": "Feature", "properties": {"name": f"P{number}"}, "geometry": {"type": "Point", "coordinates": place}}
    return {"type": "FeatureCollection", "crs": {"type": "name", "properties": {"name": f"EPSG:{code}"}},
            "features": [feature(number, cell) for number, cell in enumerate(cells)]}


def main():
    result, folder, *counts = sys.argv[1:]
    raster = gdal.Open(str(pathlib.Path(result) / "rasters" / "contributing_area.tif"))
    _, width, _, _, _, height = raster.GetGeoTransform()
    area_cells = raster.ReadAsArray() / abs(width * height)
    for count in map(int, counts):
        (pathlib.Path(folder) / f"{count}.geojson").write_text(json.dumps(collection(raster, scattered(area_cells, count))))


main()
