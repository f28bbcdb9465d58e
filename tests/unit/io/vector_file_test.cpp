#include "vector_file.hpp"

#include <cpl_string.h>
#include <ogrsf_frmts.h>

#include <algorithm>
#include <set>

#include "io_files.hpp"
#include "rillclock/io/point_file.hpp"
#include "rillclock/io/shape_file.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

/// A format as GDAL writes it, and within how many metres it keeps places.
struct VectorFormat {
    std::string driver;
    std::string file;
    std::vector<std::string> layer_options = {};
    bool is_geographic = false;   ///< it holds degrees of WGS 84 alone
    double within_m = 1e-6;
    std::string layer = "brooks";
};

/// All formats that this GDAL writes lines in with their reference system.
std::vector<VectorFormat> line_formats() {
    return {{"ESRI Shapefile", "brooks.shp"},
            {"MapInfo File", "brooks.tab", {}, false, 0.02},
            {"MapInfo File", "brooks.mif", {}, false, 0.01},
            {"GPKG", "brooks.gpkg"},
            {"GeoJSON", "brooks.geojson"},
            {"GeoJSONSeq", "brooks.geojsonl", {}, false, 0.02},
            {"FlatGeobuf", "brooks.fgb"},
            {"OpenFileGDB", "brooks.gdb", {}, false, 0.001},
            {"SQLite", "brooks.sqlite"},
            {"CSV", "brooks.csv", {"GEOMETRY=AS_WKT", "CREATE_CSVT=YES"}},
            {"GML", "brooks.gml"},
            {"OGR_GMT", "brooks.gmt"},
            {"JML", "brooks.jml"},
            {"KML", "brooks.kml", {}, true},
            {"LIBKML", "brooks.kmz", {}, true},
            {"GPX", "brooks.gpx", {}, true, 0.001, "routes"},
            {"GeoRSS", "brooks.rss", {}, true},
            {"PDF", "brooks.pdf", {}, false, 0.02},
            {"PCIDSK", "brooks.pix"},
            {"MapML", "brooks.mapml", {}, true, 0.02}};
}

OGRSpatialReference system_by_number(int epsg) {
    OGRSpatialReference system;
    system.importFromEPSG(epsg);
    system.SetAxisMappingStrategy(OAMS_TRADITIONAL_GIS_ORDER);
    return system;
}

const std::vector<Place> brook = {{500001, 5399999}, {500011, 5399989}, {500021, 5399991}};

OGRLineString brook_as(OGRSpatialReference& system) {
    OGRSpatialReference metres = system_by_number(25832);
    OGRLineString line;
    for (const Place& place : brook) line.addPoint(place.x, place.y);
    line.assignSpatialReference(&metres);
    REQUIRE(line.transformTo(&system) == OGRERR_NONE);
    return line;
}

/// The line `brook` in a format; empty where this GDAL does not have it, which no GDAL of Debian's lacks.
fs::path write_brook(const TemporaryFolder& folder, const VectorFormat& format, bool with_system = true) {
    const GdalSession session;
    fs::path path = folder / format.file;
    GDALDriver* driver = GetGDALDriverManager()->GetDriverByName(format.driver.c_str());
    REQUIRE(driver != nullptr);
    CPLStringList creation;
    if (path.extension() == ".mif") creation.AddNameValue("FORMAT", "MIF");
    const GDALDatasetUniquePtr dataset(driver->Create(path.c_str(), 0, 0, 0, GDT_Unknown, creation.List()));
    REQUIRE(dataset);
    OGRSpatialReference system = system_by_number(format.is_geographic ? 4326 : 25832);
    CPLStringList options;
    for (const std::string& option : format.layer_options) options.AddString(option.c_str());
    OGRLayer* layer = dataset->CreateLayer(format.layer.c_str(), with_system ? &system : nullptr, wkbLineString, options.List());
    REQUIRE(layer != nullptr);
    OGRFieldDefn field("name", OFTString);
    if (layer->GetLayerDefn()->GetFieldIndex("name") < 0) layer->CreateField(&field);
    OGRFeature feature(layer->GetLayerDefn());
    OGRLineString line = brook_as(system);
    feature.SetGeometry(&line);
    if (feature.GetFieldIndex("name") >= 0) feature.SetField("name", "mill");
    REQUIRE(layer->CreateFeature(&feature) == OGRERR_NONE);
    return path;
}

ShapeFile lines_of(const fs::path& path, std::optional<std::string> layer = {}) {
    return read_shapes(path, {.role = "channels", .layer = std::move(layer), .layer_key = "channels_layer"}, ReferenceSystem::from_text("EPSG:25832"));
}

void check_brook(const ShapeFile& read, double within_m) {
    REQUIRE(read.lines.size() == 1);
    REQUIRE(read.lines[0].size() == brook.size());
    for (std::size_t i = 0; i < brook.size(); ++i) {
        CHECK(read.lines[0][i].x == Approx(brook[i].x).epsilon(0).margin(within_m));
        CHECK(read.lines[0][i].y == Approx(brook[i].y).epsilon(0).margin(within_m));
    }
}

std::set<std::string> names_in(const fs::path& folder) {
    std::set<std::string> names;
    for (const fs::directory_entry& entry : fs::directory_iterator(folder)) names.insert(entry.path().filename());
    return names;
}

/// Packs files of a folder, at `inside` of the archive.
fs::path zipped(const fs::path& archive, const std::vector<fs::path>& files, const std::string& inside = "") {
    for (const fs::path& file : files) {
        const std::string target = "/vsizip/" + archive.string() + "/" + inside + file.filename().string();
        REQUIRE(CPLCopyFile(target.c_str(), file.c_str()) == 0);
    }
    return archive;
}

std::vector<fs::path> files_of(const fs::path& folder, const std::string& stem) {
    std::vector<fs::path> files;
    for (const fs::directory_entry& entry : fs::directory_iterator(folder)) {
        if (entry.path().stem() == stem) files.push_back(entry.path());
    }
    std::sort(files.begin(), files.end());
    return files;
}

std::string virtual_layers(const std::string& source, const std::string& more = "") {
    return "<OGRVRTDataSource><OGRVRTLayer name=\"brooks\"><SrcDataSource relativeToVRT=\"1\">" + source + "</SrcDataSource>" + more +
           "</OGRVRTLayer></OGRVRTDataSource>";
}

}  // namespace

TEST_CASE("mapped lines are read from every format of lines that GDAL writes, and nothing is left beside them") {
    for (const VectorFormat& format : line_formats()) {
        INFO(format.driver << ": " << format.file);
        const TemporaryFolder folder;
        const fs::path path = write_brook(folder, format);
        const std::set<std::string> before = names_in(folder.path());
        check_brook(lines_of(path, format.driver == "GPX" ? std::optional(format.layer) : std::nullopt), format.within_m);
        CHECK(names_in(folder.path()) == before);
    }
}

TEST_CASE("formats that GDAL reads and does not write are read too") {
    const TemporaryFolder folder;
    const fs::path map = write_file(folder / "town.osm", R"(<?xml version="1.0"?><osm version="0.6"><node id="1" lat="48.7" lon="9.0" version="1"/>
        <node id="2" lat="48.8" lon="9.1" version="1"/><way id="3" version="1"><nd ref="1"/><nd ref="2"/><tag k="waterway" v="stream"/></way></osm>)");
    const fs::path service = write_file(folder / "town.json", R"({"geometryType":"esriGeometryPolyline","spatialReference":{"wkid":4326},
        "fields":[{"name":"id","type":"esriFieldTypeInteger"}],"features":[{"attributes":{"id":1},"geometry":{"paths":[[[9.0,48.7],[9.1,48.8]]]}}]})");
    for (const auto& [path, layer] : {std::pair(map, std::optional<std::string>("lines")), std::pair(service, std::optional<std::string>())}) {
        INFO(path);
        const ShapeFile read = read_shapes(path, {.role = "channels", .layer = layer, .layer_key = "channels_layer"}, ReferenceSystem::wgs84());
        REQUIRE(read.lines.size() == 1);
        CHECK(read.lines[0][1].x == Approx(9.1).epsilon(1e-9));
        CHECK(read.lines[0][1].y == Approx(48.8).epsilon(1e-9));
    }
}

TEST_CASE("formats that hold no reference system are refused with the command that states one") {
    const TemporaryFolder folder;
    for (const VectorFormat& format : {VectorFormat{"DXF", "a.dxf", {}, false, 0, "entities"}, VectorFormat{"DGN", "b.dgn", {}, false, 0, "elements"}}) {
        const std::string said = sentence_of([&] { (void)lines_of(write_brook(folder, format)); });
        CHECK_THAT(said, Contains(format.file + " has no reference system") && Contains("ogr2ogr -a_srs EPSG:nnnnn " + std::string(1, format.file[0]) + "-placed.gpkg"));
    }
    const fs::path bare = write_brook(folder, {"ESRI Shapefile", "bare.shp"}, false);
    CHECK_THAT(sentence_of([&] { (void)lines_of(bare); }), Contains("bare.shp has no reference system"));
}

TEST_CASE("of a CSV file the columns of places are stated too where its reference system is wanting") {
    const TemporaryFolder folder;
    const fs::path path = write_file(folder / "inlets.csv", "name,easting,northing\nMill,500001,5399999\n");
    CHECK_THAT(sentence_of([&] { (void)read_points(path, {}, ReferenceSystem::from_text("EPSG:25832")); }),
               Contains("has no reference system") && Contains("-oo X_POSSIBLE_NAMES=x,easting"));
}

TEST_CASE("every driver of this GDAL that opens shapes is used, or is known to reach beyond the disk") {
    const GdalSession session;
    const std::set<std::string> beyond = {
        // networks
        "EEDA", "OGCAPI", "WFS", "OAPIF", "CSW", "Elasticsearch", "Carto", "AmigoCloud", "PLSCENES", "NGW", "HTTP", "OGR_OGDI", "CouchDB", "Cloudant",
        // application schemas, fetched from wherever a file says
        "GMLAS",
        // databases on servers, or through the system's own connections
        "PostgreSQL", "MySQL", "MSSQLSpatial", "ODBC", "PGeo", "OCI", "MongoDBv3", "HANA",
        // another program is started; nothing on the disk
        "GPSBabel", "Memory"};
    for (int i = 0; i < GetGDALDriverManager()->GetDriverCount(); ++i) {
        GDALDriver& driver = *GetGDALDriverManager()->GetDriver(i);
        const std::string name = driver.GetDescription();
        if (!CPLTestBool(CSLFetchNameValueDef(driver.GetMetadata(), GDAL_DCAP_VECTOR, "NO")) || driver.GetMetadataItem(GDAL_DCAP_OPEN) == nullptr) continue;
        INFO(name);
        CHECK((CSLFindString(local_vector_drivers(), name.c_str()) >= 0) != beyond.contains(name));
    }
}

TEST_CASE("a zipped shapefile is read where it lies, at the top of its archive or in a folder") {
    const TemporaryFolder folder;
    const fs::path shapefile = write_brook(folder, {"ESRI Shapefile", "brooks.shp"});
    check_brook(lines_of(zipped(folder / "top.zip", files_of(folder.path(), "brooks"))), 1e-6);
    check_brook(lines_of(zipped(folder / "deep.zip", files_of(folder.path(), "brooks"), "data/of 2024/")), 1e-6);
    check_brook(lines_of(zipped(folder / "packed.zip", {write_brook(folder, {"GPKG", "brooks.gpkg"})})), 1e-6);
}

TEST_CASE("of an archive with several shapefiles the layer is named, and what is no data set or several is told") {
    const TemporaryFolder folder;
    write_brook(folder, {"ESRI Shapefile", "brooks.shp"});
    write_brook(folder, {"ESRI Shapefile", "drains.shp"});
    const fs::path both = zipped(zipped(folder / "both.zip", files_of(folder.path(), "brooks")), files_of(folder.path(), "drains"));
    CHECK_THAT(sentence_of([&] { (void)lines_of(both); }), Contains("several layers: brooks, drains"));
    check_brook(lines_of(both, "drains"), 1e-6);
    const fs::path mixed = zipped(zipped(folder / "mixed.zip", files_of(folder.path(), "brooks")), {write_brook(folder, {"GPKG", "town.gpkg"})});
    CHECK_THAT(sentence_of([&] { (void)lines_of(mixed); }), Contains("several data sets (brooks.shp, town.gpkg)"));
    const fs::path disguised = zipped(folder / "disguised.zip", {write_file(folder / "town.gml", virtual_layers("brooks.shp"))});
    CHECK_THAT(sentence_of([&] { (void)lines_of(disguised); }), Contains("cannot be read as lines"));
    const fs::path none = zipped(folder / "none.zip", {write_file(folder / "readme.txt", "nothing here")});
    CHECK_THAT(sentence_of([&] { (void)lines_of(none); }), Contains("holds no shapefile"));
}

TEST_CASE("a folder that is no data set is refused, and so is what lies at an address") {
    const TemporaryFolder folder;
    write_brook(folder, {"ESRI Shapefile", "brooks.shp"});
    CHECK_THAT(sentence_of([&] { (void)lines_of(folder.path()); }), Contains("is a folder") && Contains("name the file in it"));
    for (const char* name : {"http://127.0.0.1/brooks.gpkg", "/vsicurl/http://127.0.0.1/brooks.gpkg", "PG:dbname=town", "<OGRWFSDataSource/>"}) {
        CHECK_THAT(sentence_of([&] { (void)lines_of(name); }), Contains("address") || Contains("does not exist"));
    }
}

TEST_CASE("texts and tables are not taken for shapes by accident") {
    const TemporaryFolder folder;
    const auto said = [&](const std::string& name, const std::string& content) {
        return sentence_of([&] { (void)lines_of(write_file(folder / name, content)); });
    };
    CHECK_THAT(said("rain.csv", "minutes,2,10\n5,1.2,2.0\n"), Contains("table without shapes") && Contains("column WKT"));
    CHECK_THAT(said("study.toml", "[terrain]\nelevation = \"dem.tif\"\n"), Contains("cannot be read as lines") && Contains("it is a text"));
    CHECK_THAT(said("notes.txt", "1 2 3\n4 5 6\n"), Contains("it is a text"));
    CHECK_THAT(said("service.xml", "<OGRWFSDataSource><URL>http://127.0.0.1/</URL></OGRWFSDataSource>"), Contains("cannot be read as lines"));
    CHECK_THAT(sentence_of([&] { (void)lines_of(write_tiff(folder / "dem.tif", {})); }), Contains("cannot be read as lines"));
}

TEST_CASE("a table of styles beside the only layer of shapes does not ask which is meant") {
    const TemporaryFolder folder;
    const fs::path path = write_brook(folder, {"GPKG", "styled.gpkg"});
    {
        const GdalSession session;
        const GDALDatasetUniquePtr file(GDALDataset::Open(path.c_str(), GDAL_OF_VECTOR | GDAL_OF_UPDATE));
        REQUIRE(file->CreateLayer("layer_styles", nullptr, wkbNone) != nullptr);
    }
    check_brook(lines_of(path), 1e-6);
    CHECK_THAT(sentence_of([&] { (void)lines_of(path, "layer_styles"); }), Contains("\"layer_styles\"") && Contains("table without shapes") && Contains("are brooks"));
}

TEST_CASE("a virtual layer of local files is read") {
    const TemporaryFolder folder;
    write_brook(folder, {"GPKG", "brooks.gpkg"});
    check_brook(lines_of(write_file(folder / "a.vrt", virtual_layers("brooks.gpkg"))), 1e-6);
    check_brook(lines_of(write_file(folder / "b.vrt", virtual_layers("a.vrt"))), 1e-6);
    for (const VectorFormat& format : line_formats()) {
        // GDAL 3.6 loses the reference system of a MIF file behind a virtual layer.
        if (format.is_geographic || format.file == "brooks.mif") continue;
        INFO(format.driver << ": " << format.file);
        write_brook(folder, format);
        const std::string layer = format.driver == "GeoJSONSeq" ? "<SrcLayer>brooks</SrcLayer>" : "";
        check_brook(lines_of(write_file(folder / "c.vrt", virtual_layers(format.file, layer))), std::max(format.within_m, 1e-3));
    }
}

TEST_CASE("a virtual layer that reaches for anything else is refused before it is opened") {
    const TemporaryFolder folder;
    write_brook(folder, {"GPKG", "brooks.gpkg"});
    const auto said = [&](const std::string& content) { return sentence_of([&] { (void)lines_of(write_file(folder / "a.vrt", content)); }); };
    CHECK_THAT(said(virtual_layers("gone.gpkg")), Contains((folder / "gone.gpkg").string() + ", which is not there"));
    CHECK_THAT(said(virtual_layers("a.vrt")), Contains("names itself"));
    CHECK_THAT(said(virtual_layers("brooks.gpkg", "<SrcSQL>SELECT * FROM 'http://127.0.0.1/a.gpkg'.a</SrcSQL>")), Contains("by SQL"));
    CHECK_THAT(said(virtual_layers("brooks.gpkg", "<openoptions><OOI key=\"A\">b</OOI></openoptions>")), Contains("options of its own"));
    for (const char* name : {"http://127.0.0.1/a.gpkg", "/vsicurl/http://127.0.0.1/a.gpkg", "WFS:http://127.0.0.1/"}) {
        const std::string tagged = "<OGRVRTDataSource><OGRVRTLayer name=\"a\"><SRCdatasource>" + std::string(name) + "</SRCdatasource></OGRVRTLayer></OGRVRTDataSource>";
        CHECK_THAT(said(tagged), Contains("only plain local files"));
        const std::string attribute = "<OGRVRTDataSource><OGRVRTLayer name=\"a\" SrcDataSource=\"" + std::string(name) + "\"/></OGRVRTDataSource>";
        CHECK_THAT(said(attribute), Contains("only plain local files"));
    }
    CHECK_THAT(said(virtual_layers("PG:dbname=town")), Contains("which is not there"));
    write_file(folder / "service.xml", "<OGRWFSDataSource><URL>http://127.0.0.1/</URL></OGRWFSDataSource>");
    CHECK_THAT(said(virtual_layers("service.xml")), Contains("no file that holds shapes itself"));
    CHECK_THAT(said("<OGRVRTDataSource><OGRVRTLayer"), Contains("not well-formed"));
    write_file(folder / "both.gml", "<x xmlns:gml=\"http://www.opengis.net/gml\"><OGRWFSDataSource><URL>http://127.0.0.1/</URL></OGRWFSDataSource></x>");
    CHECK_THAT(said(virtual_layers("both.gml")), Contains("no file that holds shapes itself"));
}
