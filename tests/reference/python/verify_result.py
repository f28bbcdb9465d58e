#!/usr/bin/python3
"""Recomputes the rasters of a result folder from the elevations, the land cover and the published formulas, and compares.

    verify_result.py RESULT DEM [--study STUDY.toml] [--band N] [--elevation-unit-m F]

Without a study: the directions have no cycle and every way ends at a root; spill elevation equals a morphological
reconstruction; contributing area solves the sparse linear system of the directions; catchments hang together.
With the study: travel time, regime and ponding are recomputed too, from this file's own reading of the rules. It shares no
code with the program. Prints a line for each check; exit status 1 if any fails.

Choices where the rules can be read in more than one way
 1. The fall over the window is read at exactly `slope_window`, interpolated between the two cells there.
 2. A path that ends at a root before the window does: its fall over its own length, at least the floor. A path that has not
    fallen by `vertical_step` when the search meets the root: likewise its whole fall over its whole length, at least the floor.
 3. The search for the place where the path has fallen by `vertical_step` goes on through channels and water: only
    the window ends where overland turns into channel or water.
 4. "Turns into channel or water" means the first cell downstream that is channel or water; the fall down to its centre counts.
 5. Which floor counts, and so how far the search goes, is decided by the cell the search starts from.
 6. A water cell is a river if its path falls by more than `vertical_step` within the whole window, with no earlier end but a root.
 7. A channel begins where the contributing area, own cell included, is at least `channel_from`, and at least 20 times the area
    of the cell.
 8. A step takes everything (class, slope, regime, hydraulic radius) from the cell it starts in. The hydraulic radius
    goes by the contributing area of that cell, own area included.
 9. The distance from the divide grows through cells of every regime. Channel and open water end sheet flow for good: what
    leaves them has an index beyond every limit.
10. A step in which sheet flow ends is split by length at the earlier of the two limits; the rest is shallow
    concentrated flow at the slope of the same cell.
11. A ponded cell takes the smaller of its regime's step time and length / min(√(g·depth), pond_speed), depth being spill elevation
    less ground. This holds for sheet, shallow, channel and open water alike.
12. g = 9.80665 m/s²; 1 ft = 0.3048 m; the shallow coefficients of NEH 630 table 15-3 in ft/s times 0.3048; paved and unpaved only:
    20.3282 and 16.1345 ft/s.
13. A cell with the fallback class (unknown or no cover) is treated as one of that class.
14. A cell beside a void is one that touches it by side or corner.
15. Regime of a cell in the raster: the regime in which its step starts.
16. Kinematic sheet flow goes by the distance x from the divide: a step that begins at x0 and ends, or leaves sheet flow, at x1 takes
    K (n/√S)^0.6 (x1^0.6 − x0^0.6) / i^0.4, with n and S of its cell; C i in place of i takes C of the cell's class.
17. With unbiased path length every step is 0.96194 times as long, for all purposes; areas and what "3 cells" means stay.
18. A chart of velocity by slope is read on log-log paper; beyond its ends the line of the last two points goes on.
19. With kinematic sheet flow the time of a cell is under the intensity that result.json states for the last point on its way down, and a
    cell without a point is not looked at. A ponded cell takes the smaller time under that storm.
Rain by duration, rain zones, mapped channels and channels under the design storm stand in verify_rain_and_channels.py, with their choices.
"""
import argparse
import csv
import json
import math
import pathlib
import re
import sys
import tomllib

import numpy as np
import pyproj
from osgeo import gdal, osr
from scipy import sparse
from scipy.sparse import linalg
from skimage.morphology import reconstruction

from verify_rain_and_channels import DesignChannels, MappedChannels, Rain, catchment_of, prevailing_zone

gdal.UseExceptions()

LEAVES, NO_AZIMUTH, NO_TIME = 65534, 65535, -9999.0
GRAVITY, FOOT, INCH = 9.80665, 0.3048, 0.0254
STEPS = {0: (-1, 0), 45: (-1, 1), 90: (0, 1), 135: (1, 1), 180: (1, 0), 225: (1, -1), 270: (0, -1), 315: (-1, -1)}
SHALLOW_FT_PER_S = {"pavement": 20.328, "grassed waterway": 16.135, "nearly bare": 9.965, "straight row crops": 8.762,
                    "short-grass pasture": 6.962, "contour crops or woodland": 5.032, "forest litter or hay meadow": 2.516}
SHEET, SHALLOW, CHANNEL, WATER, NONE = "sheet", "shallow", "channel", "water", ""


# ---------------------------------------------------------------- rasters and the ground

class Raster:
    """One band, north up: its values, which of them are void, its grid and reference system."""

    def __init__(self, path, band=1):
        self.file = gdal.Open(str(path))
        source = self.file.GetRasterBand(band)
        self.values = source.ReadAsArray()
        source.GetMetadata()  # GDAL looks for names beside the file only once it was asked for this
        self.categories = source.GetCategoryNames() or []
        self.unit = source.GetUnitType()
        self.is_whole = np.issubdtype(self.values.dtype, np.integer)
        nodata = source.GetNoDataValue()
        self.void = np.zeros(self.values.shape, bool)
        if nodata is not None:
            self.void |= self.values == np.array(nodata).astype(self.values.dtype)
        if not self.is_whole:
            self.void |= ~np.isfinite(self.values)
        self.scale = source.GetScale() or 1.0
        offset = source.GetOffset() or 0.0
        if self.scale != 1.0 or offset != 0.0:
            self.values = self.values * self.scale + offset
        x, self.width, _, y, _, step = self.file.GetGeoTransform()
        if step > 0:
            self.values, self.void = self.values[::-1], self.void[::-1]
            y, step = y + step * self.values.shape[0], -step
        self.left, self.top, self.height = x, y, -step
        self.system = osr.SpatialReference(wkt=self.file.GetProjection())
        self.system.SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)

    def centres(self):
        rows, columns = np.indices(self.values.shape)
        return np.column_stack([(self.left + (columns + 0.5) * self.width).ravel(),
                                (self.top - (rows + 0.5) * self.height).ravel()])


class Ground:
    """Lengths of the steps out of each row, and the area of its cells (whole cm², as the results are defined)."""

    def __init__(self, raster):
        rows = raster.values.shape[0]
        if raster.system.IsGeographic():
            self.geographic(raster, rows)
        else:
            unit = raster.system.GetLinearUnits()
            width, height = raster.width * unit, raster.height * unit
            self.east, self.south = np.full(rows, width), np.full(rows, height)
            self.diagonal, self.area = np.full(rows, math.hypot(width, height)), np.full(rows, width * height)
        self.area = np.round(self.area * 1e4) / 1e4
        middle = rows // 2
        self.cell_side = min(self.east[middle], self.south[middle])

    def weigh_steps(self, weight):
        for lengths in (self.east, self.south, self.diagonal):
            lengths *= weight

    def geographic(self, raster, rows):
        a, inverse = raster.system.GetSemiMajor(), raster.system.GetInvFlattening()
        earth = pyproj.Geod(a=a, rf=inverse)
        latitude = raster.top - (np.arange(rows + 1) + 0.5) * raster.height
        zero, step = np.zeros(rows), np.full(rows, raster.width)
        here, below = latitude[:-1], np.maximum(latitude[1:], -90)
        self.east = earth.inv(zero, here, step, here)[2]
        self.south = earth.inv(zero, here, zero, below)[2]
        self.diagonal = earth.inv(zero, here, step, below)[2]
        for lengths in (self.south, self.diagonal):
            lengths[-1] = lengths[-2] if rows > 1 else lengths[-1]
        # Area between two parallels of the ellipsoid, from the authalic latitude.
        e = math.sqrt(1 - (1 - 1 / inverse) ** 2)
        b2 = (a * (1 - 1 / inverse)) ** 2

        def q(degrees):
            s = np.sin(np.radians(degrees))
            return s / (1 - (e * s) ** 2) + np.arctanh(e * s) / e
        self.area = np.radians(raster.width) * b2 / 2 * (q(here + raster.height / 2) - q(here - raster.height / 2))


# ---------------------------------------------------------------- the forest of directions

class Forest:
    """Where each cell drains to, by flat index; roots and voids point to themselves."""

    def __init__(self, azimuth, ground):
        rows, columns = azimuth.shape
        row, column = np.indices(azimuth.shape)
        to_row, to_column = row.copy(), column.copy()
        length = np.zeros(azimuth.shape)
        self.faults = []
        known = np.isin(azimuth, list(STEPS) + [LEAVES, NO_AZIMUTH])
        if not known.all():
            self.faults.append(f"{(~known).sum()} cells have an azimuth that is none of the eight")
        for degrees, (dr, dc) in STEPS.items():
            here = azimuth == degrees
            to_row[here] += dr
            to_column[here] += dc
            kind = ground.east if dr == 0 else ground.diagonal if dc != 0 else ground.south
            rows_of = row[here] - (1 if dr < 0 else 0)
            length[here] = kind[np.clip(rows_of, 0, rows - 1)]
        outside = (to_row < 0) | (to_row >= rows) | (to_column < 0) | (to_column >= columns)
        if outside.any():
            self.faults.append(f"{outside.sum()} cells drain to a neighbour outside the data instead of being roots")
            to_row[outside], to_column[outside], length[outside] = row[outside], column[outside], 0
        self.is_void = (azimuth == NO_AZIMUTH).ravel()
        self.down = (to_row * columns + to_column).ravel()
        self.length = length.ravel()
        self.is_root = (self.down == np.arange(self.down.size)) & ~self.is_void
        into_void = self.is_void[self.down] & ~self.is_void
        if into_void.any():
            self.faults.append(f"{into_void.sum()} cells drain into a void instead of being roots")
        self.find_levels()

    def find_levels(self):
        """Groups cells by their number of steps to the root: a level drains into the one before it."""
        end, steps = self.down.copy(), (self.down != np.arange(self.down.size)).astype(np.int64)
        for _ in range(self.down.size.bit_length()):
            steps, end = steps + steps[end], end[end]
        circling = ~(self.is_root | self.is_void)[end]
        if circling.any():
            self.faults.append(f"{circling.sum()} cells never reach a root: the directions have a cycle")
            return
        steps[self.is_void] = -1
        order = np.argsort(steps, kind="stable")
        bounds = np.searchsorted(steps[order], np.arange(steps.max() + 2))
        self.levels = [order[a:b] for a, b in zip(bounds[:-1], bounds[1:])]

    def largest_arriving(self, weight):
        """At each cell, the greatest over the arriving ways of the sum of weights from the divide; 0 at divides."""
        greatest = np.zeros(self.down.size)
        for cells in reversed(self.levels[1:]):
            np.maximum.at(greatest, self.down[cells], greatest[cells] + weight[cells])
        return greatest

    def sum_to_root(self, weight):
        total = np.zeros(self.down.size)
        for cells in self.levels[1:]:
            total[cells] = weight[cells] + total[self.down[cells]]
        return total

    def contributing_area(self, own):
        """Solves (I − Dᵀ) a = own, where D has a one at (cell, the cell it drains to)."""
        n = self.down.size
        flows = np.flatnonzero(~self.is_root & ~self.is_void)
        # Numbered from the divides to the roots, cells have a system that is triangular: its factors are no larger than itself.
        order = np.concatenate(self.levels[::-1] + [np.flatnonzero(self.is_void)])
        number = np.empty(n, np.int64)
        number[order] = np.arange(n)
        system = sparse.identity(n, format="csc") - sparse.csc_matrix(
            (np.ones(flows.size), (number[self.down[flows]], number[flows])), shape=(n, n))
        return linalg.spsolve(system, own[order], permc_spec="NATURAL")[number]


def spill_elevation(z, void):
    """The lowest level at which water gets out, by morphological reconstruction from the edge and from beside the voids."""
    far = z[~void].max() + 1 if (~void).any() else 1.0
    ground = np.where(void, far, z).astype(float)
    open_ground = np.pad(void, 1, constant_values=True)
    beside = np.zeros(z.shape, bool)
    for dr in (0, 1, 2):
        for dc in (0, 1, 2):
            beside |= open_ground[dr:dr + z.shape[0], dc:dc + z.shape[1]]
    seed = np.where(beside, ground, far)
    return reconstruction(seed, ground, method="erosion", footprint=np.ones((3, 3)))


# ---------------------------------------------------------------- the study

# Bieger et al. 2015, width and depth; the Piedmont (Harman et al. 1999) is printed in feet by square miles.
REGIONS = {"United States": ("2.70 m * km2^0.352", "0.30 m * km2^0.213"), "Laurentian Upland": ("4.15 m * km2^0.308", "0.31 m * km2^0.202"),
           "Atlantic Plain": ("2.22 m * km2^0.363", "0.24 m * km2^0.323"),
           "Appalachian Highlands": ("3.12 m * km2^0.415", "0.26 m * km2^0.287"),
           "Interior Plains": ("2.56 m * km2^0.351", "0.38 m * km2^0.191"),
           "Interior Highlands": ("23.23 m * km2^0.121", "0.27 m * km2^0.267"),
           "Rocky Mountain System": ("1.24 m * km2^0.435", "0.23 m * km2^0.225"),
           "Intermontane Plateaus": ("1.11 m * km2^0.415", "0.07 m * km2^0.329"),
           "Pacific Mountain System": ("2.76 m * km2^0.399", "0.23 m * km2^0.294")}
METRES = {"m": 1.0, "km": 1000.0, "cm": 0.01, "mm": 0.001, "ft": FOOT, "in": INCH}
SQUARE_METRES = {"m2": 1.0, "ha": 1e4, "km2": 1e6, "ac": 4046.8564224, "ft2": FOOT ** 2}
SPEEDS = {"m/s": 1.0, "ft/s": FOOT}
DURATIONS = {"s": 1.0, "min": 60.0, "h": 3600.0}


def quantity(text, units):
    if text == "unlimited":
        return math.inf
    number, unit = re.fullmatch(r"\s*([-+0-9.eE]+)\s*(\S+)\s*", text).groups()
    return float(number) * units[unit]


def read_chart(path):
    """Of each surface the slopes and the velocities in m/s of its points."""
    with open(path, newline="", encoding="utf-8") as file:
        header, *rows = list(csv.reader(file))
    lines = {}
    for column, name in enumerate(header[1:], 1):
        surface, unit = re.fullmatch(r"(.*)_(ft|m)_s", name).groups()
        points = [(float(row[0]) * (0.01 if header[0] == "slope_percent" else 1.0), float(row[column])) for row in rows if row[column]]
        slope, velocity = np.array(points).T
        lines[surface] = (slope, velocity * (FOOT if unit == "ft" else 1.0))
    return lines


def on_chart(line, slope):
    """Log-log between the points, and on beyond both ends."""
    x, y = np.log(line[0]), np.log(line[1])
    place = np.clip(np.searchsorted(x, np.log(slope)), 1, len(x) - 1)
    return np.exp(y[place - 1] + (np.log(slope) - x[place - 1]) * (y[place] - y[place - 1]) / (x[place] - x[place - 1]))


def power_law(text):
    """Reads "2.70 m * km2^0.352" or "3 m": the function of an area in km², in metres."""
    if "*" not in text:
        constant = quantity(text, METRES)
        return lambda km2: np.full_like(km2, constant)
    factor, unit, exponent = re.fullmatch(r"\s*([0-9.]+)\s*(\w+)\s*\*\s*km2\^([0-9.]+)\s*", text).groups()
    return lambda km2: float(factor) * METRES[unit] * km2 ** float(exponent)


class Study:
    """What the study states, and the defaults, in metres and seconds."""

    def __init__(self, path, dem, ground, factor):
        stated = tomllib.loads(pathlib.Path(path).read_text(encoding="utf-8"))
        terrain, timing = stated.get("terrain", {}), stated.get("timing", {})
        surface = stated["surface"]
        folder = pathlib.Path(path).parent
        self.cover, self.book = folder / surface["cover"], folder / surface["book"]
        self.cover_band, self.fallback = surface.get("band", 1), surface.get("fallback_class")
        quantum = dem.scale * factor if dem.is_whole else 0.0
        side = ground.cell_side

        def length(table, key, standard):
            return quantity(table[key], METRES) if key in table else standard
        self.window = length(terrain, "slope_window", max(20.0, 3 * side))
        self.vertical_step = length(terrain, "vertical_step", max(0.2, quantum, side / 10))
        self.pond_depth = length(terrain, "pond_depth", max(0.3, self.vertical_step))
        self.pond_speed = quantity(terrain.get("pond_speed", "2 m/s"), SPEEDS)
        self.is_kinematic = timing.get("sheet") == "kinematic"
        self.constant = timing.get("sheet_constant", 0.933)
        self.takes_runoff = timing.get("sheet_rain") == "runoff"
        self.soil_group = surface.get("soil_group")
        self.chart = read_chart(folder / timing["velocity_chart"]) if timing.get("shallow") == "chart" else None
        self.intensity = None  # m/s, of the storm that is looked at
        least = stated.get("peaks", {}).get("least_time", "5 min")
        self.rains = Rain(stated, folder, quantity(least, DURATIONS))
        self.stated_rain = length(stated["rain"], "two_year_24_hour", None)
        # Where zones alone have rain, any depth stands until the zone of a point is looked at.
        self.rain = None if self.is_kinematic else self.depth_of_zone(None) or 0.1
        self.channels = folder / terrain["channels"] if "channels" in terrain else None
        self.sheet_limit = length(timing, "sheet_limit", 100 * FOOT)
        self.index_limit = math.inf if timing.get("sheet_limit_rule") == "stated" else 100 * FOOT
        self.by_cover = timing.get("shallow", "by cover") != "paved and unpaved"
        floors = timing.get("slope_floor", {})
        self.floor_overland, self.floor_channel = floors.get("overland", 0.001), floors.get("channel", 0.0001)
        begins = timing.get("channel_from", "5 ha")
        self.channel_from = math.inf if begins == "mapped only" else quantity(begins, SQUARE_METRES)
        channel = timing.get("channel", {})
        self.channel_n = channel.get("n", 0.045)
        set_of_region = REGIONS[channel.get("region", "United States")]
        width = power_law(channel.get("width", set_of_region[0]))
        depth = power_law(channel.get("depth", set_of_region[1]))
        self.width, self.side_slope = width, channel.get("side_slope", 0.0)
        self.is_design_storm = channel.get("flow") == "design storm"
        if "hydraulic_radius" in channel:
            radius = quantity(channel["hydraulic_radius"], METRES)
            self.radius = lambda km2: np.full_like(km2, radius)
        else:
            self.radius = lambda km2: width(km2) * depth(km2) / (width(km2) + 2 * depth(km2))


    def depth_of_zone(self, file):
        """The 2-year 24-hour depth in a rain zone, None for what lies outside of all; None where it is not known."""
        if self.stated_rain is not None:
            return self.stated_rain
        rain = self.rains.of_zone(file)
        return rain.two_year_24_hour() if hasattr(rain, "two_year_24_hour") else None


class Surface:
    """Sheet n, shallow velocity at slope 1 (m/s) and depth of open water (0: none) of every cell."""

    def __init__(self, study, dem):
        cover = Raster(study.cover, study.cover_band)
        places = dem.centres()
        if not dem.system.IsSame(cover.system):
            change = pyproj.Transformer.from_crs(dem.system.ExportToWkt(), cover.system.ExportToWkt(), always_xy=True)
            places = np.column_stack(change.transform(places[:, 0], places[:, 1]))
        column = np.floor((places[:, 0] - cover.left) / cover.width).astype(int)
        row = np.floor((cover.top - places[:, 1]) / cover.height).astype(int)
        rows, columns = cover.values.shape
        inside = (row >= 0) & (row < rows) & (column >= 0) & (column < columns)
        code = np.full(len(places), -1, np.int64)
        code[inside] = np.where(cover.void, -1, cover.values)[row[inside], column[inside]]
        book = self.read_book(study)
        known = np.isin(code, list(book))
        if study.fallback is not None:
            code[~known] = study.fallback
        self.is_known = np.isin(code, list(book)) | dem.void.ravel()
        self.n, self.k, self.depth = np.zeros(code.size), np.zeros(code.size), np.zeros(code.size)
        self.runoff, self.lines = np.ones(code.size), []
        for number, (n, k, depth, runoff, line) in book.items():
            here = code == number
            self.n[here], self.k[here], self.depth[here] = n, k, depth
            self.runoff[here] = runoff
            if study.chart and here.any() and not depth:
                self.lines.append((np.flatnonzero(here), study.chart[line]))

    def shallow_speed(self, slope):
        speed = self.k * np.sqrt(slope)
        for cells, line in self.lines:
            speed[cells] = on_chart(line, slope[cells])
        return speed

    @staticmethod
    def read_book(study):
        book = {}
        with open(study.book, newline="", encoding="utf-8") as file:
            for row in csv.DictReader(file):
                if row.get("water_depth_m") or row.get("water_depth_ft"):
                    depth = float(row.get("water_depth_m") or float(row["water_depth_ft"]) * FOOT)
                    c = row.get(f"c_{(study.soil_group or '-').lower()}") or row.get("c") or 1.0
                    book[int(row["code"])] = (0.0, 0.0, depth, float(c), None)
                    continue
                runoff = 1.0
                if study.takes_runoff or study.is_design_storm:
                    runoff = float(row.get(f"c_{(study.soil_group or '-').lower()}") or row["c"])
                kind = row.get("shallow_type")
                paved = row["paved"] == "yes" if row.get("paved") else kind == "pavement"
                if not study.by_cover:
                    k = (20.3282 if paved else 16.1345) * FOOT
                elif row.get("shallow_n"):
                    radius_ft = float(row.get("shallow_radius_ft") or float(row["shallow_radius_m"]) / FOOT)
                    k = 1.49 / float(row["shallow_n"]) * radius_ft ** (2 / 3) * FOOT
                elif kind:
                    k = SHALLOW_FT_PER_S[kind] * FOOT
                else:
                    k = float(row.get("shallow_k_m_s") or float(row["shallow_k_ft_s"]) * FOOT)
                book[int(row["code"])] = (float(row["n_typical"]), k, 0.0, runoff, row.get("chart_line") or row["name"])
        return book


# ---------------------------------------------------------------- travel time

class Travel:
    """Step times of all cells, and what they are made of."""

    def __init__(self, study, forest, surface, z_m, h_m, area_m2, own_area_m2, mapped=None):
        self.study, self.forest, self.h, self.mapped, self.own_area_m2 = study, forest, h_m, mapped, own_area_m2
        down_hill = ~forest.is_void
        water = (surface.depth > 0) & down_hill
        river = np.zeros(water.size, bool)
        cells = np.flatnonzero(water)
        river[cells] = self.fall_ahead(cells) > study.vertical_step
        large = (area_m2 >= study.channel_from) & (area_m2 >= 20 * own_area_m2) & down_hill
        drawn = mapped.is_mapped & down_hill if mapped else np.zeros(water.size, bool)
        self.is_water = water & ~river & ~drawn
        self.is_channel = (river | drawn | (large & ~water)) & down_hill
        self.slope = np.ones(water.size)
        overland = np.flatnonzero(down_hill & ~self.is_water & ~self.is_channel)
        self.slope[overland] = self.slope_ahead(overland, study.floor_overland, self.is_water | self.is_channel)
        channel = np.flatnonzero(self.is_channel)
        self.slope[channel] = self.slope_ahead(channel, study.floor_channel, np.zeros(water.size, bool))
        self.surface, self.z_m, self.area_m2 = surface, z_m, area_m2
        if not study.is_kinematic:
            self.find_step_times(surface, z_m, area_m2)

    def under(self, intensity):
        """The step times under another storm."""
        self.study.intensity = intensity
        self.find_step_times(self.surface, self.z_m, self.area_m2)
        return self.step_s

    def fall_ahead(self, cells):
        """Fall over the window, which a root alone ends earlier."""
        down, length, window = self.forest.down, self.forest.length, self.study.window
        at, gone, fall = cells.copy(), np.zeros(cells.size), np.zeros(cells.size)
        going = np.arange(cells.size)
        while going.size:
            going = going[~self.forest.is_root[at[going]]]
            step = length[at[going]]
            after = down[at[going]]
            share = np.minimum(1, (window - gone[going]) / step)
            fall[going] += share * (self.h[at[going]] - self.h[after])
            gone[going] += step
            at[going] = after
            going = going[gone[going] < window]
        return fall

    def slope_ahead(self, cells, floor, ends_window):
        """Slope ahead of the cells; their windows end at cells of `ends_window`. All cells walk their ways in step."""
        down, length, is_root = self.forest.down, self.forest.length, self.forest.is_root
        window, least = self.study.window, self.study.vertical_step
        slope = np.full(cells.size, float(floor))
        at, gone = cells.copy(), np.zeros(cells.size)
        searching = np.zeros(cells.size, bool)      # the window is behind, and its fall was too small
        going = np.flatnonzero(~is_root[cells])
        while going.size:
            start = self.h[cells[going]]
            before, here = at[going], gone[going]
            after = down[before]
            there = here + length[before]
            fall_here, fall_there = start - self.h[before], start - self.h[after]
            done = np.zeros(going.size, bool)

            window_ends = ~searching[going] & ((there >= window) | ends_window[after] | is_root[after])
            end = np.minimum(there, window)
            share = (end - here) / (there - here)
            fall_end = fall_here + share * (fall_there - fall_here)
            good = window_ends & (fall_end >= least)
            slope[going[good]] = (fall_end / end)[good]
            done |= good
            searching[going[window_ends & ~good]] = True

            found = searching[going] & ~done & (fall_there >= least)
            with np.errstate(divide="ignore", invalid="ignore"):
                place = here + (least - fall_here) / (fall_there - fall_here) * (there - here)
            slope[going[found]] = least / place[found]
            done |= found

            at_root = ~done & is_root[after]
            slope[going[at_root]] = (fall_there / there)[at_root]
            done |= at_root
            done |= searching[going] & (there * floor > least)      # what could be found now is under the floor

            at[going], gone[going] = after, there
            going = going[~done]
        return np.maximum(slope, floor)

    def find_step_times(self, surface, z_m, area_m2):
        study, forest, slope = self.study, self.forest, self.slope
        length = forest.length
        weight = np.where(self.is_water | self.is_channel, 1e6, surface.n * length / np.sqrt(slope))
        self.index = forest.largest_arriving(weight)
        self.distance = forest.largest_arriving(length)

        with np.errstate(divide="ignore", invalid="ignore"):
            share = np.minimum((study.index_limit - self.index) / weight, (study.sheet_limit - self.distance) / length)
        share = np.clip(np.nan_to_num(share, nan=0.0), 0, 1)
        shallow_speed = surface.shallow_speed(slope)
        with np.errstate(divide="ignore", invalid="ignore"):
            overland = self.sheet_part(share, weight) + np.where(share < 1, (1 - share) * length / shallow_speed, 0.0)
            radius, channel_n = self.channel_radius_and_n(area_m2)
            channel = length * channel_n / (radius ** (2 / 3) * np.sqrt(slope))
            water = length / np.sqrt(GRAVITY * surface.depth)
            depth = h_minus_z(self.h, z_m)
            ponded = length / np.minimum(np.sqrt(GRAVITY * depth), study.pond_speed)
        time = np.where(self.is_water, water, np.where(self.is_channel, channel, overland))
        self.is_ponded = (depth > study.pond_depth) & ~forest.is_void
        time = np.where(self.is_ponded, np.minimum(time, ponded), time)
        flows = ~forest.is_root & ~forest.is_void
        self.step_s = np.where(flows, time, 0.0)
        if getattr(study, "is_design_storm", False):
            runoff_m2 = forest.contributing_area(np.where(forest.is_void, 0.0, self.own_area_m2 * surface.runoff))
            channels = DesignChannels(study.rains, study.width, study.side_slope, study.channel_n, self.mapped.sections if self.mapped else {})
            self.step_s = channels.steps(self, self.step_s, runoff_m2, area_m2, np.where(self.is_ponded, ponded, np.inf))
        in_sheet = (self.index < study.index_limit) & (self.distance < study.sheet_limit)
        self.regime = np.select([forest.is_void, self.is_water, self.is_channel, in_sheet], [NONE, WATER, CHANNEL, SHEET], SHALLOW)

    def channel_radius_and_n(self, area_m2):
        """By area, or those of the mapped section where there is one."""
        radius, n = self.study.radius(area_m2 / 1e6), np.full(area_m2.size, self.study.channel_n)
        for cell, section in (self.mapped.sections if self.mapped else {}).items():
            n[cell] = section.n
            radius[cell] = section.radius() or radius[cell]
        return radius, n

    def sheet_part(self, share, weight):
        """Time of the share of each step that is sheet flow."""
        if not self.study.is_kinematic:
            return self.sheet_time(self.index + share * weight) - self.sheet_time(self.index)
        grown = ((self.distance + share * self.forest.length) / FOOT) ** 0.6 - (self.distance / FOOT) ** 0.6
        rain = (self.surface.runoff if self.study.takes_runoff else 1.0) * self.study.intensity * 3600 / INCH
        return 60 * self.study.constant * (self.surface.n / np.sqrt(self.slope)) ** 0.6 * grown / rain ** 0.4

    def sheet_time(self, index_m):
        """NRCS: 0.007 u^0.8 / P^0.5 hours, u in feet, P in inches."""
        return 3600 * 0.007 * (index_m / FOOT) ** 0.8 / math.sqrt(self.study.rain / INCH)


def h_minus_z(h, z):
    return np.maximum(h - z, 0.0)


# ---------------------------------------------------------------- the checks

class Verification:
    def __init__(self):
        self.failed = False

    def say(self, name, fault=None):
        self.failed |= fault is not None
        print(f"{name}: " + ("holds" if fault is None else "FAILS: " + fault))

    def compare(self, name, found, expected, where, relative, absolute):
        found, expected = np.ravel(found).astype(float), np.ravel(expected).astype(float)
        off = where & ~(np.abs(found - expected) <= relative * np.abs(expected) + absolute)
        if not off.any():
            self.say(f"{name} ({where.sum()} cells)")
            return
        excess = np.where(off, np.abs(found - expected), -1)
        worst = int(np.argmax(np.where(np.isnan(excess), np.inf, excess)))
        row, column = divmod(worst, self.columns)
        self.say(name, f"{off.sum()} of {where.sum()} cells differ, most at row {row}, column {column} (from 0): "
                       f"result {found[worst]!r}, recomputed {expected[worst]!r}")


def vertical_factor(dem, stated):
    if stated:
        return stated
    feet = {"ft": FOOT, "foot": FOOT, "feet": FOOT, "us-ft": 1200 / 3937, "us survey foot": 1200 / 3937}
    return feet.get((dem.unit or "m").lower(), 1.0)


def points_of(forest, catchment):
    """The cell of each point: where the way down leaves the point's catchment. Faults are sentences."""
    label, points, faults = catchment.ravel(), {}, []
    leaves = (label > 0) & ~forest.is_void & (forest.is_root | (label[forest.down] != label))
    for cell in np.flatnonzero(leaves):
        if int(label[cell]) in points:
            faults.append(f"catchment {label[cell]} is left at more than one cell")
        points[int(label[cell])] = cell
    lost = (label == 0) & ~forest.is_void & ~forest.is_root & (label[forest.down] != 0)
    if lost.any():
        faults.append(f"{lost.sum()} cells belong to no point although a cell on their way down does")
    return points, faults


def last_point_cells(forest, points):
    """The cell of the last point on the way down from each cell; -1 where there is none."""
    is_point = np.zeros(forest.down.size, bool)
    is_point[list(points.values())] = True
    last = np.full(forest.down.size, -1)
    for cells in forest.levels:
        below = np.where(forest.is_root[cells], -1, last[forest.down[cells]])
        last[cells] = np.where((below < 0) & is_point[cells], cells, below)
    return last


def time_to_last_point(forest, to_root, points):
    """Root time less that of the last point on the way down, or of the root where there is none."""
    last = last_point_cells(forest, points)
    return to_root - np.where(last < 0, 0.0, to_root[last])


def check_times_by_storm(check, travel, forest, found, points, result):
    """Compares the times to each last point under that point's own storm."""
    last = last_point_cells(forest, points)
    period = result["parameters"]["rain"]["raster_return_period"]
    for outlet in result["outlets"]:
        of_point = last == points[outlet["number"]]
        if not of_point.any():
            continue
        storm = next(storm for storm in outlet["storms"] if storm["return_period"] == period)
        to_root = forest.sum_to_root(travel.under(storm["intensity_mm_per_h"] / 3.6e6))
        check.compare(f"travel time to {outlet['name']}", found, time_to_last_point(forest, to_root, points) / 60, of_point, 1e-4, 1e-3)


def check_storms_of_zones(check, study, forest, result, points, dem, own):
    """The rain zone of each point, and that its storms read the intensity of that zone; the rain file of each point."""
    if not study.rains.zones_file:
        return {}
    files, zone = study.rains.zones(dem)
    zone[forest.is_void] = 0
    of_point, faults = {}, []
    for outlet in result["outlets"]:
        inside = catchment_of(forest, points[outlet["number"]])
        file, share = prevailing_zone(zone, own, files, inside, study.rains.everywhere is not None)
        of_point[outlet["number"]] = file
        told = outlet["rain_zone"]
        if told["rain"] != (file or study.rains.name_everywhere or told["rain"]) or abs(told["share_of_area"] - share) > 1e-5:
            faults.append(f"{outlet['name']} has {told}, recomputed {file} with {share:.5f}")
        for storm in outlet.get("storms", []) if study.is_kinematic else []:
            for row in storm["iteration"]:
                read = study.rains.of_zone(file).intensity(row["assumed_min"] * 60, storm["return_period"], study.rains.least_s) * 3.6e6
                if not abs(row["intensity_mm_per_h"] / read - 1) <= 1e-4:
                    faults.append(f"{outlet['name']} reads {row['intensity_mm_per_h']} mm/h, its zone has {read:.6g}")
    check.say("rain zones of the points", "; ".join(faults[:3]) if faults else None)
    return of_point


def check_times_by_zone(check, travel, forest, found, points, zone_of_point):
    """Compares the times to each last point under the depth of its rain zone."""
    last = last_point_cells(forest, points)
    for number, cell in points.items():
        of_point = last == cell
        if of_point.any():
            travel.study.rain = travel.study.depth_of_zone(zone_of_point[number])
            travel.find_step_times(travel.surface, travel.z_m, travel.area_m2)
            minutes = time_to_last_point(forest, forest.sum_to_root(travel.step_s), points) / 60
            check.compare(f"travel time to point {number} under the rain of its zone", found, minutes, of_point, 1e-4, 1e-3)


def check_beds(check, mapped, forest, z, h, void):
    """Spill elevation where lines are mapped: the greater of the bed and that of the cell below. Gives the beds."""
    left = mapped.leaves(forest)
    check.say("water follows the mapped lines", f"{left} of their cells drain elsewhere" if left else None)
    bed = mapped.beds(forest, np.where(void, 0.0, z.ravel()))
    expected = bed.copy()
    for cells in forest.levels[1:]:
        expected[cells] = np.maximum(bed[cells], expected[forest.down[cells]])
    check.compare("spill elevation is the greater of the bed and that below", h, expected, ~void, 0, 0)
    return bed


def check_terrain(check, dem, forest, rasters, z, h, ground, mapped=None):
    for fault in forest.faults:
        check.say("directions", fault)
    if forest.faults:
        return None
    check.say("directions have no cycle and end at roots")
    void = dem.void.ravel()
    check.say("voids", None if (forest.is_void == void).all() else "the voids of the directions are not those of the elevations")
    data = ~void
    if mapped is None:
        check.compare("spill elevation equals the reconstruction", h, spill_elevation(z, dem.void), data, 0, 0)
    rising = data & (h.ravel()[forest.down] > h.ravel())
    check.say("spill elevation never rises along the way", f"it does after {rising.sum()} cells" if rising.any() else None)
    own = np.repeat(ground.area, z.shape[1])
    area = forest.contributing_area(np.where(void, 0.0, own))
    check.compare("contributing area solves the linear system", rasters["contributing_area"].values, area, data, 1e-9, 0)
    points, faults = points_of(forest, rasters["catchment"].values)
    for fault in faults:
        check.say("catchments", fault)
    check.say(f"catchments of {len(points)} points hang together") if not faults else None
    return area, own, points


def check_regime(check, travel, raster, data):
    """Compares where the raster's category names say which regime they are."""
    names = [name.lower() for name in raster.categories]
    found = np.full(raster.values.size, "", dtype=travel.regime.dtype)
    for code, name in enumerate(names):
        for regime in (SHEET, SHALLOW, CHANNEL, WATER):
            if name.startswith(regime) or name.startswith("open " + regime):
                found[raster.values.ravel() == code] = regime
    if (found == "").all():
        check.say("regime", "none of the category names begins with sheet, shallow, channel or water: " + ", ".join(names))
        return
    off = data & (found != travel.regime)
    if off.any():
        row, column = divmod(int(np.flatnonzero(off)[0]), raster.values.shape[1])
        check.say("regime", f"{off.sum()} cells differ, first at row {row}, column {column} (from 0): result "
                            f"{found[off][0]!r}, recomputed {travel.regime[off][0]!r}")
    else:
        check.say("regime")


def main():
    parser = argparse.ArgumentParser()
    parser.add_argument("result", type=pathlib.Path)
    parser.add_argument("dem")
    parser.add_argument("--study")
    parser.add_argument("--band", type=int, default=1)
    parser.add_argument("--elevation-unit-m", type=float)
    options = parser.parse_args()

    dem = Raster(options.dem, options.band)
    ground, factor = Ground(dem), vertical_factor(dem, options.elevation_unit_m)
    if options.study:
        stated = tomllib.loads(pathlib.Path(options.study).read_text(encoding="utf-8"))
        ground.weigh_steps(0.96194 if stated["surface"].get("path_length") == "unbiased" else 1.0)
    names = ["flow_azimuth", "spill_elevation", "contributing_area", "catchment"]
    names += ["travel_time", "regime"] if options.study else []
    rasters = {name: Raster(options.result / "rasters" / f"{name}.tif") for name in names}
    check = Verification()
    check.columns = dem.values.shape[1]
    z, h = dem.values, rasters["spill_elevation"].values
    forest = Forest(rasters["flow_azimuth"].values, ground)
    study = Study(options.study, dem, ground, factor) if options.study else None
    mapped = MappedChannels(study.channels, dem, study.channel_n) if study and study.channels else None
    terrain = check_terrain(check, dem, forest, rasters, z, h, ground, mapped)
    if terrain and options.study:
        area, own, points = terrain
        data = ~dem.void.ravel()
        if mapped:
            mapped.settle(forest)
            z = check_beds(check, mapped, forest, z, h, dem.void.ravel())
        surface = Surface(study, dem)
        check.say("cover", None if surface.is_known.all() else f"{(~surface.is_known).sum()} cells have a class the book does not know")
        z_m, h_m = z.ravel().astype(float) * factor, h.ravel().astype(float) * factor
        travel = Travel(study, forest, surface, z_m, h_m, area, own, mapped)
        result = json.loads((options.result / "result.json").read_text(encoding="utf-8"))
        zone_of_point = check_storms_of_zones(check, study, forest, result, points, dem, own)
        if study.is_kinematic:
            check_times_by_storm(check, travel, forest, rasters["travel_time"].values, points, result)
        elif zone_of_point:
            check_times_by_zone(check, travel, forest, rasters["travel_time"].values, points, zone_of_point)
        else:
            minutes = time_to_last_point(forest, forest.sum_to_root(travel.step_s), points) / 60
            check.compare("travel time", rasters["travel_time"].values, minutes, data, 1e-4, 1e-3)
        check_regime(check, travel, rasters["regime"], data)
    sys.exit(1 if check.failed else 0)


if __name__ == "__main__":
    main()
