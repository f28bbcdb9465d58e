#include "rillclock/io/vrt_check.hpp"

#include "io_files.hpp"
#include "rillclock/io/elevation_file.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

std::string virtual_raster(const std::string& band_attributes, const std::string& band_content) {
    return "<VRTDataset rasterXSize=\"2\" rasterYSize=\"2\"><SRS>EPSG:26912</SRS>"
           "<GeoTransform>500000,30,0,4000000,0,-30</GeoTransform>"
           "<VRTRasterBand dataType=\"Float32\" band=\"1\" " +
           band_attributes + ">" + band_content + "</VRTRasterBand></VRTDataset>";
}
std::string tile(const std::string& name) {
    return "<SimpleSource><SourceFilename relativeToVRT=\"1\">" + name + "</SourceFilename></SimpleSource>";
}

struct VrtFolder {
    TemporaryFolder folder;
    fs::path vrt(const std::string& content) const { return write_file(folder / "a.vrt", content); }
    static std::string refusal(const fs::path& path) {
        return sentence_of([&] { (void)open_elevation(path); });
    }
};

}  // namespace

TEST_CASE_METHOD(VrtFolder, "a mosaic of local tiles is read") {
    write_tiff(folder / "tile.tif", {});
    CHECK(all_of(*open_elevation(vrt(virtual_raster("", tile("tile.tif")))).source) == std::vector<double>{1, 2, 3, 4});
}

TEST_CASE_METHOD(VrtFolder, "a missing tile is named") {
    CHECK_THAT(refusal(vrt(virtual_raster("", tile("gone.tif")))),
               Contains((folder / "gone.tif").string() + ", which is not there"));
}

TEST_CASE_METHOD(VrtFolder, "raw bytes of another file are refused") {
    const std::string content = "<SourceFilename relativetoVRT=\"0\">/etc/passwd</SourceFilename>";
    CHECK_THAT(refusal(vrt(virtual_raster("subClass=\"VRTRawRasterBand\"", content))), Contains("VRTRawRasterBand"));
}

TEST_CASE_METHOD(VrtFolder, "a pixel function is refused") {
    CHECK_THAT(
        refusal(vrt(virtual_raster("subClass=\"VRTDerivedRasterBand\"", "<PixelFunctionType>sum</PixelFunctionType>"))),
        Contains("pixel function"));
}

TEST_CASE_METHOD(VrtFolder, "a tile elsewhere is refused") {
    const std::string name =
        GENERATE("/vsicurl/http://127.0.0.1/a.tif", "http://127.0.0.1/a.tif", "/vsizip/a.zip/a.tif");
    CHECK_THAT(
        refusal(vrt(virtual_raster("", "<SimpleSource><SourceFilename>" + name + "</SourceFilename></SimpleSource>"))),
        Contains("only plain local files"));
}

TEST_CASE_METHOD(VrtFolder, "a tile that describes data elsewhere is refused") {
    write_file(folder / "wms.xml", "<GDAL_WMS><Service/></GDAL_WMS>");
    CHECK_THAT(refusal(vrt(virtual_raster("", tile("wms.xml")))), Contains("describes data elsewhere"));
}

TEST_CASE_METHOD(VrtFolder, "a virtual raster that names itself is refused") {
    CHECK_THAT(refusal(vrt(virtual_raster("", tile("a.vrt")))), Contains("names itself"));
}

TEST_CASE_METHOD(VrtFolder, "a virtual raster that is broken XML is refused") {
    CHECK_THAT(refusal(vrt("<VRTDataset rasterXSize=\"2\"")), Contains("not well-formed"));
}

TEST_CASE_METHOD(VrtFolder, "names of parts count in capitals or not, as elements or attributes, as GDAL reads them") {
    const std::string raw = "<VRTDataset rasterXSize=\"2\" rasterYSize=\"2\"><vrtrasterband dataType=\"Byte\" subclass=\"vrtrawrasterband\">"
                            "<SourceFilename>/etc/passwd</SourceFilename></vrtrasterband></VRTDataset>";
    CHECK_THAT(refusal(vrt(raw)), Contains("VRTRawRasterBand"));
    CHECK_THAT(refusal(vrt(virtual_raster("", "<SimpleSource><sourcefilename>http://127.0.0.1/a.tif</sourcefilename></SimpleSource>"))),
               Contains("only plain local files"));
    CHECK_THAT(refusal(vrt(virtual_raster("", "<SimpleSource SourceFilename=\"http://127.0.0.1/a.tif\"/>"))), Contains("only plain local files"));
}
