#include "rillclock/catchment/design_points.hpp"

#include <algorithm>
#include <cmath>
#include <optional>
#include <tuple>
#include <unordered_map>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

std::string in_words(Place place) { return fixed_decimals(place.x, 3) + ", " + fixed_decimals(place.y, 3); }

std::string in_ha(FixedArea area) { return significant(from_fixed_area(area) / 1e4, 4) + " ha"; }

/// Ground distance from a place to a cell's centre, with the lengths of the cell's row.
double distance_m(const PointGround& on, Place place, RowColumn at) {
    const Place centre = on.grid.centre(at);
    const double columns = (place.x - centre.x) / on.grid.cell_width;
    const double rows = (place.y - centre.y) / on.grid.cell_height;
    return std::hypot(columns * from_fixed(on.ground.length(at.row, Direction::east)),
                      rows * from_fixed(on.ground.length(at.row, Direction::south)));
}

/// How many rows and columns around a cell can hold centres within a distance.
RowColumn reach_of(const PointGround& on, std::int64_t row, double within_m) {
    const auto cells = [&](Direction d) {
        return static_cast<std::int64_t>(std::ceil(within_m / from_fixed(on.ground.length(row, d)))) + 1;
    };
    return {cells(Direction::south), cells(Direction::east)};
}

struct Landing {
    Cell cell;
    double moved_m;
};

/// None where neither the point's own cell nor one within reach has data.
std::optional<Landing> landing_of(const PointGround& on, Place place, double within_m) {
    const RowColumn own = on.grid.at(place).value();
    const RowColumn reach = reach_of(on, own.row, within_m);
    std::optional<Landing> best;
    for (std::int64_t row = own.row - reach.row; row <= own.row + reach.row; ++row) {
        for (std::int64_t column = own.column - reach.column; column <= own.column + reach.column; ++column) {
            if (!on.grid.contains({row, column})) continue;
            const Cell cell = on.grid.cell({row, column});
            const double distance = distance_m(on, place, {row, column});
            const bool within = distance <= within_m || RowColumn{row, column} == own;
            if (!within || on.forest.is_void(cell)) continue;
            const FixedArea area = on.contributing_area[cell];
            if (best && std::tuple(-area, distance) >= std::tuple(-on.contributing_area[best->cell], best->moved_m)) continue;
            best = Landing{cell, distance};
        }
    }
    return best;
}

class Placing {
public:
    Placing(const PointGround& on, Length move_within) : on_(on), within_m_(in_metres(move_within)) {}

    void place(const StatedPoint& stated) {
        if (!on_.grid.at(stated.place)) return leave_out(stated, "point-off-data", "lies off the elevation data");
        const auto landing = landing_of(on_, stated.place, within_m_);
        const Cell own = on_.grid.cell(*on_.grid.at(stated.place));
        if (!landing) return leave_out(stated, "point-on-void", "lies on ground without elevation data");
        const auto [taken, is_new] = taken_.try_emplace(landing->cell, stated.name);
        if (!is_new) {
            return leave_out(stated, "point-on-taken-cell", "lands on the same cell as the point '" + taken->second + "'");
        }
        result_.points.push_back({.name = stated.name, .cell = landing->cell, .stated = stated.place,
                                  .moved = metres(landing->moved_m)});
        if (landing->cell != own) tell_move(stated, own, *landing);
    }

    [[nodiscard]] PlacedPoints result() { return std::move(result_); }

private:
    void leave_out(const StatedPoint& stated, const char* code, const std::string& what) {
        result_.notices.push_back({.code = code, .text = "the point '" + stated.name + "' at " + in_words(stated.place) +
                                                         " " + what + " and is left out; move it, or remove it from the file",
                                   .point = stated.name, .place = stated.place});
    }

    void tell_move(const StatedPoint& stated, Cell own, const Landing& landing) {
        result_.notices.push_back({.code = "point-moved",
                                   .text = "the point '" + stated.name + "' was moved " +
                                           significant(landing.moved_m, 3) + " m to the cell of largest contributing area " +
                                           "within " + significant(within_m_, 3) + " m",
                                   .point = stated.name, .value = landing.moved_m, .threshold = within_m_,
                                   .place = stated.place});
        if (on_.forest.is_void(own)) return;
        const FixedArea before = on_.contributing_area[own];
        const FixedArea after = on_.contributing_area[landing.cell];
        if (after < 10 * before) return;
        result_.notices.push_back({.code = "point-moved-to-larger-stream",
                                   .text = "moving the point '" + stated.name + "' changed its area from " + in_ha(before) +
                                           " to " + in_ha(after) + "; check that it is meant to lie on the larger stream, " +
                                           "or lower move_within",
                                   .point = stated.name,
                                   .value = static_cast<double>(after) / static_cast<double>(before), .threshold = 10.0,
                                   .place = stated.place});
    }

    const PointGround& on_;
    double within_m_;
    std::unordered_map<Cell, std::string> taken_;
    PlacedPoints result_;
};

}  // namespace

PlacedPoints place_points(std::span<const StatedPoint> stated, const PointGround& on, Length move_within) {
    Placing placing(on, move_within);
    for (const StatedPoint& point : stated) placing.place(point);
    PlacedPoints placed = placing.result();
    if (placed.points.empty()) {
        const std::string first = placed.notices.empty() ? "the file holds none" : placed.notices.front().text;
        throw input_error("no design point lies on the data: " + first);
    }
    return placed;
}

PlacedPoints find_points(const PointGround& on, double least_share) {
    std::vector<Cell> roots;
    FixedArea whole = 0;
    for (const Cell cell : on.forest.order()) {
        if (!on.forest.is_root(cell)) continue;
        roots.push_back(cell);
        whole += on.contributing_area[cell];
    }
    std::sort(roots.begin(), roots.end(), [&](Cell a, Cell b) {
        return std::tuple(-on.contributing_area[a], a) < std::tuple(-on.contributing_area[b], b);
    });
    PlacedPoints found;
    for (const Cell root : roots) {
        const bool large = static_cast<double>(on.contributing_area[root]) >= least_share * static_cast<double>(whole);
        if (!large && !found.points.empty()) break;
        found.points.push_back({.name = "outlet " + std::to_string(found.points.size() + 1), .cell = root,
                                .stated = on.grid.centre(root), .moved = metres(0), .found = true});
    }
    return found;
}

}  // namespace rillclock
