"""Morphological reconstruction by scikit-image on a DEM: how long it takes, and whether it agrees with a spill elevation raster.

    reconstruction.py DEM SPILL_ELEVATION

Writes lines "name TAB number": seconds, and different_cells. The DEM must have no voids.
"""
import sys
import time

import numpy as np
from osgeo import gdal
from skimage.morphology import reconstruction

gdal.UseExceptions()


def filled(elevation):
    """The depression-filled surface: erosion of a lid that touches the ground only along the edge."""
    lid = np.full_like(elevation, elevation.max())
    for edge in (np.s_[0, :], np.s_[-1, :], np.s_[:, 0], np.s_[:, -1]):
        lid[edge] = elevation[edge]
    return reconstruction(lid, elevation, method="erosion")


def main():
    elevation = gdal.Open(sys.argv[1]).ReadAsArray()
    begun = time.perf_counter()
    surface = filled(elevation)
    print(f"seconds\t{time.perf_counter() - begun:.4g}")
    print(f"different_cells\t{np.count_nonzero(surface != gdal.Open(sys.argv[2]).ReadAsArray())}")


main()
