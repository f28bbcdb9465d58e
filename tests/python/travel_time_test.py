"""travel_time(): arrays in, arrays out, in every cell what the command writes."""
import sys
import threading

import numpy as np
import pytest
from osgeo import gdal

import rillclock

STATED = {"cell": 2.0, "book": "nlcd", "rain": "90 mm"}


def assert_same_as_command(times, raster):
    written = raster("travel_time")
    void = written == -9999
    np.testing.assert_array_equal(np.isnan(times.minutes), void)
    np.testing.assert_array_equal(times.minutes[~void], written[~void])     # bit for bit
    np.testing.assert_array_equal(times.flow_azimuth, raster("flow_azimuth"))
    np.testing.assert_array_equal(times.contributing_area_m2[~void], raster("contributing_area")[~void])
    np.testing.assert_array_equal(times.regime, np.where(void, 0, raster("regime")))
    np.testing.assert_array_equal(times.spill_elevation[~void], raster("spill_elevation")[~void])


def test_every_cell_is_that_of_the_command(ground, cover, command):
    ground[5:8, 3:9] = np.nan
    times = rillclock.travel_time(ground, cover=cover, **STATED)
    assert times.void_cells == 18
    assert times.minutes.dtype == np.float32
    assert_same_as_command(times, command(ground, cover))


def test_the_demo_town_is_that_of_the_command(town, tmp_path):
    dem = gdal.Open(str(town / "dem.tif"))
    left, width, _, top, _, height = dem.GetGeoTransform()
    # The town's cover lies on a grid of its own; each cell has the class at its centre.
    bounds = (left, top + height * dem.RasterYSize, left + width * dem.RasterXSize, top)
    cover = gdal.Warp("", str(town / "cover.tif"), format="MEM", dstSRS=dem.GetProjection(), outputBounds=bounds, xRes=width, yRes=-height,
                      resampleAlg="near", errorThreshold=0).ReadAsArray()
    elevation = dem.ReadAsArray()
    study = {"terrain": {"elevation": str(town / "dem.tif")}, "rain": {"two_year_24_hour": "62 mm"}, "output": {"folder": str(tmp_path / "plain")},
             "surface": {"cover": str(town / "cover.tif"), "book": str(town / "cover-book.csv")}}
    plain = rillclock.run(study)
    times = rillclock.travel_time(elevation, cell=2, cover=cover, book=town / "cover-book.csv", rain="62 mm")
    np.testing.assert_array_equal(times.minutes, plain.raster("travel_time").astype(np.float32))


@pytest.mark.parametrize("settings, study", [
    ({"surface.path_length": "unbiased"}, '[surface]\npath_length = "unbiased"\n'),
    ({"timing": {"channel_from": "0.1 ha", "channel": {"n": 0.03}}}, '[timing]\nchannel_from = "0.1 ha"\nchannel = { n = 0.03 }\n'),
    ({"timing.slope_floor": {"overland": 0.02}, "timing.sheet_limit": "30 ft"}, '[timing]\nsheet_limit = "30 ft"\nslope_floor = { overland = 0.02 }\n'),
    ({"terrain.pond_speed": "unlimited", "terrain.vertical_step": "1 m"}, '[terrain]\npond_speed = "unlimited"\nvertical_step = "1 m"\n'),
])
def test_settings_act_as_keys_of_a_study(ground, cover, command, settings, study):
    times = rillclock.travel_time(ground, cover=cover, settings=settings, **STATED)
    assert_same_as_command(times, command(ground, cover, study=study))
    assert not np.array_equal(times.minutes, rillclock.travel_time(ground, cover=cover, **STATED).minutes)


def test_whole_numbers_are_trusted_to_one(ground, cover, command):
    whole = np.round(ground * 3).astype(np.int16)
    times = rillclock.travel_time(whole, cover=cover, **STATED)
    assert_same_as_command(times, command(whole, cover, kind=gdal.GDT_Int16))
    assert not np.array_equal(times.minutes, rillclock.travel_time(whole.astype(float), cover=cover, **STATED).minutes)


def test_single_precision_and_cells_that_are_no_squares(ground, cover, command):
    single = ground.astype(np.float32)
    times = rillclock.travel_time(single, cell=(2.0, 3.5), cover=cover, book="nlcd", rain="90 mm")
    assert_same_as_command(times, command(single, cover, kind=gdal.GDT_Float32, cell=(2.0, 3.5)))


def test_elevations_in_feet(ground, cover, command):
    times = rillclock.travel_time(ground, cover=cover, settings={"terrain.elevation_unit": "ft"}, **STATED)
    assert_same_as_command(times, command(ground, cover, unit="ft"))


def test_a_cell_can_be_stated_in_feet(ground, cover):
    in_feet = rillclock.travel_time(ground, cell="10 ft", cover=cover, book="nlcd", rain="90 mm")
    in_metres = rillclock.travel_time(ground, cell=3.048, cover=cover, book="nlcd", rain="90 mm")
    np.testing.assert_array_equal(in_feet.minutes, in_metres.minutes)


@pytest.mark.parametrize("as_given", [
    lambda a: np.asfortranarray(a), lambda a: np.repeat(np.repeat(a, 2, 0), 3, 1)[::2, ::3], lambda a: a[::-1, ::-1].copy()[::-1, ::-1],
    lambda a: a.astype(a.dtype.newbyteorder(">")), lambda a: a.tolist()])
def test_how_an_array_lies_in_memory_does_not_matter(ground, cover, as_given):
    times = rillclock.travel_time(as_given(ground), cover=as_given(cover), **STATED)
    np.testing.assert_array_equal(times.minutes, rillclock.travel_time(ground, cover=cover, **STATED).minutes)


def test_masked_cells_are_void_and_masked_cover_takes_the_fallback(ground, cover):
    hole = np.zeros(ground.shape, bool)
    hole[5:8, 3:9] = True
    with_nan = np.where(hole, np.nan, ground)
    other = np.where(hole.T[:40, :40].any() & (cover == 24), 41, cover)
    masked = rillclock.travel_time(np.ma.masked_array(ground, hole), cover=np.ma.masked_equal(cover, 24), settings={"surface.fallback_class": 41}, **STATED)
    plain = rillclock.travel_time(with_nan, cover=other, **STATED)
    np.testing.assert_array_equal(masked.minutes, plain.minutes)
    assert [notice.code for notice in masked.notices] == ["cover-unknown"]


def test_one_class_for_all_cells(ground):
    one = rillclock.travel_time(ground, cover=71, **STATED)
    many = rillclock.travel_time(ground, cover=np.full(ground.shape, 71), **STATED)
    np.testing.assert_array_equal(one.minutes, many.minutes)


def test_nothing_depends_on_the_number_of_threads(cover, ground):
    one, three = (rillclock.travel_time(ground, cover=cover, threads=n, **STATED) for n in (1, 3))
    np.testing.assert_array_equal(one.minutes, three.minutes)


def test_what_cannot_be_an_elevation_is_void_and_told(ground, cover):
    ground[3, 4], ground[3, 5] = np.inf, 1e30
    times = rillclock.travel_time(ground, cover=cover, **STATED)
    assert np.isnan(times.minutes[3, 4:6]).all() and times.void_cells == 2
    assert [notice.code for notice in times.notices] == ["elevation-not-finite", "elevation-impossible"]
    assert times.notices[0].value == 1


def test_the_arrays_live_longer_than_the_result(ground, cover):
    minutes = rillclock.travel_time(ground, cover=cover, **STATED).minutes
    for _ in range(5):
        rillclock.travel_time(ground, cover=cover, **STATED)
    np.testing.assert_array_equal(minutes, rillclock.travel_time(ground, cover=cover, **STATED).minutes)


def refusal(*arguments, error=rillclock.InputError, **options):
    with pytest.raises(error) as raised:
        rillclock.travel_time(*arguments, **options)
    return str(raised.value)


@pytest.mark.parametrize("change, says", [
    ({"elevation": np.ones(40)}, "elevation has the shape (40,); give an array of rows × columns"),
    ({"elevation": np.ones((4, 5, 6))}, "elevation has the shape (4, 5, 6)"),
    ({"elevation": np.ones((0, 5))}, "with at least one cell"),
    ({"elevation": np.ones((4, 5), complex)}, "elevation has the type complex128; give float32, float64 or whole numbers"),
    ({"elevation": np.ones((4, 5), np.float16)}, "elevation has the type float16"),
    ({"elevation": np.ones((4, 5), bool)}, "elevation has the type bool"),
    ({"elevation": [["a"]]}, "elevation has the type <U1"),
    ({"elevation": np.full((40, 50), np.nan)}, "every cell is void (NaN)"),
    ({"elevation": np.arange(20.0).reshape(4, 5)}, "the elevations have 4 rows × 5 columns and the land cover 40 rows × 50 columns"),
    ({"cover": np.ones((40, 50))}, "cover has the type float64; give whole numbers, the codes of its classes"),
    ({"cover": np.full((40, 50), 2**40)}, "cover holds 1099511627776 at row 0, column 0"),
    ({"cover": 7}, "the land cover 'in memory' has what the book 'nlcd' does not know: class 7 (2000 cells)"),
    ({"cell": float("nan")}, "a cell size is nan m; give lengths above 0, such as 5 m"),
    ({"cell": -1}, "a cell size is -1 m"),
    ({"cell": (5, 0)}, "a cell size is 0 m"),
    ({"cell": "5"}, "cell"),
    ({"cell": True}, "cell is True; give metres"),
    ({"cell": None}, "cell is None; give metres"),
    ({"rain": "3.6"}, "rain"),
    ({"book": "nlcdd.csv"}, "nlcdd.csv"),
    ({"settings": {"timing.sheet_limt": "30 m"}}, "did you mean timing.sheet_limit?"),
    ({"settings": {"timing.sheet_limit": 30}}, "the setting timing.sheet_limit is 30; write a text in quotes, such as \"100 ft\""),
    ({"settings": {"timing.sheet_limit": object}}, "give a text, a number, a boolean, or a list of numbers or texts"),
    ({"settings": {"points": {"file": "points.gpkg"}}}, "the setting points.file does not act on travel times from rasters in memory"),
    ({"settings": {"timing.sheet": "kinematic"}}, "do not know of rain by duration, kinematic sheet flow"),
])
def test_what_cannot_be_used_is_refused_in_a_sentence(ground, cover, change, says):
    assert says in refusal(**({"elevation": ground, "cover": cover} | STATED | change))


def test_errors_are_sorted_by_who_can_put_them_right():
    assert issubclass(rillclock.InputError, rillclock.Error) and issubclass(rillclock.InputError, ValueError)
    assert issubclass(rillclock.MachineError, rillclock.Error) and not issubclass(rillclock.MachineError, ValueError)


def test_progress_is_told_and_may_stop_the_work(ground, cover):
    told = []
    rillclock.travel_time(ground, cover=cover, progress=lambda stage, done, total: told.append((stage, done, total)), **STATED)
    assert [stage for stage, done, total in told if done == total] == ["reading elevations", "reading land cover", "flow directions", "travel times"]
    assert {total for _, _, total in told} == {2000}
    refusal(ground, cover=cover, progress=lambda stage, done, total: stage != "flow directions", error=rillclock.Stopped, **STATED)


def test_what_progress_raises_comes_back(ground, cover):
    def interrupted(stage, done, total):
        raise KeyboardInterrupt
    with pytest.raises(KeyboardInterrupt):
        rillclock.travel_time(ground, cover=cover, progress=interrupted, **STATED)


def test_other_threads_run_while_it_computes(ground):
    """A thread that is woken at the first report has run before the last: with so long a switch interval it can only where the lock is free."""
    begun, has_run = threading.Event(), threading.Event()
    seen = []

    def wake(stage, done, total):
        begun.set()
        seen.append(has_run.is_set())

    other = threading.Thread(target=lambda: (begun.wait(), has_run.set()))
    other.start()
    interval = sys.getswitchinterval()
    sys.setswitchinterval(60)
    try:
        rillclock.travel_time(np.tile(ground, (12, 12)), cover=71, progress=wake, **STATED)
    finally:
        sys.setswitchinterval(interval)
        begun.set()
        other.join()
    assert seen[-1] and not seen[0]


def test_everything_public_is_documented():
    for name in dir(rillclock):
        if name.startswith("_"):
            continue
        thing = getattr(rillclock, name)
        assert thing.__doc__, name
        for member in vars(thing) if isinstance(thing, type) and not issubclass(thing, Exception) else ():
            assert member.startswith("_") or getattr(thing, member).__doc__, f"{name}.{member}"
    assert "timing.sheet_limit = \"100 ft\": distance from the divide at which sheet flow ends; default 100 ft" in rillclock.travel_time.__doc__
