#include "rillclock/io/elevation_file.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstdio>
#include <fstream>
#include <iterator>
#include <limits>
#include <utility>
#include <vector>

#include "raster_file.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/raster/elevation_check.hpp"

namespace rillclock {
namespace {

std::string number(double value) {
    std::array<char, 40> text{};
    std::snprintf(text.data(), text.size(), "%.10g", value);
    return text.data();
}

class ElevationSource : public NotedSource<double> {
public:
    ElevationSource(RasterFile file, const ElevationFormat& format)
        : file_(std::move(file)), check_(format.unit.metres_per_unit, format.scale, format.offset) {}

    [[nodiscard]] const Grid& grid() const override { return file_.grid(); }

    void read(const Window& window, std::span<double> values) override {
        check_.count_not_finite(file_.read(window, values));
        for (double& value : values) value = check_.checked(value);
    }

    [[nodiscard]] Notices notices() const override { return check_.notices(file_.called()); }

private:
    RasterFile file_;
    ElevationCheck check_;
};

void check_kind(const RasterFile& file) {
    GDALRasterBand& band = file.band();
    if (band.GetColorTable() == nullptr && band.GetColorInterpretation() != GCI_PaletteIndex) return;
    throw input_error("The " + file.called() +
                      " is a picture with a palette, whose numbers are colours and not elevations; get the elevations "
                      "themselves from whoever made it.");
}

void set_scale(const RasterFile& file, ElevationFormat& format, Notices& notices) {
    format.scale = file.band().GetScale();
    format.offset = file.band().GetOffset();
    if (!(format.scale > 0.0) || !std::isfinite(format.scale) || !std::isfinite(format.offset))
        throw input_error("The " + file.called() + " has scale " + number(format.scale) + " and offset " +
                          number(format.offset) +
                          ", but a scale must be above 0; set it with gdal_edit.py -scale 1 -offset 0.");
    if (format.scale == 1.0 && format.offset == 0.0) return;
    notices.push_back({.code = "elevation-scaled",
                       .text = "Elevations are the values of the " + file.called() + " times " + number(format.scale) +
                               " plus " + number(format.offset) + ", as the file says."});
}

std::string line_to_add(const char* unit) {
    return std::string("elevation_unit = \"") + unit + "\"";
}

/// A unit and who says so.
struct Statement {
    std::string by;
    LengthUnit unit;
};

std::optional<Statement> stated_by_study(const std::optional<std::string>& text) {
    if (!text) return std::nullopt;
    const std::optional<LengthUnit> unit = length_unit_named(*text);
    if (!unit)
        throw input_error("elevation_unit = \"" + *text +
                          "\" is no unit of length; write \"m\", \"ft\" or \"us survey ft\".");
    return Statement{"the study", *unit};
}

std::optional<Statement> stated_by_band(const RasterFile& file, bool study_states_it) {
    const std::string text = file.band().GetUnitType();
    if (text.empty() || text == "unknown") return std::nullopt;
    const std::optional<LengthUnit> unit = length_unit_named(text);
    if (!unit && !study_states_it)
        throw input_error("The " + file.called() + " gives its elevations in \"" + text +
                          "\", which is no unit of length that is known; state it in the study: " + line_to_add("m") +
                          " or " + line_to_add("ft") + ".");
    return unit ? std::optional(Statement{"the file's band", *unit}) : std::nullopt;
}

std::optional<Statement> stated_by_system(const ReferenceSystem& system) {
    if (!system.vertical_unit()) return std::nullopt;
    return Statement{"the vertical part of its reference system", *system.vertical_unit()};
}

/// The first that is known; throws where two contradict each other.
std::optional<Statement> agreed(const RasterFile& file, const std::array<std::optional<Statement>, 3>& statements) {
    std::optional<Statement> first;
    for (const std::optional<Statement>& next : statements) {
        if (!next) continue;
        if (!first) first = next;
        if (first->unit.contradicts(next->unit))
            throw input_error("The vertical unit of the " + file.called() + " is contradictory: " + first->by +
                              " says " + first->unit.name + ", " + next->by + " says " + next->unit.name +
                              "; correct whichever is wrong (gdal_edit.py -units, gdal_edit.py -a_srs, or the study's "
                              "elevation_unit).");
    }
    return first;
}

LengthUnit vertical_unit(const RasterFile& file, const ElevationOptions& options, Notices& notices) {
    const std::optional<Statement> found = agreed(file, {stated_by_study(options.unit), stated_by_system(file.system()),
                                                         stated_by_band(file, options.unit.has_value())});
    if (found) return found->unit;
    if (file.system().is_projected() && !file.system().linear_unit().is_metre())
        throw input_error("The " + file.called() +
                          " does not say in what unit its elevations are, and its grid is in " +
                          file.system().linear_unit().name + "; add the line " + line_to_add("ft") +
                          " (or \"m\", \"us survey ft\") "
                          "to the study.");
    notices.push_back({.code = "elevation-unit-assumed",
                       .text = "The " + file.called() +
                               " does not say in what unit its elevations are; they are taken as "
                               "metres. If they are feet, add the line " +
                               line_to_add("ft") + " to the study."});
    return {};
}

struct Range {
    double least;
    double greatest;
};

/// None for floating point.
std::optional<Range> range_of(StoredType type) {
    switch (type) {
        case StoredType::int8:
            return Range{-128, 127};
        case StoredType::uint8:
            return Range{0, 255};
        case StoredType::int16:
            return Range{-32768, 32767};
        case StoredType::uint16:
            return Range{0, 65535};
        case StoredType::int32:
            return Range{-2147483648.0, 2147483647.0};
        case StoredType::uint32:
            return Range{0, 4294967295.0};
        case StoredType::float32:
        case StoredType::float64:
            return std::nullopt;
    }
    return std::nullopt;
}

bool holds(StoredType type, double value) {
    const std::optional<Range> range = range_of(type);
    return !range || (value >= range->least && value <= range->greatest && value == std::floor(value));
}

void check_nodata(const RasterFile& file, ElevationFormat& format, Notices& notices) {
    if (!format.nodata) return;
    if (!holds(format.stored, *format.nodata)) {
        notices.push_back(
            {.code = "nodata-outside-type",
             .text = "The nodata value " + number(*format.nodata) + " of the " + file.called() +
                     " cannot be held by its type, so no cell has it; correct it with gdal_edit.py -a_nodata "
                     "where the file has void cells."});
        format.nodata.reset();
        return;
    }
    const double as_elevation_m = (*format.nodata * format.scale + format.offset) * format.unit.metres_per_unit;
    if (as_elevation_m > -450.0 && as_elevation_m < 8900.0)
        notices.push_back(
            {.code = "nodata-is-elevation",
             .text = "The nodata value " + number(*format.nodata) + " of the " + file.called() +
                     " could be a true elevation; cells that have it are void. If they are ground, remove it "
                     "with gdal_edit.py -unsetnodata."});
}

/// A file beside the raster can change what it says without anyone noticing.
void notice_sidecar(const std::filesystem::path& path, const RasterFile& file, Notices& notices) {
    std::ifstream sidecar(path.string() + ".aux.xml", std::ios::binary);
    const std::string text((std::istreambuf_iterator<char>(sidecar)), std::istreambuf_iterator<char>());
    for (const char* tag : {"<NoDataValue", "<Scale>", "<Offset>", "<UnitType>", "<SRS", "<GeoTransform>"}) {
        if (text.find(tag) == std::string::npos) continue;
        notices.push_back({.code = "sidecar-used",
                           .text = "The file " + path.string() + ".aux.xml adds to what the " + file.called() +
                                   " says (nodata, scale, unit or place); remove it if that is not meant."});
        return;
    }
}

/// Resampled to web Mercator, elevations are smoother or coarser than they were taken.
void notice_web_mercator(const RasterFile& file, Notices& notices) {
    if (!file.system().is_web_mercator()) return;
    notices.push_back({.code = "web-mercator",
                       .text = "The " + file.called() + " is in web Mercator (" + file.system().name() +
                               "); lengths and areas are taken on the ellipsoid, row by row. Elevations in the system "
                               "in which they were made are better, since this one is always resampled."});
}

/// What the file was opened in spite of.
void notice_warnings(const RasterFile& file, Notices& notices) {
    std::vector<std::string> texts = file.session().warnings_since(file.opened_at());
    const std::string failure = file.session().failure_since(file.opened_at());
    if (!failure.empty()) texts.push_back(failure);
    for (const std::string& text : texts)
        notices.push_back({.code = "raster-warning", .text = "On opening the " + file.called() + ": " + text});
}

}  // namespace

double ElevationFormat::void_value() const {
    const std::optional<Range> range = range_of(stored);
    if (nodata) return *nodata;
    if (!range) return -9999.0;
    return range->least < 0 ? range->least : range->greatest;
}

ElevationFile open_elevation(const std::filesystem::path& path, const ElevationOptions& options) {
    RasterFile file({.path = path, .role = "elevation", .band = options.band, .resampling = "bilinear"});
    check_kind(file);
    Notices notices;
    ElevationFormat format{.stored = file.stored(), .nodata = file.nodata()};
    set_scale(file, format, notices);
    format.unit = vertical_unit(file, options, notices);
    check_nodata(file, format, notices);
    notice_sidecar(path, file, notices);
    notice_web_mercator(file, notices);
    notice_warnings(file, notices);
    ReferenceSystem system = file.system();
    return {.source = std::make_unique<ElevationSource>(std::move(file), format),
            .system = std::move(system),
            .format = format,
            .notices = std::move(notices)};
}

}  // namespace rillclock
