#include "raster_file.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstdio>
#include <limits>
#include <sstream>
#include <vector>

#include "local_file.hpp"
#include "nearest_float.hpp"
#include "quiet_gdal.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/io/vrt_check.hpp"

namespace rillclock {
namespace {

/// File formats only: nothing here fetches, runs or describes data elsewhere but VRT, which is checked before.
constexpr std::array<const char*, 27> raster_drivers = {
    "GTiff",          "VRT",    "AAIGrid", "DTED", "SRTMHGT", "USGSDEM", "HFA",  "EHdr", "ENVI", "AIG",
    "GRASSASCIIGrid", "SDTS",   "RST",     "GSAG", "GSBG",    "GS7BG",   "BT",   "SAGA", "XYZ",  "ERS",
    "ILWIS",          "netCDF", "GPKG",    "PNG",  "JPEG",    "LCP",     nullptr};

constexpr double nan = std::numeric_limits<double>::quiet_NaN();

std::string whole(double value) {
    std::array<char, 32> text{};
    std::snprintf(text.data(), text.size(), "%.0f", value);
    return text.data();
}

bool is_alpha(GDALRasterBand& band) {
    return band.GetColorInterpretation() == GCI_AlphaBand;
}

std::string band_list(GDALDataset& dataset) {
    std::ostringstream list;
    for (int b = 1; b <= dataset.GetRasterCount(); ++b) {
        GDALRasterBand& band = *dataset.GetRasterBand(b);
        const std::string description = band.GetDescription();
        list << (b == 1 ? "" : ", ") << b << " (" << (description.empty() ? "no name" : description) << ", "
             << GDALGetDataTypeName(band.GetRasterDataType()) << ")";
    }
    return list.str();
}

double bytes_on_disk(GDALDataset& dataset) {
    double bytes = 0;
    char** files = dataset.GetFileList();
    for (char** file = files; file && *file; ++file) {
        std::error_code problem;
        const auto size = std::filesystem::file_size(*file, problem);
        if (!problem) bytes += static_cast<double>(size);
    }
    CSLDestroy(files);
    return bytes;
}

/// Share of the band's blocks that are there at all; a GeoTIFF may leave out blocks of nodata.
double share_present(GDALRasterBand& band) {
    double percent = 100.0;
    const int status = band.GetDataCoverageStatus(0, 0, band.GetXSize(), band.GetYSize(), 0, &percent);
    return (status & GDAL_DATA_COVERAGE_STATUS_UNIMPLEMENTED) != 0 ? 1.0 : percent / 100.0;
}

}  // namespace

RasterFile::RasterFile(RasterRequest request) : request_(std::move(request)), opened_at_(session_.mark()) {
    check_local_file(request_.path, called());
    if (is_virtual_raster(request_.path)) check_virtual_raster(request_.path);
    open();
    choose_band();
    check_size();   // what is too large is not asked to be copied anew
    check_content();
    set_stored_type();
    set_grid();
    set_system();
}

std::string RasterFile::called() const {
    return request_.role + " file " + request_.path.string();
}

std::string RasterFile::command(const std::string& program_and_options, const std::string& suffix) const {
    std::filesystem::path to = request_.path;
    to.replace_filename(request_.path.stem().string() + "-" + suffix + ".tif");
    return program_and_options + " " + request_.path.string() + " " + to.string();
}

void RasterFile::open() {
    const std::string path = std::filesystem::absolute(request_.path).string();
    dataset_.reset(GDALDataset::Open(path.c_str(), GDAL_OF_RASTER | GDAL_OF_READONLY, raster_drivers.data()));
    if (dataset_ && dataset_->GetRasterCount() > 0) return;
    const std::string reason = session_.failure_since(opened_at_);
    throw input_error("The " + called() + " cannot be read as a raster; " + seeming_kind(request_.path) +
                      (reason.empty() ? "." : " (" + reason + ")."));
}

void RasterFile::choose_band() {
    const int count = dataset_->GetRasterCount();
    int values = 0;
    for (int b = 1; b <= count; ++b) values += is_alpha(*dataset_->GetRasterBand(b)) ? 0 : 1;
    if (request_.band && (*request_.band < 1 || *request_.band > count))
        throw input_error("The " + called() + " has no band " + std::to_string(*request_.band) + "; it has " +
                          band_list(*dataset_) + ".");
    if (!request_.band && values > 1)
        throw input_error("The " + called() + " has several bands: " + band_list(*dataset_) + "; say which holds the " +
                          request_.role + ", for example " + request_.band_key + " = 1.");
    band_ = dataset_->GetRasterBand(request_.band.value_or(1));
    const int mask = band_->GetMaskFlags();
    has_mask_ = (mask & (GMF_ALL_VALID | GMF_NODATA)) == 0;
}

void RasterFile::set_stored_type() {
    const char* pixel_type = band_->GetMetadataItem("PIXELTYPE", "IMAGE_STRUCTURE");
    const bool is_signed = pixel_type && std::string(pixel_type) == "SIGNEDBYTE";
    switch (band_->GetRasterDataType()) {
        case GDT_Byte:
            stored_ = is_signed ? StoredType::int8 : StoredType::uint8;
            break;
        case GDT_Int16:
            stored_ = StoredType::int16;
            break;
        case GDT_UInt16:
            stored_ = StoredType::uint16;
            break;
        case GDT_Int32:
            stored_ = StoredType::int32;
            break;
        case GDT_UInt32:
            stored_ = StoredType::uint32;
            break;
        case GDT_Float32:
            stored_ = StoredType::float32;
            break;
        case GDT_Float64:
            stored_ = StoredType::float64;
            break;
        default:
            throw input_error(
                "The " + called() + " holds values of type " + GDALGetDataTypeName(band_->GetRasterDataType()) +
                ", which are not read; convert them: " + command("gdal_translate -ot Float64", "float64") + ".");
    }
    int has_nodata = 0;
    const double nodata = band_->GetNoDataValue(&has_nodata);
    // A float file holds floats: the tag, a double, means the float nearest to it.
    if (has_nodata != 0) nodata_ = stored_ == StoredType::float32 ? static_cast<double>(nearest_float(nodata)) : nodata;
}

void RasterFile::set_grid() {
    std::array<double, 6> t{};
    if (dataset_->GetGeoTransform(t.data()) != CE_None)
        throw input_error("The " + called() + " does not say where its cells lie; set its corners: " +
                          command("gdal_translate -a_ullr LEFT TOP RIGHT BOTTOM -a_srs EPSG:nnnnn", "placed") + ".");
    for (const double number : t)
        if (!std::isfinite(number))
            throw input_error("The " + called() +
                              " gives the place of its cells by numbers that are "
                              "not finite; set its corners with gdal_edit.py -a_ullr.");
    if (t[2] != 0.0 || t[4] != 0.0 || t[1] < 0.0)
        throw input_error("The " + called() + " is rotated against the axes of its reference system; turn it: " +
                          command("gdalwarp -r " + request_.resampling, "north-up") + ".");
    if (!(t[1] > 0.0 && std::abs(t[5]) > 0.0))
        throw input_error("The " + called() + " has cells of size 0; set its corners with gdal_edit.py -a_ullr.");
    is_south_up_ = t[5] > 0.0;
    const double height = std::abs(t[5]);
    const std::int64_t rows = dataset_->GetRasterYSize();
    grid_ = {.rows = rows,
             .columns = dataset_->GetRasterXSize(),
             .left = t[0],
             .top = is_south_up_ ? t[3] + height * static_cast<double>(rows) : t[3],
             .cell_width = t[1],
             .cell_height = height};
}

void RasterFile::set_system() {
    const OGRSpatialReference* system = dataset_->GetSpatialRef();
    if (!system || system->IsEmpty()) {
        const bool is_tiff = std::string(dataset_->GetDriver()->GetDescription()) == "GTiff";
        throw input_error("The " + called() + " has no reference system; state the one its coordinates are in: " +
                          (is_tiff ? "gdal_edit.py -a_srs EPSG:nnnnn " + request_.path.string()
                                   : command("gdal_translate -a_srs EPSG:nnnnn", "placed")) +
                          ".");
    }
    static constexpr std::array<const char*, 2> options = {"FORMAT=WKT2_2019", nullptr};
    char* text = nullptr;
    system->exportToWkt(&text, options.data());
    const std::string wkt = text ? text : "";
    CPLFree(text);
    system_ = ReferenceSystem::from_text(wkt);
}

void RasterFile::check_size() const {
    const double cells = static_cast<double>(dataset_->GetRasterXSize()) * dataset_->GetRasterYSize();
    if (!(cells < 4294967295.0))
        throw input_error("The " + called() + " has " + std::to_string(dataset_->GetRasterXSize()) + " x " +
                          std::to_string(dataset_->GetRasterYSize()) +
                          " cells, but at most 4294967294 can be numbered; cut out the part needed: " +
                          command("gdal_translate -projwin LEFT TOP RIGHT BOTTOM", "part") + ".");
}

void RasterFile::check_content() const {
    if (is_virtual_raster(request_.path)) return;  // its cells are in its tiles
    const double cells = static_cast<double>(dataset_->GetRasterXSize()) * dataset_->GetRasterYSize();
    const double claimed = cells * GDALGetDataTypeSizeBytes(band_->GetRasterDataType());
    const double held = bytes_on_disk(*dataset_);
    const double present = share_present(*band_);
    constexpr double least_doubted = 16.0 * 1024 * 1024;  // small files may well be all one value
    if (claimed < least_doubted || (present > 0.0 && claimed * present <= 1000.0 * held)) return;
    throw input_error("The " + called() + " claims " + std::to_string(dataset_->GetRasterXSize()) + " x " +
                      std::to_string(dataset_->GetRasterYSize()) + " cells, " + whole(claimed) + " bytes, but holds " +
                      whole(held) + " bytes; copy or download it again.");
}

void RasterFile::read_raw(GDALRasterBand& band, const Window& window, std::span<double> values) const {
    const std::int64_t first = is_south_up_ ? grid_.rows - window.row - window.rows : window.row;
    const GdalMark before = session_.mark();
    const CPLErr result =
        band.RasterIO(GF_Read, static_cast<int>(window.column), static_cast<int>(first),
                      static_cast<int>(window.columns), static_cast<int>(window.rows), values.data(),
                      static_cast<int>(window.columns), static_cast<int>(window.rows), GDT_Float64, 0, 0, nullptr);
    const std::string what = "Rows " + std::to_string(first) + " to " + std::to_string(first + window.rows - 1) +
                             " of the " + called() +
                             " cannot be read, so it is damaged or cut short; copy or download it again";
    session_.throw_if_failed(before, Fault::inputs, what);
    if (result != CE_None) throw input_error(what + ".");
    if (!is_south_up_) return;
    for (std::int64_t r = 0; r < window.rows / 2; ++r)
        std::swap_ranges(values.begin() + r * window.columns, values.begin() + (r + 1) * window.columns,
                         values.begin() + (window.rows - 1 - r) * window.columns);
}

void RasterFile::hide_masked(const Window& window, std::span<double> values) const {
    std::vector<double> mask(values.size());
    read_raw(*band_->GetMaskBand(), window, mask);
    for (std::size_t i = 0; i < values.size(); ++i)
        if (mask[i] == 0.0) values[i] = nan;
}

void RasterFile::hide_nodata(std::span<double> values) const {
    if (nodata_) std::replace(values.begin(), values.end(), *nodata_, nan);
}

std::int64_t RasterFile::read(const Window& window, std::span<double> values) const {
    read_raw(*band_, window, values);
    const bool nan_is_nodata = nodata_ && std::isnan(*nodata_);
    const auto is_nan = [](double value) { return std::isnan(value); };
    const std::int64_t strange = nan_is_nodata ? 0 : std::count_if(values.begin(), values.end(), is_nan);
    if (stored_ == StoredType::int8)
        for (double& value : values) value = value > 127.0 ? value - 256.0 : value;
    hide_nodata(values);
    if (has_mask_) hide_masked(window, values);
    return strange;
}

}  // namespace rillclock
