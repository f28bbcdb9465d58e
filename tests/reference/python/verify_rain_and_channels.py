"""What verify_result.py knows of rain by duration, rain zones, mapped channels and channels under the design storm.

Readings of the rules, numbered on from verify_result.py
20. Rain zones: the zone of a cell is that of the polygon that holds its centre, the first of overlapping ones. A point has the rain of the
    zone with the greatest part of all that drains through it; where rain is stated for what lies outside, that counts as a zone too, and
    comes after those drawn. Sheet flow by NRCS takes the 2-year 24-hour depth of that zone: as the study states it, else 24 hours of the
    2-year intensity.
21. Intensity between two printed durations lies on a straight line on log-log paper; below the first duration and below `least_time`
    (5 min) it is that of the longer of the two.
22. Mapped channels have the cells that their lines pass, looked at 256 times a cell, but for those between two that touch each other: a
    line goes on corner to corner. These cells are channels, whatever covers them. The bed of such a cell is the lowest ground among it and the mapped cells
    that drain to it, one after the other; spill elevation, slopes and ponding are from the bed.
23. The section of a mapped cell is that of the line along which the water leaves it; at the end of all lines that of the last one. A
    trapezoid has R = (B + z D) D / (B + 2 D √(1 + z²)); a gutter 0.752^1.5 Sx T. Without a section R goes by area; n is the line's, else the
    study's.
24. Under the design storm the flow of a channel cell is i·ΣC·A, with i for a storm as long as the arrival of its latest water, which
    came along channels at the velocities found so; ΣC·A of all that drains through the cell, with C by cover (1 for open water that
    has none). The depth is normal for the slope of the step, in a trapezoid of `width` by area and `side_slope`, or in the mapped
    section in place of its stated depth or spread. Known here with NRCS sheet flow alone, whose time no storm changes.
"""
import csv
import math
import re

import numpy as np
from osgeo import gdal, ogr, osr

gdal.UseExceptions()
ogr.UseExceptions()

FOOT, INCH = 0.3048, 0.0254
DURATIONS = {"s": 1.0, "min": 60.0, "h": 3600.0}
PER_SECOND = {"in_h": INCH / 3600, "mm_h": 1e-3 / 3600}


class RainTable:
    """A plain table of rain: durations down, return periods across."""

    def __init__(self, path):
        with open(path, newline="", encoding="utf-8") as file:
            header, *rows = list(csv.reader(file))
        self.duration_s = np.array([float(row[0]) for row in rows]) * DURATIONS[header[0].removeprefix("duration_")]
        self.m_per_s = {}
        for column, name in enumerate(header[1:], 1):
            quantity, years, unit = re.fullmatch(r"(intensity|depth)_([\d.]+)yr_(.+)", name).groups()
            values = np.array([float(row[column]) for row in rows])
            if quantity == "intensity":
                self.m_per_s[float(years)] = values * PER_SECOND[unit]
            else:
                self.m_per_s[float(years)] = values * {"in": INCH, "mm": 1e-3}[unit] / self.duration_s

    def intensity(self, seconds, years, least_s):
        """In m/s; NaN beyond the last duration."""
        read_at = np.maximum(np.maximum(seconds, least_s), self.duration_s[0])
        found = np.exp(np.interp(np.log(read_at), np.log(self.duration_s), np.log(self.m_per_s[years])))
        return np.where(read_at > self.duration_s[-1] * (1 + 1e-12), np.nan, found)

    def two_year_24_hour(self):
        return float(self.intensity(86400.0, 2.0, 0.0)) * 86400.0


class RainFormula:
    """A formula of intensity by duration t and, where it has it, return period T."""

    def __init__(self, text):
        left, right = text.split("=")
        self.unit = PER_SECOND[re.search(r"i\[(\w+)/h\]", left).group(1) + "_h"]
        self.of_t = DURATIONS[re.search(r"t\[(\w+)\]", right).group(1)]
        right = re.sub(r"t\[\w+\]", "t", right).replace("^", "**")
        self.expression = compile(re.sub(r"(\d)\s+T", r"\1 * T", right).strip(), "formula", "eval")

    def intensity(self, seconds, years, least_s):
        t = np.maximum(seconds, least_s) / self.of_t
        return eval(self.expression, {"__builtins__": {}}, {"t": t, "T": years}) * self.unit  # of the test's own study


class Rain:
    """The rain by duration of a study: outside of all zones, and of each zone by its file."""

    def __init__(self, stated, folder, least_s):
        rain, timing = stated.get("rain", {}), stated.get("timing", {})
        self.least_s = least_s
        periods = rain.get("return_periods", [timing.get("raster_return_period", 10)])
        wanted = timing.get("raster_return_period", 10)
        self.years = float(wanted if wanted in periods else periods[0])
        self.folder, self.everywhere = folder, None
        if "file" in rain:
            self.everywhere = RainTable(folder / rain["file"])
        elif "formula" in rain:
            formula = rain["formula"]
            self.everywhere = RainFormula(formula if isinstance(formula, str) else formula[f"{self.years:g}"])
        self.name_everywhere = rain.get("file")
        self.zones_file, self.field = rain.get("zones"), rain.get("zone_field", "rain")
        self.tables = {}

    def of_zone(self, file):
        if file is None:
            return self.everywhere
        if file not in self.tables:
            self.tables[file] = RainTable(self.folder / file)
        return self.tables[file]

    def intensity(self, seconds, file=None):
        return self.of_zone(file).intensity(seconds, self.years, self.least_s)

    def zones(self, dem):
        """The rain files of the zones in their order, and the zone of each cell: its place among them + 1, 0 outside of all."""
        data = ogr.Open(str(self.folder / self.zones_file))   # kept: a layer does not keep its file
        source = data.GetLayer()
        system = source.GetSpatialRef()
        system.SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)
        change = osr.CoordinateTransformation(system, dem.system)
        files, shapes = [], []
        for feature in source:
            name = feature.GetField(self.field)
            if name not in files:
                files.append(name)
            shape = feature.GetGeometryRef().Clone()
            shape.Transform(change)
            shapes.append((files.index(name) + 1, shape))
        target = gdal.GetDriverByName("MEM").Create("", dem.values.shape[1], dem.values.shape[0], 1, gdal.GDT_Byte)
        target.SetGeoTransform((dem.left, dem.width, 0, dem.top, 0, -dem.height))
        target.SetProjection(dem.system.ExportToWkt())
        for number, shape in reversed(shapes):      # what comes first lies on top
            memory = ogr.GetDriverByName("Memory").CreateDataSource("")
            layer = memory.CreateLayer("", dem.system)
            feature = ogr.Feature(layer.GetLayerDefn())
            feature.SetGeometry(shape)
            layer.CreateFeature(feature)
            gdal.RasterizeLayer(target, [1], layer, burn_values=[number])
        return files, target.ReadAsArray().ravel()


def prevailing_zone(zone, own_area, files, inside, is_everywhere):
    """The rain file with the greatest part of the area, None for what lies outside of all, and that part as a share."""
    areas = [float(own_area[inside & (zone == number)].sum()) for number in range(len(files) + 1)]
    order = list(range(1, len(files) + 1)) + ([0] if is_everywhere else [])
    best = max(order, key=lambda number: areas[number])
    return (files[best - 1] if best else None), areas[best] / sum(areas)


def catchment_of(forest, cell):
    """Which cells drain through one, itself included."""
    inside = np.zeros(forest.down.size, bool)
    inside[cell] = True
    for cells in forest.levels[1:]:
        inside[cells] |= inside[forest.down[cells]]
    return inside


# ---------------------------------------------------------------- mapped channels

class Section:
    """The section that a line states: n alone, a trapezoid, or a gutter."""

    def __init__(self, fields, standard_n):
        def length(name):
            if fields.get(name + "_ft") is not None:
                return fields[name + "_ft"] * FOOT
            return fields.get(name + "_m")
        self.n = fields.get("n") or standard_n
        self.bottom, self.depth, self.spread = length("width"), length("depth"), length("spread")
        self.side, self.cross_fall = fields.get("side_slope") or 0.0, fields.get("cross_fall")
        self.is_gutter = self.cross_fall is not None
        self.is_trapezoid = not self.is_gutter and self.depth is not None

    def radius(self):
        """None where it goes by area."""
        if self.is_gutter:
            return 0.752 ** 1.5 * self.cross_fall * self.spread
        return trapezoid_radius(self.bottom or 0.0, self.side, self.depth) if self.is_trapezoid else None


def trapezoid_radius(bottom, side, depth):
    return (bottom + side * depth) * depth / (bottom + 2 * depth * math.sqrt(1 + side ** 2))


def corner_to_corner(way):
    """The way without the cells whose neighbours on it touch each other."""
    kept = way[:1]
    for cell in way[1:]:
        while len(kept) > 1 and max(abs(kept[-2][0] - cell[0]), abs(kept[-2][1] - cell[1])) <= 1:
            kept.pop()
        kept.append(cell)
    return kept


class MappedChannels:
    """Cells of the lines of `terrain.channels` and the sections of those whose line states one."""

    FIELDS = ("n", "width_m", "width_ft", "depth_m", "depth_ft", "side_slope", "cross_fall", "spread_m", "spread_ft")

    def __init__(self, path, dem, standard_n):
        self.shape = dem.values.shape
        self.is_mapped = np.zeros(dem.values.size, bool)
        self.sections, self.ways = {}, []
        data = ogr.Open(str(path))   # kept: a layer does not keep its file
        layer = data.GetLayer()
        system = layer.GetSpatialRef()
        system.SetAxisMappingStrategy(osr.OAMS_TRADITIONAL_GIS_ORDER)
        change = osr.CoordinateTransformation(system, dem.system)
        names = [layer.GetLayerDefn().GetFieldDefn(i).GetName() for i in range(layer.GetLayerDefn().GetFieldCount())]
        for feature in layer:
            line = feature.GetGeometryRef().Clone()
            line.Transform(change)
            way = self.cells_of(line, dem)
            fields = {name: feature.GetField(name) for name in self.FIELDS if name in names and feature.GetField(name) is not None}
            self.is_mapped[way] = True
            self.ways.append((way, Section(fields, standard_n) if fields else None))

    def cells_of(self, line, dem):
        way = []
        for i in range(1, line.GetPointCount()):
            (x, y, *_), (to_x, to_y, *_) = line.GetPoint(i - 1), line.GetPoint(i)
            share = np.linspace(0, 1, max(2, math.ceil(256 * math.hypot((to_x - x) / dem.width, (to_y - y) / dem.height))))
            rows = np.floor((dem.top - y - share * (to_y - y)) / dem.height).astype(int)
            columns = np.floor((x + share * (to_x - x) - dem.left) / dem.width).astype(int)
            for cell in zip(rows.tolist(), columns.tolist()):
                if not way or way[-1] != cell:
                    way.append(cell)
        return np.array([row * self.shape[1] + column for row, column in corner_to_corner(way)])

    def settle(self, forest):
        """Gives cells the section of the line along which they drain; to be asked once the directions are known."""
        for way, section in self.ways:
            if section is None:
                continue
            pairs = list(zip(way[:-1], way[1:])) + list(zip(way[1:], way[:-1]))
            for cell, after in pairs:
                if forest.down[cell] == after:
                    self.sections.setdefault(int(cell), section)
            for end in (way[0], way[-1]):
                if not self.is_mapped[forest.down[end]] or forest.down[end] == end:
                    self.sections.setdefault(int(end), section)

    def beds(self, forest, z):
        """Elevations with those of mapped cells lowered to the lowest that the water has met along mapped cells."""
        bed = z.astype(float).copy()
        for cells in reversed(forest.levels[1:]):
            led = cells[self.is_mapped[cells] & self.is_mapped[forest.down[cells]]]
            np.minimum.at(bed, forest.down[led], bed[led])
        return bed

    def leaves(self, forest):
        """How many mapped cells drain to one that is not mapped though their line goes on there."""
        count = 0
        for way, _ in self.ways:
            on = set(way.tolist())
            count += sum(1 for cell in way[1:-1] if forest.down[cell] not in on and not self.is_mapped[forest.down[cell]])
        return count


# ---------------------------------------------------------------- channels under the design storm

def normal_depths(flow, bottom, side, n, slope):
    """Depths in trapezoids that carry the flows, by halving."""
    low, high = np.zeros_like(flow), np.full_like(flow, 1000.0)
    for _ in range(80):
        depth = (low + high) / 2
        area = (bottom + side * depth) * depth
        radius = area / (bottom + 2 * depth * np.sqrt(1 + side ** 2))
        enough = area * radius ** (2 / 3) * np.sqrt(slope) / n >= flow
        high, low = np.where(enough, depth, high), np.where(enough, low, depth)
    return (low + high) / 2


class DesignChannels:
    """Velocities in channel cells, found while the water passes down from the divides."""

    def __init__(self, rain, width, side, n, sections):
        self.rain, self.width, self.side, self.n, self.sections = rain, width, side, n, sections

    def speed(self, cells, flow, area_m2, slope):
        bottom, side = self.width(area_m2 / 1e6), np.full(cells.size, self.side)
        n = np.full(cells.size, self.n)
        speed = np.empty(cells.size)
        by_depth = np.ones(cells.size, bool)
        for i, cell in enumerate(cells):
            section = self.sections.get(int(cell))
            if section is None:
                continue
            n[i] = section.n
            if section.is_gutter:
                spread = (flow[i] * section.n / (0.376 * section.cross_fall ** (5 / 3) * math.sqrt(slope[i]))) ** (3 / 8)
                speed[i] = 0.752 / section.n * math.sqrt(slope[i]) * (section.cross_fall * spread) ** (2 / 3)
                by_depth[i] = False
            elif section.is_trapezoid:
                bottom[i], side[i] = section.bottom or 0.0, section.side
        depth = normal_depths(flow[by_depth], bottom[by_depth], side[by_depth], n[by_depth], slope[by_depth])
        speed[by_depth] = flow[by_depth] / ((bottom[by_depth] + side[by_depth] * depth) * depth)
        return speed

    def steps(self, travel, step_s, runoff_m2, area_m2, wave_s):
        """The steps of all cells, those of channels by the flow that the rain brings; `wave_s`: of ponded cells, infinite elsewhere."""
        forest, step_s = travel.forest, step_s.copy()
        arrival = np.zeros(step_s.size)
        for cells in reversed(forest.levels):
            channel = cells[travel.is_channel[cells] & ~forest.is_root[cells]]
            if channel.size:
                flow = self.rain.intensity(arrival[channel]) * runoff_m2[channel]
                speed = self.speed(channel, flow, area_m2[channel], travel.slope[channel])
                step_s[channel] = np.minimum(forest.length[channel] / speed, wave_s[channel])
            flowing = cells[~forest.is_root[cells]]
            np.maximum.at(arrival, forest.down[flowing], arrival[flowing] + step_s[flowing])
        return step_s
