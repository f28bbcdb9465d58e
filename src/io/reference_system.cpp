#include "rillclock/io/reference_system.hpp"

#include <cpl_conv.h>
#include <ogr_spatialref.h>

#include <array>
#include <cmath>
#include <limits>
#include <vector>

#include "quiet_gdal.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/io/gdal_session.hpp"

namespace rillclock {
namespace {

std::string wkt_of(const OGRSpatialReference& system) {
    static constexpr std::array<const char*, 2> options = {"FORMAT=WKT2_2019", nullptr};
    char* text = nullptr;
    system.exportToWkt(&text, options.data());
    std::string wkt = text ? text : "";
    CPLFree(text);
    return wkt;
}

std::string name_of(const OGRSpatialReference& system) {
    std::string name = system.GetName() ? system.GetName() : "unnamed";
    const char* geographic = system.GetAttrValue("GEOGCS");
    if (name == "unnamed" || name == "unknown")
        name = std::string("an unnamed system") + (geographic ? std::string(" on ") + geographic : "");
    const char* authority = system.GetAuthorityName(nullptr);
    const char* code = system.GetAuthorityCode(nullptr);
    if (authority && code) name += std::string(" (") + authority + ":" + code + ")";
    return name;
}

bool is_sphere_of_web_maps(const OGRSpatialReference& system) {
    return std::abs(system.GetSemiMajor() - 6378137.0) < 1e-3 && !(std::abs(system.GetInvFlattening()) > 0.0);
}

/// The names in use: EPSG's method "Popular Visualisation Pseudo Mercator", its WKT 1 twin, and Mercator on a sphere.
bool is_web_mercator(const OGRSpatialReference& system, const std::string& wkt) {
    if (!system.IsProjected()) return false;
    if (wkt.find("Popular Visualisation Pseudo") != std::string::npos) return true;
    if (wkt.find("Mercator_Auxiliary_Sphere") != std::string::npos) return true;
    const bool is_mercator = wkt.find("METHOD[\"Mercator") != std::string::npos;
    return is_mercator && (is_sphere_of_web_maps(system) || wkt.find("@null") != std::string::npos);
}

std::optional<LengthUnit> vertical_unit_of(const OGRSpatialReference& system) {
    if (!system.IsCompound()) return std::nullopt;
    const char* name = nullptr;
    const double metres = system.GetTargetLinearUnits("VERT_CS", &name);
    if (!(metres > 0)) return std::nullopt;
    return length_unit_of(metres, name ? name : "unit of heights");
}

std::string horizontal_wkt_of(const OGRSpatialReference& system) {
    OGRSpatialReference horizontal(system);
    if (horizontal.IsCompound()) horizontal.StripVertical();
    if (horizontal.GetAxesCount() == 3) horizontal.DemoteTo2D(nullptr);
    return wkt_of(horizontal);
}

OGRSpatialReference parsed(const std::string& text) {
    OGRSpatialReference system;
    const QuietGdal quiet;
    if (system.SetFromUserInput(text.c_str(), OGRSpatialReference::SET_FROM_USER_INPUT_LIMITATIONS) != OGRERR_NONE)
        throw input_error("\"" + text.substr(0, 80) +
                          "\" is no reference system that is known here; write one as \"EPSG:\" and its number, or as "
                          "WKT.");
    system.SetAxisMappingStrategy(OAMS_TRADITIONAL_GIS_ORDER);
    return system;
}

}  // namespace

ReferenceSystem ReferenceSystem::from_text(const std::string& text) {
    const GdalSession session;
    const OGRSpatialReference system = parsed(text);
    const char* unit_name = nullptr;
    ReferenceSystem result;
    result.name_ = name_of(system);
    result.wkt_ = wkt_of(system);
    result.horizontal_wkt_ = horizontal_wkt_of(system);
    result.is_geographic_ = system.IsGeographic() != 0;
    result.is_projected_ = system.IsProjected() != 0;
    result.is_web_mercator_ = rillclock::is_web_mercator(system, result.wkt_);
    const double metres = system.GetLinearUnits(&unit_name);
    result.linear_unit_ = length_unit_of(metres, unit_name ? unit_name : "unit");
    constexpr double radians_per_degree = 0.017453292519943295;
    const double degrees = system.GetAngularUnits() / radians_per_degree;
    result.degrees_per_unit_ = std::abs(degrees - 1.0) < 1e-9 ? 1.0 : degrees;
    result.vertical_unit_ = vertical_unit_of(system);
    const double inverse_flattening = system.GetInvFlattening();
    result.ellipsoid_ = {system.GetSemiMajor(), inverse_flattening > 0 ? 1.0 / inverse_flattening : 0.0};
    return result;
}

ReferenceSystem ReferenceSystem::wgs84() {
    return from_text("EPSG:4326");
}

Transformation::Transformation(const ReferenceSystem& from, const ReferenceSystem& to) {
    const GdalSession session;
    const OGRSpatialReference source = parsed(from.horizontal_wkt());
    const OGRSpatialReference target = parsed(to.horizontal_wkt());
    const QuietGdal quiet;
    transformation_.reset(OGRCreateCoordinateTransformation(&source, &target));
    if (!transformation_)
        throw input_error("No way is known to take coordinates from " + from.name() + " to " + to.name() +
                          "; give the file a system that both sides know (gdalwarp -t_srs for rasters, ogr2ogr -t_srs "
                          "for vectors).");
}

Transformation::Transformation(Transformation&&) noexcept = default;
Transformation& Transformation::operator=(Transformation&&) noexcept = default;
Transformation::~Transformation() = default;

Transformation Transformation::to_wgs84(const ReferenceSystem& from) {
    return {from, ReferenceSystem::wgs84()};
}

std::optional<Place> Transformation::operator()(Place place) {
    transform(std::span(&place.x, 1), std::span(&place.y, 1));
    if (!std::isfinite(place.x) || !std::isfinite(place.y)) return std::nullopt;
    return place;
}

void Transformation::transform(std::span<double> x, std::span<double> y) {
    const QuietGdal quiet;  // a place without an image is an answer here, not a failure of the run
    std::vector<int> worked(x.size(), 0);
    transformation_->Transform(static_cast<int>(x.size()), x.data(), y.data(), nullptr, worked.data());
    for (std::size_t i = 0; i < x.size(); ++i) {
        if (worked[i] != 0 && std::isfinite(x[i]) && std::isfinite(y[i])) continue;
        x[i] = std::numeric_limits<double>::quiet_NaN();
        y[i] = x[i];
    }
}

bool same_coordinates(const ReferenceSystem& a, const ReferenceSystem& b, const Grid& grid) {
    if (a.horizontal_wkt() == b.horizontal_wkt()) return true;
    if (a.is_geographic() != b.is_geographic()) return false;
    Transformation transformation(a, b);
    constexpr int steps = 8;
    for (int i = 0; i <= steps; ++i)
        for (int j = 0; j <= steps; ++j) {
            const Place before = {grid.left + grid.cell_width * static_cast<double>(grid.columns) * j / steps,
                                  grid.top - grid.cell_height * static_cast<double>(grid.rows) * i / steps};
            const std::optional<Place> after = transformation(before);
            if (!after) return false;
            if (!(std::abs(after->x - before.x) <= 0.01 * grid.cell_width)) return false;
            if (!(std::abs(after->y - before.y) <= 0.01 * grid.cell_height)) return false;
        }
    return true;
}

}  // namespace rillclock
