#include "rillclock/io/reference_system.hpp"

#include "io_files.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

const Grid utah = {.rows = 100, .columns = 100, .left = 303000, .top = 4152900, .cell_width = 30, .cell_height = 30};
const char* const utm_on_unknown_datum = "+proj=utm +zone=12 +ellps=GRS80 +towgs84=0,0,0,0,0,0,0 +units=m +no_defs";

}  // namespace

TEST_CASE("a system is named with its code") {
    CHECK(ReferenceSystem::from_text("EPSG:26912").name() == "NAD83 / UTM zone 12N (EPSG:26912)");
}

TEST_CASE("a system without a name is called by its datum") {
    CHECK(ReferenceSystem::from_text("PROJCS[\"unnamed\",GEOGCS[\"NAD27\",DATUM[\"North_American_Datum_1927\","
                                     "SPHEROID[\"Clarke 1866\",6378206.4,294.978698213898]],PRIMEM[\"Greenwich\",0],"
                                     "UNIT[\"degree\",0.0174532925199433]],PROJECTION[\"Transverse_Mercator\"],"
                                     "PARAMETER[\"latitude_of_origin\",0],PARAMETER[\"central_meridian\",-123],"
                                     "PARAMETER[\"scale_factor\",0.9996],PARAMETER[\"false_easting\",500000],"
                                     "PARAMETER[\"false_northing\",0],UNIT[\"metre\",1]]")
              .name() == "an unnamed system on NAD27");
}

TEST_CASE("a system made again from its WKT is the same") {
    const ReferenceSystem first = ReferenceSystem::from_text("EPSG:26912+6360");
    CHECK(ReferenceSystem::from_text(first.wkt()).wkt() == first.wkt());
}

TEST_CASE("a text that is no system is refused") {
    CHECK_THAT(sentence_of([] { (void)ReferenceSystem::from_text("EPSG:1"); }), Contains("no reference system"));
}

TEST_CASE("metre, foot and US survey foot are told apart exactly") {
    CHECK(ReferenceSystem::from_text("EPSG:26912").linear_unit().metres_per_unit == 1.0);
    CHECK(ReferenceSystem::from_text("EPSG:2222").linear_unit().metres_per_unit == 0.3048);
    CHECK(ReferenceSystem::from_text("EPSG:2263").linear_unit().metres_per_unit == 1200.0 / 3937.0);
}

TEST_CASE("only a compound system has a vertical unit") {
    CHECK_FALSE(ReferenceSystem::from_text("EPSG:26912").vertical_unit());
    CHECK(ReferenceSystem::from_text("EPSG:26912+5703").vertical_unit()->is_metre());
}

TEST_CASE("web Mercator is known under its names") {
    const char* const name = GENERATE("EPSG:3857", "ESRI:102100", "EPSG:3785",
                                      "+proj=merc +a=6378137 +b=6378137 +lat_ts=0 +lon_0=0 +x_0=0 +y_0=0 +k=1 +units=m "
                                      "+nadgrids=@null +no_defs");
    CHECK(ReferenceSystem::from_text(name).is_web_mercator());
}

TEST_CASE("Mercator on the ellipsoid is not web Mercator") {
    CHECK_FALSE(ReferenceSystem::from_text("EPSG:3395").is_web_mercator());
}

TEST_CASE("a bound twin of the same zone has the same coordinates") {
    const ReferenceSystem twin = ReferenceSystem::from_text(utm_on_unknown_datum);
    CHECK(same_coordinates(ReferenceSystem::from_text("EPSG:26912"), twin, utah));
}

TEST_CASE("another zone has other coordinates") {
    CHECK_FALSE(
        same_coordinates(ReferenceSystem::from_text("EPSG:26912"), ReferenceSystem::from_text("EPSG:26911"), utah));
}

TEST_CASE("feet and metres of one zone are other coordinates") {
    const ReferenceSystem feet = ReferenceSystem::from_text("+proj=utm +zone=12 +datum=NAD83 +units=us-ft +no_defs");
    CHECK_FALSE(same_coordinates(ReferenceSystem::from_text("EPSG:26912"), feet, utah));
}

TEST_CASE("longitude comes before latitude") {
    Transformation transformation = Transformation::to_wgs84(ReferenceSystem::from_text("EPSG:32612"));
    const std::optional<Place> place = transformation({500000, 0});
    REQUIRE(place);
    CHECK(place->x == Approx(-111.0).epsilon(1e-12));
    CHECK(place->y == Approx(0.0).margin(1e-9));
}

TEST_CASE("a place without an image is none") {
    Transformation transformation(ReferenceSystem::wgs84(), ReferenceSystem::from_text("EPSG:32612"));
    CHECK_FALSE(transformation({-111.0, 1e9}));
}
