#include "rillclock/io/shape_file.hpp"

#include <ogrsf_frmts.h>

#include "io_files.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

const ReferenceSystem shape_utm = ReferenceSystem::from_text("EPSG:32612");
const ReferenceSystem degrees = ReferenceSystem::wgs84();

std::string shape_feature(const std::string& type, const std::string& coordinates) {
    return R"({"type":"Feature","properties":{},"geometry":{"type":")" + type + R"(","coordinates":)" + coordinates + "}}";
}

struct ShapeFolder {
    TemporaryFolder folder;
    fs::path file(const std::string& features) const {
        return write_file(folder / "shapes.geojson", R"({"type":"FeatureCollection","features":[)" + features + "]}");
    }
    ShapeFile lines(const std::string& features, const ReferenceSystem& target = degrees) const {
        return read_shapes(file(features), {.role = "channels", .layer_key = "channels_layer"}, target);
    }
    ShapeFile waters(const std::string& features) const {
        return read_shapes(file(features), {.role = "kept water", .kinds = ShapeKinds::points_and_polygons, .layer_key = "keep_water_layer"}, degrees);
    }
};

}  // namespace

TEST_CASE_METHOD(ShapeFolder, "lines keep the order of their corners and are transformed") {
    const ShapeFile read = lines(shape_feature("LineString", "[[-111,0],[-111,1]]"), shape_utm);
    REQUIRE(read.lines.size() == 1);
    REQUIRE(read.lines[0].size() == 2);
    CHECK(read.lines[0][0].x == Approx(500000.0).epsilon(1e-12));
    CHECK(read.lines[0][0].y == Approx(0.0).margin(1e-6));
    CHECK(read.lines[0][1].y == Approx(110530.16).margin(0.01));  // 0.9996 of the meridian's 110574.39 m
}

TEST_CASE_METHOD(ShapeFolder, "each part of a feature of several parts is a line of its own") {
    const ShapeFile read = lines(shape_feature("MultiLineString", "[[[1,2],[3,4]],[[5,6],[7,8]]]") + "," +
                                 shape_feature("LineString", "[[9,10,99],[11,12,98]]"));
    CHECK(read.lines.size() == 3);
    CHECK(read.lines[2][1].x == 11.0);
    CHECK(read.features == 2);
    CHECK(read.notices.empty());
}

TEST_CASE_METHOD(ShapeFolder, "kept water is points and polygons with holes") {
    const ShapeFile read = waters(shape_feature("Point", "[1,2]") + "," +
                                  shape_feature("Polygon", "[[[0,0],[4,0],[4,4],[0,0]],[[1,1],[2,1],[2,2],[1,1]]]") + "," +
                                  shape_feature("MultiPoint", "[[3,4],[5,6]]"));
    CHECK(read.points.size() == 3);
    REQUIRE(read.polygons.size() == 1);
    CHECK(read.polygons[0].rings.size() == 2);
}

TEST_CASE_METHOD(ShapeFolder, "features of the wrong type or without a shape are left out one by one") {
    const ShapeFile read = lines(shape_feature("LineString", "[[1,2],[3,4]]") + "," + shape_feature("Point", "[1,2]") +
                                 R"(,{"type":"Feature","properties":{},"geometry":null})");
    CHECK(read.lines.size() == 1);
    REQUIRE(read.notices.size() == 2);
    CHECK_THAT(read.notices[0].text, Contains("Feature 2") && Contains("POINT") && Contains("only lines"));
    CHECK_THAT(read.notices[1].text, Contains("Feature 3") && Contains("no shape"));
}

TEST_CASE_METHOD(ShapeFolder, "a line with a corner that has no image is left out whole") {
    const ShapeFile read = lines(shape_feature("LineString", "[[-111,0],[-111,1]]") + "," + shape_feature("LineString", "[[-111,0],[-111,1e300]]"), shape_utm);
    CHECK(read.lines.size() == 1);
    REQUIRE(read.notices.size() == 1);
    CHECK_THAT(read.notices[0].text, Contains("Feature 2"));
}

TEST_CASE_METHOD(ShapeFolder, "polygons carry the text of the field that is asked for, each part its own") {
    const std::string square = "[[[0,0],[1,0],[1,1],[0,0]]]";
    const std::string named = R"({"type":"Feature","properties":{"rain":"hill.csv"},"geometry":{"type":"MultiPolygon","coordinates":[)" +
                              square + "," + square + "]}}";
    const std::string unnamed = R"({"type":"Feature","properties":{"rain":null},"geometry":{"type":"Polygon","coordinates":)" + square + "}}";
    const fs::path path = file(named + "," + unnamed + "," + shape_feature("Point", "[1,2]"));
    const ShapeFile read = read_shapes(path, {.role = "rain zones", .kinds = ShapeKinds::polygons, .layer_key = "zones_layer", .text_field = "rain"}, degrees);
    CHECK(read.polygons.size() == 3);
    CHECK(read.polygon_texts == std::vector<std::string>{"hill.csv", "hill.csv", ""});
    REQUIRE(read.notices.size() == 1);
    CHECK_THAT(read.notices[0].text, Contains("is a POINT, and only polygons have a meaning here"));
    CHECK_THAT(sentence_of([&] { (void)read_shapes(path, {.role = "rain zones", .kinds = ShapeKinds::polygons, .layer_key = "zones_layer", .text_field = "station"}, degrees); }),
               Contains("has no field \"station\"; its fields are rain"));
}

TEST_CASE_METHOD(ShapeFolder, "a file without a usable shape is refused with its reason") {
    CHECK_THAT(sentence_of([&] { (void)lines(shape_feature("Point", "[1,2]")); }), Contains("nothing that can be used") && Contains("POINT"));
    CHECK_THAT(sentence_of([&] { (void)lines(""); }), Contains("no features"));
    CHECK_THAT(sentence_of([&] { (void)read_shapes(folder / "none.gpkg", {.role = "barriers", .layer_key = "barriers_layer"}, shape_utm); }),
               Contains("file of barriers") && Contains("none.gpkg"));
}

TEST_CASE_METHOD(ShapeFolder, "of several layers one must be named, and the names of all are told") {
    const fs::path path = folder / "town.gpkg";
    {
        const GdalSession session;
        const GDALDatasetUniquePtr dataset(
            GetGDALDriverManager()->GetDriverByName("GPKG")->Create(path.c_str(), 0, 0, 0, GDT_Unknown, nullptr));
        OGRSpatialReference system;
        system.importFromEPSG(32612);
        for (const char* name : {"roads", "brooks"}) {
            OGRLayer* layer = dataset->CreateLayer(name, &system, wkbLineString);
            OGRFeature row(layer->GetLayerDefn());
            OGRLineString line;
            line.addPoint(500000, 10);
            line.addPoint(500000 + (name[0] == 'b' ? 7 : 3), 10);
            row.SetGeometry(&line);
            REQUIRE(layer->CreateFeature(&row) == OGRERR_NONE);
        }
    }
    const auto read = [&](std::optional<std::string> layer) {
        return read_shapes(path, {.role = "channels", .layer = std::move(layer), .layer_key = "channels_layer"}, shape_utm);
    };
    CHECK_THAT(sentence_of([&] { (void)read({}); }), Contains("several layers: roads, brooks") && Contains("channels_layer = \"roads\""));
    CHECK_THAT(sentence_of([&] { (void)read("lanes"); }), Contains("no layer \"lanes\"") && Contains("roads, brooks"));
    CHECK(read("brooks").lines[0][1].x == 500007);
}
