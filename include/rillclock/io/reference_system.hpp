#pragma once

#include <memory>
#include <optional>
#include <span>
#include <string>

#include "rillclock/core/notice.hpp"
#include "rillclock/io/length_unit.hpp"
#include "rillclock/raster/grid.hpp"

class OGRCoordinateTransformation;

namespace rillclock {

/// Size and shape of the earth a system is drawn on.
struct Ellipsoid {
    double semi_major_m = 6378137.0;
    double flattening = 1.0 / 298.257223563;
};

/// What the coordinates of a file mean. A value: what is asked of it is looked up once, when it is made.
///
/// Coordinates are always in the order x (easting, longitude), y (northing, latitude), whatever order the system
/// declares.
class ReferenceSystem {
public:
    /// From WKT of any dialect, "EPSG:26912" or a PROJ text. Throws Error (inputs) where it is none of these.
    [[nodiscard]] static ReferenceSystem from_text(const std::string& text);
    /// Longitude and latitude in degrees on WGS 84.
    [[nodiscard]] static ReferenceSystem wgs84();

    /// For messages: "NAD83 / UTM zone 12N (EPSG:26912)", or the bare name where the file gives no code.
    [[nodiscard]] const std::string& name() const { return name_; }
    /// The whole system, as WKT 2 (2019).
    [[nodiscard]] const std::string& wkt() const { return wkt_; }
    /// The same without heights.
    [[nodiscard]] const std::string& horizontal_wkt() const { return horizontal_wkt_; }
    [[nodiscard]] bool is_geographic() const { return is_geographic_; }
    [[nodiscard]] bool is_projected() const { return is_projected_; }
    /// Whether it is the spherical Mercator of web maps under any of its names. Its own lengths are too long by
    /// 1/cos(latitude); see `ground_of`.
    [[nodiscard]] bool is_web_mercator() const { return is_web_mercator_; }
    /// Unit of x and y of a projected system.
    [[nodiscard]] const LengthUnit& linear_unit() const { return linear_unit_; }
    /// Degrees in one unit of a geographic system: 1 in nearly all of them.
    [[nodiscard]] double degrees_per_unit() const { return degrees_per_unit_; }
    /// Unit of heights where the system is a compound one.
    [[nodiscard]] const std::optional<LengthUnit>& vertical_unit() const { return vertical_unit_; }
    [[nodiscard]] const Ellipsoid& ellipsoid() const { return ellipsoid_; }

private:
    ReferenceSystem() = default;
    std::string name_;
    std::string wkt_;
    std::string horizontal_wkt_;
    bool is_geographic_ = false;
    bool is_projected_ = false;
    bool is_web_mercator_ = false;
    LengthUnit linear_unit_;
    double degrees_per_unit_ = 1.0;
    std::optional<LengthUnit> vertical_unit_;
    Ellipsoid ellipsoid_;
};

/// Takes places from one system to another, heights left out. For one thread at a time.
class Transformation {
public:
    /// Throws Error (inputs) where PROJ knows no way between the two.
    Transformation(const ReferenceSystem& from, const ReferenceSystem& to);
    Transformation(Transformation&&) noexcept;
    Transformation& operator=(Transformation&&) noexcept;
    ~Transformation();

    /// To longitude and latitude in degrees on WGS 84.
    [[nodiscard]] static Transformation to_wgs84(const ReferenceSystem& from);

    /// None where the place has no image.
    [[nodiscard]] std::optional<Place> operator()(Place place);
    /// In place, both spans of one length; places without an image become NaN.
    void transform(std::span<double> x, std::span<double> y);

private:
    std::unique_ptr<OGRCoordinateTransformation> transformation_;
};

/// Whether two systems give every place of a grid the same coordinates, whatever they are called: no place of a lattice
/// of 9 × 9 over the grid (in coordinates of `a`) moves by more than a hundredth of a cell.
[[nodiscard]] bool same_coordinates(const ReferenceSystem& a, const ReferenceSystem& b, const Grid& grid);

}  // namespace rillclock
