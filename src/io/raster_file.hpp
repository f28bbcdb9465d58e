#pragma once

#include <gdal_priv.h>

#include <filesystem>
#include <memory>
#include <optional>
#include <span>
#include <string>

#include "rillclock/io/gdal_session.hpp"
#include "rillclock/io/reference_system.hpp"
#include "rillclock/io/stored_type.hpp"
#include "rillclock/raster/blocks.hpp"

namespace rillclock {

struct RasterRequest {
    std::filesystem::path path;
    std::string role;  ///< "elevation", "cover" or "soil", for messages
    std::optional<int> band = {};
    std::string resampling;         ///< what gdalwarp should use in advice: "bilinear" or "near"
    std::string band_key = "band";  ///< what states the band, in advice
};

/// One band of a raster file on the disk: what elevations and land cover have in common.
class RasterFile {
public:
    /// Throws Error (inputs) where it is no raster that can be used, with what would mend it.
    explicit RasterFile(RasterRequest request);

    [[nodiscard]] const Grid& grid() const { return grid_; }
    [[nodiscard]] const ReferenceSystem& system() const { return *system_; }
    [[nodiscard]] GDALRasterBand& band() const { return *band_; }
    [[nodiscard]] StoredType stored() const { return stored_; }
    [[nodiscard]] std::optional<double> nodata() const { return nodata_; }
    [[nodiscard]] const GdalSession& session() const { return session_; }
    [[nodiscard]] const GdalMark& opened_at() const { return opened_at_; }
    [[nodiscard]] const std::string& role() const { return request_.role; }
    /// "elevation file dem.tif"
    [[nodiscard]] std::string called() const;
    /// A command with the file's name in it: "gdalwarp -r bilinear dem.tif dem-SUFFIX.tif".
    [[nodiscard]] std::string command(const std::string& program_and_options, const std::string& suffix) const;

    /// Stored values of a window of the north-up grid, exact; NaN where they are nodata or masked. Returns how many
    /// cells hold NaN themselves without its being the file's nodata.
    std::int64_t read(const Window& window, std::span<double> values) const;

private:
    void open();
    void choose_band();
    void set_stored_type();
    void set_grid();
    void set_system();
    void check_size() const;
    void check_content() const;
    void read_raw(GDALRasterBand& band, const Window& window, std::span<double> values) const;
    void hide_masked(const Window& window, std::span<double> values) const;
    void hide_nodata(std::span<double> values) const;

    GdalSession session_;
    RasterRequest request_;
    GdalMark opened_at_;
    GDALDatasetUniquePtr dataset_;
    GDALRasterBand* band_ = nullptr;
    StoredType stored_ = StoredType::float32;
    std::optional<double> nodata_;
    bool is_south_up_ = false;
    bool has_mask_ = false;
    Grid grid_;
    std::optional<ReferenceSystem> system_;
};

}  // namespace rillclock
