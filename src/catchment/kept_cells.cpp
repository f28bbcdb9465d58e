#include "kept_cells.hpp"

#include <algorithm>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

/// Gathers the cells above a place from which water has come less far than a limit.
class SheetZone {
public:
    SheetZone(const TiledTravel& travel, FixedLength limit, std::unordered_set<Cell>& found)
        : codes_(travel.ground().forest.codes()), ground_(travel.ground().ground), limit_(limit), found_(found) {}

    /// Adds a path cell, with all that drains to it, where the divide is nearer than the limit on every way.
    bool add(Cell cell) {
        gathered_.clear();
        pending_.assign(1, {cell, 0});
        while (!pending_.empty()) {
            const Above at = pending_.back();
            pending_.pop_back();
            if (at.distance >= limit_) return false;
            gathered_.push_back(at.cell);
            push_upstream(at);
        }
        found_.insert(gathered_.begin(), gathered_.end());
        return true;
    }

private:
    struct Above {
        Cell cell;
        FixedLength distance;   ///< from there to the path cell
    };

    void push_upstream(const Above& at) {
        const RowColumn here{at.cell / codes_.columns(), at.cell % codes_.columns()};
        for (const Direction d : all_directions) {
            const RowColumn beside = neighbour(here, d);
            if (beside.row < 0 || beside.row >= codes_.rows() || beside.column < 0 || beside.column >= codes_.columns()) continue;
            const auto up = static_cast<Cell>(beside.row * codes_.columns() + beside.column);
            if (codes_[up] == flow_code(opposite(d))) pending_.push_back({up, at.distance + ground_.length(beside.row, opposite(d))});
        }
    }

    const Raster<FlowCode>& codes_;
    const Ground& ground_;
    FixedLength limit_;
    std::unordered_set<Cell>& found_;
    std::vector<Above> pending_;
    std::vector<Cell> gathered_;
};

/// A limit in fixed point, rounded so that no cell within it is missed; what is longer than any way there is stays in range.
FixedLength just_beyond(Length limit) { return to_fixed(std::min(in_metres(limit), 1e12)) + 1; }

class PathWalk {
public:
    PathWalk(const TiledTravel& travel, std::span<const DesignPoint> points) : codes_(travel.ground().forest.codes()) {
        for (std::size_t i = 0; i < points.size(); ++i) point_at_.emplace(points[i].cell, static_cast<PointNumber>(i + 1));
    }

    /// The cells from a head down to where a path ran already, or to the last point.
    std::vector<Cell> walk(Cell head, KeptCells& kept) {
        std::vector<Cell> fresh;
        std::size_t to_last_point = 0;
        PointNumber owner = 0;
        bool joins = false;
        Cell at = head;
        for (;; at = neighbour(at, static_cast<Direction>(codes_[at]), codes_.columns())) {
            const auto known = owner_of_.find(at);
            if (known != owner_of_.end()) {
                kept.starts.insert(at);
                to_last_point = fresh.size();
                if (owner == 0) owner = known->second;
                joins = true;
                break;
            }
            fresh.push_back(at);
            const auto point = point_at_.find(at);
            if (point != point_at_.end()) {
                if (owner == 0) owner = point->second;
                to_last_point = fresh.size();
                kept.starts.insert(at);
            }
            if (!is_direction(codes_[at])) break;
        }
        if (owner == 0) throw bug("a head was kept that drains to no point");
        fresh.resize(to_last_point);
        settle(fresh, joins, kept);
        kept.starts.insert(head);
        kept.owners.push_back(owner);
        return fresh;
    }

private:
    /// Says which point each fresh cell drains to first. `joins`: another path goes on below them.
    void settle(const std::vector<Cell>& fresh, bool joins, KeptCells& kept) {
        PointNumber owner = 0;
        if (joins && !fresh.empty()) {
            owner = owner_of_.at(neighbour(fresh.back(), static_cast<Direction>(codes_[fresh.back()]), codes_.columns()));
        }
        if (!joins && !fresh.empty()) kept.ends.insert(fresh.back());
        for (std::size_t i = fresh.size(); i-- > 0;) {
            const auto point = point_at_.find(fresh[i]);
            if (point != point_at_.end()) owner = point->second;
            owner_of_.emplace(fresh[i], owner);
        }
        kept.path.insert(kept.path.end(), fresh.begin(), fresh.end());
    }

    const Raster<FlowCode>& codes_;
    std::unordered_map<Cell, PointNumber> point_at_;
    std::unordered_map<Cell, PointNumber> owner_of_;
};

}  // namespace

KeptCells kept_cells(const TiledTravel& travel, std::span<const Cell> heads, std::span<const DesignPoint> points,
                     Length greatest_sheet_limit) {
    KeptCells kept;
    PathWalk walk(travel, points);
    SheetZone zone(travel, just_beyond(greatest_sheet_limit), kept.sheet);
    for (const Cell head : heads) {
        for (const Cell cell : walk.walk(head, kept)) {
            if (!zone.add(cell)) break;
        }
    }
    return kept;
}

}  // namespace rillclock
