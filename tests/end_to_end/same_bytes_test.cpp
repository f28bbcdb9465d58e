// The whole of a run, files and all, is the same bytes whatever the tiles, the threads and GDAL's cache; and its rasters are those of the plain way.

#include <cpl_vsi.h>
#include <gdal.h>

#include <array>
#include <catch2/catch.hpp>
#include <cmath>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <limits>
#include <map>
#include <span>
#include <sstream>
#include <string>
#include <vector>

#include "bench/terrain_generator.hpp"
#include "reference/plain_result.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/io/raster_output.hpp"
#include "rillclock/run/demo.hpp"
#include "rillclock/run/run_study.hpp"
#include "rillclock/run/study_source.hpp"

namespace rillclock {
namespace {

namespace fs = std::filesystem;
using bench::TerrainKind;

/// How a run is computed, which must not show in what it gives.
struct Manner {
    std::int64_t tile_side;
    unsigned threads;
    bool small_cache;   ///< 2 MB, less than what is read and written; else GDAL's own
};

constexpr std::int64_t whole = 1200;   // more than any side of the places below

/// With the first run (256 by one thread, default cache) every side meets both numbers of threads and both caches, and these each other.
constexpr std::array manners = {Manner{64, 1, true},   Manner{100, 2, false}, Manner{256, 2, true}, Manner{1000, 2, true},
                                Manner{whole, 2, true}, Manner{64, 2, false},  Manner{100, 1, true}, Manner{1000, 1, false},
                                Manner{whole, 1, false}};

/// For cases whose like runs in all of them.
constexpr std::array few_manners = {Manner{64, 2, true}, Manner{100, 1, false}, Manner{whole, 2, false}};

/// A folder that is removed with what is in it.
class Folder {
public:
    Folder() {
        std::string name = (fs::temp_directory_path() / "rillclock-same-bytes-XXXXXX").string();
        path_ = mkdtemp(name.data());
    }
    ~Folder() { fs::remove_all(path_); }
    Folder(const Folder&) = delete;
    Folder& operator=(const Folder&) = delete;
    [[nodiscard]] const fs::path& path() const { return path_; }
    void write(const std::string& name, const std::string& text) const { std::ofstream(path_ / name) << text; }

private:
    fs::path path_;
};

using Bytes = std::map<std::string, std::string>;

Bytes bytes_of(const fs::path& folder) {
    Bytes bytes;
    for (const auto& entry : fs::recursive_directory_iterator(folder)) {
        if (!entry.is_regular_file()) continue;
        std::ostringstream content;
        content << std::ifstream(entry.path(), std::ios::binary).rdbuf();
        bytes[fs::relative(entry.path(), folder).string()] = content.str();
    }
    return bytes;
}

Bytes run_in_manner(const Study& study, const Manner& manner) {
    const GIntBig cache = GDALGetCacheMax64();
    if (manner.small_cache) GDALSetCacheMax64(2'000'000);
    const RunOutcome outcome = run(study, {.replace = true, .threads = manner.threads, .tile_side = manner.tile_side});
    GDALSetCacheMax64(cache);
    return bytes_of(outcome.folder);
}

/// Names of files that differ.
std::string differing(const Bytes& expected, const Bytes& found) {
    std::string names;
    for (const auto& [name, content] : expected) {
        if (!found.contains(name) || found.at(name) != content) names += name + " ";
    }
    return found.size() == expected.size() ? names : names + "and the list of files";
}

/// Runs a study in some manners and holds the first, 256 by one thread, to the plain way; returns what it gives.
Bytes same_in(std::span<const Manner> some, const fs::path& study_file) {
    const Study study = read_study_file(study_file.string());
    const Bytes expected = run_in_manner(study, {256, 1, false});
    CHECK(reference::difference_from_plain(study, located(study, study.output.folder)) == "");
    for (const Manner& manner : some) {
        INFO("tiles of " << manner.tile_side << ", " << manner.threads << " threads, " << (manner.small_cache ? "2 MB" : "default") << " of cache");
        CHECK(differing(expected, run_in_manner(study, manner)) == "");
    }
    return expected;
}

Bytes same_in_all(const fs::path& study_file) { return same_in(manners, study_file); }

/// An invented place: a terrain with what a test wants of it, and a study of it.
struct Invented {
    TerrainKind kind = TerrainKind::fractal;
    Grid grid = {.rows = 260, .columns = 330, .left = 450'000.0, .top = 5'400'000.0};
    int system = 32633;
    bool voids = false;
    std::string terrain = "";   ///< further lines of [terrain]
    std::string rest = "[rain]\ntwo_year_24_hour = \"3.4 in\"\n";
    Raster<float> real = {};    ///< elevations in place of invented ones
};

Raster<float> elevations_of(const Invented& place) {
    if (place.real.size() > 0) return place.real;
    Raster<float> z = terrain_raster(bench::TerrainGenerator(place.kind, 5), place.grid.rows, place.grid.columns, Executor(1));
    if (!place.voids) return z;
    // A lake of voids across tiles, and single ones.
    for (std::int64_t row = 0; row < z.rows(); ++row) {
        for (std::int64_t column = 0; column < z.columns(); ++column) {
            const bool in_lake = std::hypot(static_cast<double>(row) - 110.0, static_cast<double>(column) - 130.0) < 40.0;
            if (in_lake || (row * 977 + column * 131) % 1009 == 0) z(row, column) = std::numeric_limits<float>::quiet_NaN();
        }
    }
    return z;
}

void write_inputs(const Invented& place, const Folder& folder) {
    const GdalSession session;
    const ReferenceSystem system = ReferenceSystem::from_text("EPSG:" + std::to_string(place.system));
    const bool integers = place.kind == TerrainKind::integers;
    write_raster(*create_raster<float>(folder.path() / "dem.tif", place.grid, system,
                                       {.stored = integers ? StoredType::int16 : StoredType::float32, .unit = "metre", .nodata = -9999.0}),
                 elevations_of(place));
    Raster<std::uint8_t> codes(place.grid.rows, place.grid.columns);
    bench::CoverGenerator(5).fill({.rows = codes.rows(), .columns = codes.columns()}, codes.values());
    write_raster(*create_raster<std::uint8_t>(folder.path() / "cover.tif", place.grid, system,
                                              {.stored = StoredType::uint8, .nodata = 0.0, .overviews = OverviewKind::nearest}),
                 codes);
    folder.write("study.toml", "[terrain]\nelevation = \"dem.tif\"\n" + place.terrain +
                                   "[surface]\ncover = \"cover.tif\"\nbook = \"nlcd\"\nfallback_class = 71\n" + place.rest);
}

/// Metres of a fault in Tennessee, from the sample data of the Debian package python-matplotlib-data; without cells where it is missing.
Raster<float> jacksboro() {
    constexpr std::int64_t rows = 344;
    constexpr std::int64_t columns = 403;
    VSILFILE* file = VSIFOpenL("/vsizip/{/usr/share/matplotlib/mpl-data/sample_data/jacksboro_fault_dem.npz}/elevation.npy", "rb");
    if (file == nullptr) return {};
    std::vector<std::int16_t> values(static_cast<std::size_t>(rows * columns));
    std::array<unsigned char, 10> begin{};   // of NumPy's format 1.0; the last two are the length of the text that follows
    const bool is_whole = VSIFReadL(begin.data(), begin.size(), 1, file) == 1 &&
                          VSIFSeekL(file, begin.size() + begin[8] + 256U * begin[9], SEEK_SET) == 0 &&
                          VSIFReadL(values.data(), sizeof(std::int16_t), values.size(), file) == values.size();
    VSIFCloseL(file);
    REQUIRE(is_whole);
    Raster<float> z(rows, columns);
    for (std::size_t i = 0; i < values.size(); ++i) z[static_cast<Cell>(i)] = static_cast<float>(values[i]);
    return z;
}

/// The same as a place, in degrees.
Invented jacksboro_place() {
    return {.grid = {.rows = 344, .columns = 403, .left = -84.41375, .top = 36.73291667, .cell_width = 0.00083333, .cell_height = 0.00083333},
            .system = 4326,
            .real = jacksboro()};
}

/// Puts a value into a cell of a raster; returns what was there.
double changed_cell(const fs::path& raster, int row, int column, double value) {
    const GDALDatasetH file = GDALOpen(raster.c_str(), GA_Update);
    REQUIRE(file != nullptr);
    const GDALRasterBandH band = GDALGetRasterBand(file, 1);
    double before = 0.0;
    const CPLErr read = GDALRasterIO(band, GF_Read, column, row, 1, 1, &before, 1, 1, GDT_Float64, 0, 0);
    const CPLErr written = GDALRasterIO(band, GF_Write, column, row, 1, 1, &value, 1, 1, GDT_Float64, 0, 0);
    GDALClose(file);
    REQUIRE((read == CE_None && written == CE_None));
    return before;
}

/// GeoJSON in the grid's own system of features given as {name, geometry type, coordinates}.
struct Shape {
    std::string name;
    std::string type;
    std::string coordinates;
};

std::string geojson(const Invented& place, const std::vector<Shape>& shapes) {
    std::string text = R"({"type":"FeatureCollection","crs":{"type":"name","properties":{"name":"urn:ogc:def:crs:EPSG::)" +
                       std::to_string(place.system) + R"("}},"features":[)";
    for (std::size_t i = 0; i < shapes.size(); ++i) {
        text += (i == 0 ? "" : ",") + std::string(R"({"type":"Feature","properties":{"name":")") + shapes[i].name +
                R"("},"geometry":{"type":")" + shapes[i].type + R"(","coordinates":)" + shapes[i].coordinates + "}}";
    }
    return text + "]}";
}

/// "[x,y]" of a cell's centre.
std::string at(const Invented& place, std::int64_t row, std::int64_t column) {
    const Place centre = place.grid.centre(RowColumn{row, column});
    std::ostringstream text;
    text.precision(12);
    text << '[' << centre.x << ',' << centre.y << ']';
    return text.str();
}

std::string line(const Invented& place, const std::vector<RowColumn>& corners) {
    std::string text;
    for (const RowColumn& corner : corners) text += (text.empty() ? "[" : ",") + at(place, corner.row, corner.column);
    return text + "]";
}

/// Points on a net over the whole place, which move to the streams beside them and so lie below one another.
std::string many_points(const Invented& place) {
    std::vector<Shape> shapes;
    for (std::int64_t row = 15; row < place.grid.rows; row += 40) {
        for (std::int64_t column = 15; column < place.grid.columns; column += 40) {
            shapes.push_back({"P" + std::to_string(shapes.size() + 1), "Point", at(place, row, column)});
        }
    }
    return geojson(place, shapes);
}

TEST_CASE("whole results are the same bytes on ground with noise") {
    const Invented place{.grid = {.rows = 230, .columns = 1100, .left = 450'000.0, .top = 5'400'000.0}};
    const Folder folder;
    write_inputs(place, folder);
    const Bytes result = same_in_all(folder.path() / "study.toml");
    CHECK(result.size() >= 17);   // six rasters and two lists of classes, three GeoJSON, five tables and more, result.json
}

TEST_CASE("whole results are the same bytes on ground a quarter of which is flat") {
    const Folder folder;
    write_inputs({.kind = TerrainKind::quantised}, folder);
    same_in_all(folder.path() / "study.toml");
}

TEST_CASE("whole results are the same bytes on ground in whole metres, mostly flat, with voids") {
    const Folder folder;
    write_inputs({.kind = TerrainKind::integers, .voids = true}, folder);
    same_in_all(folder.path() / "study.toml");
}

TEST_CASE("whole results are the same bytes for nested points with storms of their own, on rectangular cells") {
    Invented place{.grid = {.rows = 190, .columns = 260, .left = 450'000.0, .top = 5'400'000.0, .cell_width = 2.0, .cell_height = 3.0}};
    place.rest = "[points]\nfile = \"points.geojson\"\nmove_within = \"25 m\"\n"
                 "[rain]\nformula = \"i[in/h] = 45 T^0.2 / (t[min] + 10)^0.8\"\nreturn_periods = [2, 10]\n"
                 "[timing]\nsheet = \"kinematic\"\n";
    const Folder folder;
    write_inputs(place, folder);
    folder.write("points.geojson", many_points(place));
    const Bytes result = same_in_all(folder.path() / "study.toml");
    CHECK(result.contains("tables/iterations.csv"));
    CHECK(result.at("tables/outlets.csv").find(",P1,") != std::string::npos);   // a point whose next one is another
}

TEST_CASE("whole results are the same bytes in degrees") {
    const double step = 1.0 / 10'800.0;   // a third of a second
    const Folder folder;
    write_inputs({.grid = {.rows = 210, .columns = 270, .left = 11.0, .top = 61.0, .cell_width = step, .cell_height = step}, .system = 4326},
                 folder);
    same_in_all(folder.path() / "study.toml");
}

TEST_CASE("whole results are the same bytes on real terrain") {
    Invented place = jacksboro_place();
    if (place.real.size() == 0) {
        WARN("not tried: the Debian package python-matplotlib-data is missing; scripts/run-tests installs it");
        return;
    }
    place.rest = "[points]\nfile = \"points.geojson\"\nmove_within = \"300 m\"\n" + place.rest;
    const Folder folder;
    write_inputs(place, folder);
    folder.write("points.geojson", many_points(place));
    const Bytes result = same_in_all(folder.path() / "study.toml");
    CHECK(result.at("tables/outlets.csv").find(",P1,") != std::string::npos);
}

/// Writes shapes of all four kinds, laid over the place by shares of its sides, and the study that names them.
void write_edited(Invented place, const Folder& folder) {
    place.terrain = "channels = \"channels.geojson\"\ncrossings = \"crossings.geojson\"\nbarriers = \"barriers.geojson\"\n"
                    "keep_water = \"kept.geojson\"\n";
    write_inputs(place, folder);
    const auto cell = [&](std::int64_t row, std::int64_t column) {   // of a place of 260 x 330
        return RowColumn{row * place.grid.rows / 260, column * place.grid.columns / 330};
    };
    const auto way = [&](std::vector<RowColumn> corners) {
        for (RowColumn& corner : corners) corner = cell(corner.row, corner.column);
        return line(place, corners);
    };
    folder.write("channels.geojson", geojson(place, {{"a", "LineString", way({{20, 30}, {90, 80}, {240, 300}})},
                                                     {"b", "LineString", way({{200, 20}, {180, 200}, {20, 310}})}}));
    folder.write("crossings.geojson", geojson(place, {{"c", "LineString", way({{60, 250}, {75, 262}})}}));
    folder.write("barriers.geojson", geojson(place, {{"d", "LineString", way({{10, 200}, {120, 210}, {240, 190}})}}));
    const std::string ring = way({{40, 40}, {40, 70}, {70, 70}, {70, 40}, {40, 40}});
    const RowColumn pond = cell(220, 90);
    folder.write("kept.geojson", geojson(place, {{"e", "Polygon", "[" + ring + "]"}, {"f", "Point", at(place, pond.row, pond.column)}}));
}

/// Each of the four kinds of edit is told of in a result.
void check_edited(const Bytes& result) {
    const std::string& review = result.at("tables/review.csv");
    std::size_t kinds = 0;
    for (std::size_t found = review.find("terrain-edited"); found != std::string::npos; found = review.find("terrain-edited", found + 1)) ++kinds;
    CHECK(kinds == 4);
}

TEST_CASE("whole results are the same bytes with channels, crossings, barriers and kept water") {
    const Folder folder;
    write_edited({.kind = TerrainKind::quantised, .voids = true}, folder);
    const Bytes result = same_in_all(folder.path() / "study.toml");
    check_edited(result);
    CHECK(result.at("own_paths.geojson").find("LineString") != std::string::npos);
}

/// A study with all edits of a place, in few manners.
void same_with_edits(const Invented& place) {
    const Folder folder;
    write_edited(place, folder);
    check_edited(same_in(few_manners, folder.path() / "study.toml"));
}

constexpr Grid small = {.rows = 150, .columns = 190, .left = 450'000.0, .top = 5'400'000.0};

TEST_CASE("with edits whole results are the same bytes on ground with noise") { same_with_edits({.grid = small}); }

TEST_CASE("with edits whole results are the same bytes on ground in whole metres, mostly flat, with voids") {
    same_with_edits({.kind = TerrainKind::integers, .grid = small, .voids = true});
}

TEST_CASE("with edits whole results are the same bytes on rectangular cells") {
    Grid grid = small;
    grid.cell_width = 2.0;
    grid.cell_height = 3.0;
    same_with_edits({.kind = TerrainKind::quantised, .grid = grid});
}

TEST_CASE("with edits whole results are the same bytes in degrees") {
    const double step = 1.0 / 10'800.0;   // a third of a second
    same_with_edits({.kind = TerrainKind::quantised,
                     .grid = {.rows = 150, .columns = 190, .left = 11.0, .top = 61.0, .cell_width = step, .cell_height = step},
                     .system = 4326});
}

TEST_CASE("with edits whole results are the same bytes on real terrain") {
    const Invented place = jacksboro_place();
    if (place.real.size() == 0) return;   // said in the case without edits
    same_with_edits(place);
}

TEST_CASE("a raster that differs from the plain way in one cell is found, with its place") {
    const Folder folder;
    write_inputs({.grid = {.rows = 40, .columns = 50, .left = 450'000.0, .top = 5'400'000.0}}, folder);
    const Study study = read_study_file((folder.path() / "study.toml").string());
    const fs::path result = run(study, {}).folder;
    REQUIRE(reference::difference_from_plain(study, result) == "");
    for (const char* name : {"flow_azimuth", "spill_elevation", "contributing_area", "catchment", "regime", "travel_time"}) {
        const double before = changed_cell(result / "rasters" / (std::string(name) + ".tif"), 17, 23, 3.0);
        CHECK(reference::difference_from_plain(study, result).starts_with(std::string(name) + " at row 17, column 23: result 3.0"));
        (void)changed_cell(result / "rasters" / (std::string(name) + ".tif"), 17, 23, before);
    }
}

TEST_CASE("whole results are the same bytes for the demo") {
    const Folder folder;
    write_demo(folder.path() / "town");
    same_in_all(folder.path() / "town/study.toml");
}

}  // namespace
}  // namespace rillclock
