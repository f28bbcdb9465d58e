#pragma once

#include <cstdint>
#include <optional>
#include <span>
#include <unordered_map>
#include <vector>

#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/core/fixed_point.hpp"
#include "rillclock/core/quantity.hpp"
#include "rillclock/raster/blocks.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/raster/region_outlines.hpp"

namespace rillclock {

/// Whose times an isochrone band is of.
enum class IsochroneScope {
    subarea,     ///< a point's own subarea: times to that point
    catchment,   ///< the whole catchment of a last point, or of another that is asked for: times to it
};

/// What a subarea has of a band.
struct IsochronePart {
    PointNumber subarea = 0;   ///< the number of its point
    FixedArea area = 0;
};

/// The cells whose water takes between two times.
struct IsochroneBand {
    IsochroneScope scope = IsochroneScope::subarea;
    PointNumber point = 0;
    std::uint32_t number = 0;   ///< from 0: of times from number·step to below (number + 1)·step
    FixedArea area = 0;
    std::vector<IsochronePart> parts = {};   ///< by number; their areas add up to its own
};

/// How many bands there may be in all, by the number of points: ten thousand, beyond which a file of shapes is slow to open, or thirty for
/// each point where there are many.
[[nodiscard]] std::size_t most_isochrone_bands(std::size_t points);

/// A step between isochrones as it is told: in seconds where it is shorter than a minute, else in minutes.
[[nodiscard]] std::string isochrone_step_text(Duration step);

/// Which isochrones are made.
struct IsochroneRules {
    Duration step;
    std::vector<PointNumber> catchments = {};   ///< points whose whole catchment has bands, besides the last points
    bool smoothed = false;                      ///< whether borders have the corners of cells cut off (`RegionBorders::smooth_outline`)
    std::size_t most_pieces = 20'000'000;   ///< straight pieces of border: a gigabyte
};

/// What a strip of rows shows: of each cell the number of its nearest point on the way down, and the minutes to the last one.
struct RegionStrip {
    Window window;
    std::span<const std::uint32_t> owners;   ///< numbers beyond the points' are nothing, as 0 is
    std::span<const float> minutes;
};

/// The outlines of subareas, of whole catchments and of isochrone bands, gathered strip by strip from the top down.
class StudyRegions {
public:
    /// `minutes_to_last`: by number − 1, from each point's cell to the last point on the way down, under the storm that the strips' times are
    /// under. Without rules there are no bands.
    StudyRegions(const Grid& grid, const Ground& ground, const PointTree& tree, std::vector<double> minutes_to_last,
                 std::optional<IsochroneRules> isochrones);

    /// Takes the next strip. Throws an input error where the bands become too many.
    void look(const RegionStrip& strip);
    /// To be called once, after the last strip.
    void finish();

    /// Outline of a point's own subarea, in corners of cells.
    [[nodiscard]] std::vector<CornerPolygon> subarea(PointNumber number) const;
    /// With all that drains through the points above.
    [[nodiscard]] std::vector<CornerPolygon> catchment(PointNumber number) const;
    /// Subareas first; by point, then by time.
    [[nodiscard]] const std::vector<IsochroneBand>& bands() const { return bands_; }
    /// Outline of a band, smoothed where the rules say so; x counts columns and y rows, from the north-west corner of the grid.
    [[nodiscard]] std::vector<Polygon> outline(const IsochroneBand& band) const;
    [[nodiscard]] const std::optional<IsochroneRules>& isochrones() const { return isochrones_; }

private:
    /// The borders of one kind of bands and how large they are.
    struct Bands {
        RegionBorders borders;
        std::unordered_map<RegionLabel, FixedArea> areas;
        std::vector<RegionLabel> row;
    };

    /// Bands of whole catchments, none of which lies within another.
    struct CatchmentBands {
        std::vector<PointNumber> point;                        ///< by owner: whose catchment it is in; 0 none
        std::vector<double> minutes_below;                     ///< by owner: from that point to the last one
        Bands bands;
        std::vector<RegionLabel> row;                          ///< owner and band
        std::unordered_map<RegionLabel, FixedArea> parts = {}; ///< of bands, by owner and band
    };

    void number_tree();
    void begin_catchments();
    void label_row(std::span<const std::uint32_t> owners, std::span<const float> minutes);
    void add_row(Bands& bands, std::int64_t row) const;
    void check_bounds() const;
    static void add_areas(const std::vector<RegionLabel>& row, FixedArea cell_area, std::unordered_map<RegionLabel, FixedArea>& areas);
    void list_bands(const Bands& bands, IsochroneScope scope);
    void list_parts(const CatchmentBands& catchments);
    [[nodiscard]] const RegionBorders& borders_of(const IsochroneBand& band) const;

    const Grid& grid_;
    const Ground& ground_;
    const PointTree& tree_;
    std::vector<double> minutes_to_last_;
    std::optional<IsochroneRules> isochrones_;
    std::vector<RegionLabel> place_;          ///< by number: where it comes when every point follows all that drain to it; from 1
    std::vector<RegionLabel> first_place_;    ///< by number: of the first that drains to it
    RegionBorders owners_;
    std::vector<RegionLabel> owner_row_;
    Bands subareas_;
    std::vector<CatchmentBands> catchments_;   ///< first those of the last points, then those within them, and so on
    std::vector<IsochroneBand> bands_;
};

}  // namespace rillclock
