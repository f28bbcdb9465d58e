#include "vector_file.hpp"

#include <cpl_string.h>
#include <cpl_vsi.h>

#include <algorithm>
#include <array>
#include <cctype>
#include <fstream>
#include <memory>
#include <string_view>
#include <utility>
#include <vector>

#include "local_file.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "virtual_layer.hpp"

namespace rillclock {
namespace {

namespace fs = std::filesystem;

/// The first is tried first. Those of later versions of GDAL are among them; what a version has not is passed over.
constexpr std::array drivers = {
    "GPKG",       "GeoJSON",    "GeoJSONSeq", "ESRI Shapefile", "FlatGeobuf", "OpenFileGDB",    "CSV",        "LIBKML",     "KML",
    "GML",        "GPX",        "MapInfo File", "DXF",          "SQLite",     "OGR_VRT",        "OGR_GMT",    "JML",        "GeoRSS",
    "TopoJSON",   "ESRIJSON",   "JSONFG",     "OSM",            "DGN",        "CAD",            "WAsP",       "Geoconcept", "NAS",
    "LVBAG",      "S57",        "UK .NTF",    "OGR_SDTS",       "TIGER",      "AVCBin",         "AVCE00",     "VFK",        "VDV",
    "EDIGEO",     "SXF",        "SOSI",       "Interlis 1",     "Interlis 2", "Idrisi",         "Selafin",    "SVG",        "MVT",
    "MBTiles",    "PMTiles",    "PDF",        "netCDF",         "PCIDSK",     "PDS4",           "OGR_PDS",    "VICAR",      "FITS",
    "BAG",        "JP2OpenJPEG", "ODS",       "XLSX",           "XLS",        "Parquet",        "Arrow",      "MiraMonVector", "XODR",
    "MapML",
    static_cast<const char*>(nullptr)};

/// Drivers whose data set is a folder.
constexpr std::array folder_drivers = {"OpenFileGDB", "AVCBin", "TIGER", "UK .NTF", "LVBAG", static_cast<const char*>(nullptr)};

/// Drivers of what is looked for in archives. None of them reads a file that names others: what lies in an archive is not looked through before.
constexpr std::array archive_drivers = {"ESRI Shapefile", "OpenFileGDB", "GPKG", "GeoJSON", "FlatGeobuf", "GML", "LIBKML", "KML", "MapInfo File", "GPX",
                                        static_cast<const char*>(nullptr)};

constexpr std::array csv_options = {"X_POSSIBLE_NAMES=x,easting,lon,longitude", "Y_POSSIBLE_NAMES=y,northing,lat,latitude",
                                    "GEOM_POSSIBLE_NAMES=wkt,geometry,geom", "AUTODETECT_TYPE=YES", static_cast<const char*>(nullptr)};
constexpr std::array gml_options = {"DOWNLOAD_SCHEMA=NO", "WRITE_GFS=NO", static_cast<const char*>(nullptr)};

const char* const* options_for(const std::string& path, const char* const* allowed) {
    GDALDriver* const driver = GDALDriver::FromHandle(GDALIdentifyDriverEx(path.c_str(), GDAL_OF_VECTOR, allowed, nullptr));
    const std::string_view name = driver != nullptr ? driver->GetDescription() : "";
    if (name == "CSV") return csv_options.data();
    return name == "GML" ? gml_options.data() : nullptr;
}

/// None where no allowed driver opens it, or there is no layer in it.
GDALDatasetUniquePtr opened_vectors(const std::string& path, const char* const* allowed) {
    GDALDatasetUniquePtr dataset(GDALDataset::Open(path.c_str(), GDAL_OF_VECTOR | GDAL_OF_READONLY, allowed, options_for(path, allowed)));
    return dataset && dataset->GetLayerCount() > 0 ? std::move(dataset) : nullptr;
}

bool is_archive(const fs::path& path) {
    std::array<char, 4> bytes{};
    std::ifstream(path, std::ios::binary).read(bytes.data(), bytes.size());
    return std::string_view(bytes.data(), bytes.size()) == "PK\x03\x04";
}

/// What of an archive is a data set, by its ending; a shapefile's other parts are not told.
bool is_data_set(const std::string& member) {
    constexpr std::array<std::string_view, 10> endings = {".shp", ".gdb", ".gpkg", ".geojson", ".fgb", ".gml", ".kml", ".tab", ".mif", ".gpx"};
    const fs::path path(member);
    std::string ending = path.extension().string();
    std::transform(ending.begin(), ending.end(), ending.begin(), [](unsigned char c) { return static_cast<char>(std::tolower(c)); });
    const bool leads_out = std::any_of(path.begin(), path.end(), [](const fs::path& part) { return part == ".."; });
    return !leads_out && !member.starts_with("__MACOSX/") && std::find(endings.begin(), endings.end(), ending) != endings.end();
}

/// Members of an archive that are data sets, by name. A folder's name ends in a slash there.
std::vector<std::string> data_sets_in(const std::string& archive) {
    const CPLStringList members(VSIReadDirRecursive(archive.c_str()));
    std::vector<std::string> found;
    for (int i = 0; i < members.size(); ++i) {
        std::string member = members[i];
        if (member.ends_with('/')) member.pop_back();
        if (is_data_set(member)) found.push_back(std::move(member));
    }
    std::sort(found.begin(), found.end());
    return found;
}

class VectorOpening {
public:
    VectorOpening(const VectorRequest& request, const GdalSession& session)
        : request_(request), session_(session), before_(session.mark()), path_(fs::absolute(request.path).string()) {}

    [[nodiscard]] GDALDatasetUniquePtr open() const {
        std::error_code ignored;
        if (fs::is_directory(request_.path, ignored)) return from_folder();
        check_local_file(request_.path, request_.called);
        if (is_virtual_layer(request_.path)) check_virtual_layer(request_.path);
        GDALDatasetUniquePtr dataset = opened_vectors(path_, drivers.data());
        if (!dataset && is_archive(request_.path)) dataset = from_archive();
        if (!dataset) refuse(seeming_kind(request_.path));
        return dataset;
    }

private:
    [[nodiscard]] GDALDatasetUniquePtr from_folder() const {
        GDALDatasetUniquePtr dataset = opened_vectors(path_, folder_drivers.data());
        if (!dataset) {
            throw input_error("The " + request_.called + " is a folder, and no data set by itself as a file geodatabase (.gdb) is; name the file in it.");
        }
        return dataset;
    }

    [[nodiscard]] GDALDatasetUniquePtr from_archive() const {
        const std::string archive = "/vsizip/{" + path_ + "}";
        const std::vector<std::string> found = data_sets_in(archive);
        if (found.empty()) refuse("it is a zip archive that holds no shapefile or other data set: unpack it and name the file that was meant");
        if (found.size() == 1) return opened_vectors(archive + "/" + found.front(), archive_drivers.data());
        const fs::path folder = fs::path(found.front()).parent_path();
        const bool are_shapefiles = std::all_of(found.begin(), found.end(), [&](const std::string& member) {
            return fs::path(member).parent_path() == folder && std::string_view(member).substr(member.size() - 4) == ".shp";
        });
        if (are_shapefiles) {
            constexpr std::array shapefile = {"ESRI Shapefile", static_cast<const char*>(nullptr)};
            return opened_vectors(folder.empty() ? archive : archive + "/" + folder.string(), shapefile.data());
        }
        std::string names;
        for (const std::string& member : found) names += (names.empty() ? "" : ", ") + member;
        refuse("it is a zip archive that holds several data sets (" + names + "): unpack it and name the one that is meant");
    }

    [[noreturn]] void refuse(const std::string& why) const {
        const std::string reason = session_.failure_since(before_);
        throw input_error("The " + request_.called + " cannot be read as " + request_.wanted + "; " + why + (reason.empty() ? "." : " (" + reason + ")."));
    }

    const VectorRequest& request_;
    const GdalSession& session_;
    GdalMark before_;
    std::string path_;
};

}  // namespace

const char* const* local_vector_drivers() { return drivers.data(); }

GDALDatasetUniquePtr open_vectors(const VectorRequest& request, const GdalSession& session) {
    return VectorOpening(request, session).open();
}

}  // namespace rillclock
