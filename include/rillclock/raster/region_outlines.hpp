#pragma once

#include <cstddef>
#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/raster/grid_shapes.hpp"

namespace rillclock {

/// A corner of cells: on which column line and row line, both counted from the north-west corner of the grid.
struct Corner {
    std::uint32_t column = 0;
    std::uint32_t row = 0;
    bool operator==(const Corner&) const = default;
};

/// Corners of a closed line, the first not repeated. Seen on a map, what is enclosed lies on the left: outer rings run
/// counter-clockwise, holes clockwise.
using CornerRing = std::vector<Corner>;

/// A piece of a region: the outer ring, then its holes. Cells that meet in a corner alone are two pieces.
struct CornerPolygon {
    std::vector<CornerRing> rings;
};

/// The same with x counting columns and y rows.
[[nodiscard]] std::vector<Polygon> in_cells(const std::vector<CornerPolygon>& polygons);

/// What cells belong to; `no_region` for those that belong to nothing.
using RegionLabel = std::uint64_t;
inline constexpr RegionLabel no_region = 0;

/// Finds the outlines of the regions of a grid whose rows come from the top down.
///
/// The polygons of all regions cover exactly the labelled cells, once each: no gaps, no overlaps. No ring meets itself; a hole may touch
/// its outer ring in single corners (valid in the sense of OGC Simple Features). Neighbours have the corner in common where a third one
/// joins them. Memory: the straight pieces of all borders, not the cells. Cost: linear in the cells, n log n in the pieces.
class RegionBorders {
public:
    explicit RegionBorders(std::int64_t columns);

    /// Labels of the next row.
    void add_row(std::span<const RegionLabel> labels);
    /// To be called once, after the last row.
    void finish();
    /// Straight pieces of border so far: what memory hangs on.
    [[nodiscard]] std::size_t pieces() const { return edges_.size(); }

    /// The labels that are there, ascending. After `finish`, as all below.
    [[nodiscard]] std::vector<RegionLabel> labels() const;
    /// The outline of one region: its pieces from the north down, and of equal ones from the west.
    [[nodiscard]] std::vector<CornerPolygon> outline(RegionLabel label) const { return outline(label, label); }
    /// The outline of all regions with labels from `first` to `last` taken together.
    [[nodiscard]] std::vector<CornerPolygon> outline(RegionLabel first, RegionLabel last) const;

    /// The outline of one region with its corners cut off, from the middle of one side of a cell to the middle of the next; x counts columns
    /// and y rows, both from the north-west corner of the grid. Corners in which more than two borders meet stay, so that neighbours still
    /// have all of their common border in common: smoothed polygons cover what the labelled cells cover but for corners at the
    /// outside, without gaps or overlaps. No border moves by half a cell (by 0.36 of a square one), and each cut corner moves an
    /// eighth of a cell from one side of the border to the other: a polygon's area changes by no more than an eighth of a cell times its corners.
    [[nodiscard]] std::vector<Polygon> smooth_outline(RegionLabel label) const;

private:
    struct Edge {
        RegionLabel inside = no_region;   ///< on the left
        RegionLabel outside = no_region;  ///< on the right
        Corner from;
        Corner to;
    };
    class Tracer;

    void add_horizontal(std::span<const RegionLabel> labels);
    void add_vertical(std::span<const RegionLabel> labels);
    [[nodiscard]] Line smooth_ring(const CornerRing& ring) const;
    void sort_by_label();
    void add_edge(RegionLabel left, RegionLabel right, Corner from, Corner to);

    std::uint32_t row_ = 0;
    std::vector<RegionLabel> above_;          ///< the row before
    std::vector<std::uint32_t> began_at_;     ///< by column line: the row at which its present pair of neighbours began
    std::vector<Edge> edges_;                 ///< in the end by the label inside
    std::vector<std::uint64_t> meetings_;     ///< corners in which more than two borders meet, by row and column
};

}  // namespace rillclock
