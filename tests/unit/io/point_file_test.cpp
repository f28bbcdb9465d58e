#include "rillclock/io/point_file.hpp"

#include <ogrsf_frmts.h>

#include "io_files.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

const ReferenceSystem utm = ReferenceSystem::from_text("EPSG:32612");

std::string feature(const std::string& properties, const std::string& geometry) {
    return R"({"type":"Feature","properties":{)" + properties + R"(},"geometry":)" + geometry + "}";
}
std::string point(double x, double y) {
    return R"({"type":"Point","coordinates":[)" + std::to_string(x) + "," + std::to_string(y) + "]}";
}

struct PointFolder {
    TemporaryFolder folder;
    fs::path file(const std::string& features) const {
        return write_file(folder / "points.geojson", R"({"type":"FeatureCollection","features":[)" + features + "]}");
    }
    static std::string refusal(const fs::path& path, const PointOptions& options = {}) {
        return sentence_of([&] { (void)read_points(path, options, utm); });
    }
};

}  // namespace

TEST_CASE_METHOD(PointFolder, "GeoJSON points are on WGS 84 and are transformed") {
    const PointFile read = read_points(file(feature(R"("name":"inlet")", point(-111, 0))), {}, utm);
    REQUIRE(read.points.size() == 1);
    CHECK(read.points[0].name == "inlet");
    CHECK(read.points[0].place.x == Approx(500000.0).epsilon(1e-12));
    CHECK(read.points[0].place.y == Approx(0.0).margin(1e-6));
}

TEST_CASE_METHOD(PointFolder, "the name field may be chosen") {
    const fs::path path = file(feature(R"("name":"a","code":"K7")", point(-111, 1)));
    CHECK(read_points(path, {.name_field = "code"}, utm).points[0].name == "K7");
}

TEST_CASE_METHOD(PointFolder, "further fields are read as texts, and one that is not there is refused with those that are") {
    const fs::path path = file(feature(R"("name":"a","cover":" pavement ","share":0.35)", point(-111, 1)) + "," +
                               feature(R"("name":"b","cover":null)", point(-111, 2)));
    const PointFile read = read_points(path, {.fields = {"share", "cover"}}, utm);
    CHECK(read.points[0].fields == std::vector<std::string>{"0.35", "pavement"});
    CHECK(read.points[1].fields == std::vector<std::string>{"", ""});
    CHECK_THAT(refusal(path, {.fields = {"kerby"}}), Contains("has no field \"kerby\"") && Contains("name, cover, share"));
}

TEST_CASE_METHOD(PointFolder, "a point without a name is called by its number") {
    const PointFile read = read_points(
        file(feature(R"("name":"a")", point(-111, 1)) + "," + feature(R"("name":null)", point(-111, 2))), {}, utm);
    CHECK(read.points[1].name == "point 2");
    CHECK(read.points[1].feature == 2);
}

TEST_CASE_METHOD(PointFolder, "features that are no point are left out one by one") {
    const PointFile read = read_points(file(feature("", point(-111, 1)) + "," + feature("", "null") + "," +
                                            feature("", R"({"type":"LineString","coordinates":[[0,0],[1,1]]})") + "," +
                                            feature("", R"({"type":"Point","coordinates":[1e999,2]})")),
                                       {}, utm);
    CHECK(read.points.size() == 1);
    REQUIRE(read.notices.size() == 3);
    CHECK_THAT(read.notices[0].text, Contains("Feature 2") && Contains("has no place"));
    CHECK_THAT(read.notices[1].text, Contains("Feature 3") && Contains("LINESTRING"));
    CHECK_THAT(read.notices[2].text, Contains("Feature 4"));
}

TEST_CASE_METHOD(PointFolder, "a multipoint of one is a point") {
    const PointFile read = read_points(file(feature("", R"({"type":"MultiPoint","coordinates":[[-111,0]]})")), {}, utm);
    CHECK(read.points.size() == 1);
}

TEST_CASE_METHOD(PointFolder, "equal names are refused and listed") {
    const std::string one = feature(R"("name":"outfall")", point(-111, 1));
    CHECK_THAT(refusal(file(one + "," + one)), Contains("\"outfall\" (2 times)"));
}

TEST_CASE_METHOD(PointFolder, "a field that is not there is refused with those that are") {
    CHECK_THAT(refusal(file(feature(R"("tag":"a")", point(-111, 1))), {.name_field = "label"}),
               Contains("no field \"label\"") && Contains("tag"));
}

TEST_CASE_METHOD(PointFolder, "an empty layer is refused with advice") {
    CHECK_THAT(refusal(file("")), Contains("holds no features") && Contains("leave the file out"));
}

TEST_CASE_METHOD(PointFolder, "no usable point is refused with the first reason") {
    CHECK_THAT(refusal(file(feature("", "null"))), Contains("no point that can be used") && Contains("has no place"));
}

TEST_CASE_METHOD(PointFolder, "a table without a reference system is refused with the command that states it") {
    const fs::path path = write_file(folder / "points.csv", "name,x,y\na,500000,4000000\n");
    CHECK_THAT(refusal(path), Contains("ogr2ogr -a_srs EPSG:nnnnn"));
}

TEST_CASE_METHOD(PointFolder, "a file that is no vector data is said so") {
    CHECK_THAT(refusal(write_file(folder / "a.geojson", "hello")), Contains("cannot be read as points; it is a text"));
}

TEST_CASE_METHOD(PointFolder, "several layers are listed and one must be chosen") {
    const fs::path path = folder / "points.gpkg";
    {
        const GdalSession session;
        const GDALDatasetUniquePtr dataset(
            GetGDALDriverManager()->GetDriverByName("GPKG")->Create(path.c_str(), 0, 0, 0, GDT_Unknown, nullptr));
        OGRSpatialReference system;
        system.importFromEPSG(32612);
        for (const char* name : {"inlets", "outfalls"}) {
            OGRLayer* layer = dataset->CreateLayer(name, &system, wkbPoint);
            OGRFeature row(layer->GetLayerDefn());
            OGRPoint place(500000, 10);
            row.SetGeometry(&place);
            REQUIRE(layer->CreateFeature(&row) == OGRERR_NONE);
        }
    }
    CHECK_THAT(refusal(path), Contains("several layers: inlets, outfalls"));
    CHECK(read_points(path, {.layer = "outfalls"}, utm).points[0].place.x == 500000);
}
