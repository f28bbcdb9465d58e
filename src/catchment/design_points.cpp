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

/// Beyond this ratio, either way, a surveyed area is told to differ from that of the elevations.
constexpr double told_survey_ratio = 1.1;

std::string in_words(Place place) { return fixed_decimals(place.x, 3) + ", " + fixed_decimals(place.y, 3); }

std::string in_ha(FixedArea area) { return significant(from_fixed_area(area) / 1e4, 4) + " ha"; }

/// Ground distance from a place to a cell's centre, with the lengths of the cell's row.
double distance_m(const Grid& grid, const Ground& ground, Place place, RowColumn at) {
    const Place centre = grid.centre(at);
    const double columns = (place.x - centre.x) / grid.cell_width;
    const double rows = (place.y - centre.y) / grid.cell_height;
    return std::hypot(columns * from_fixed(ground.length(at.row, Direction::east)),
                      rows * from_fixed(ground.length(at.row, Direction::south)));
}

/// How many rows and columns around a cell can hold centres within a distance.
RowColumn reach_of(const Ground& ground, std::int64_t row, double within_m) {
    const auto cells = [&](Direction d) {
        return static_cast<std::int64_t>(std::ceil(within_m / from_fixed(ground.length(row, d)))) + 1;
    };
    return {cells(Direction::south), cells(Direction::east)};
}

struct Landing {
    Cell cell;
    FixedArea area;
    double moved_m;
};

/// Whether a point had rather land on `a` than on `b`, which has the smaller index.
bool is_better(const Landing& a, const Landing& b, const std::optional<FixedArea>& surveyed) {
    if (!surveyed) return std::tuple(-a.area, a.moved_m) < std::tuple(-b.area, b.moved_m);
    const auto misfit = [&](const Landing& landing) {
        return std::abs(std::log(static_cast<double>(landing.area) / static_cast<double>(*surveyed)));
    };
    return std::tuple(misfit(a), a.moved_m) < std::tuple(misfit(b), b.moved_m);
}

/// None where neither the point's own cell nor one within reach has data.
std::optional<Landing> landing_of(const PointGround& on, const StatedPoint& stated, Length move_within) {
    std::optional<Landing> best;
    for (const Cell cell : cells_near(stated.place, on.grid, on.ground, move_within)) {
        const auto area = on.area(cell);
        if (!area) continue;
        const Landing landing{cell, *area, distance_m(on.grid, on.ground, stated.place, on.grid.row_column(cell))};
        if (!best || is_better(landing, *best, stated.surveyed)) best = landing;
    }
    return best;
}

class Placing {
public:
    Placing(const PointGround& on, Length move_within) : on_(on), move_within_(move_within) {}

    void place(const StatedPoint& stated) {
        if (!on_.grid.at(stated.place)) return leave_out(stated, "point-off-data", "lies off the elevation data");
        const auto landing = landing_of(on_, stated, move_within_);
        const Cell own = on_.grid.cell(*on_.grid.at(stated.place));
        if (!landing) return leave_out(stated, "point-on-void", "lies on ground without elevation data");
        const auto [taken, is_new] = taken_.try_emplace(landing->cell, stated.name);
        if (!is_new) {
            return leave_out(stated, "point-on-taken-cell", "lands on the same cell as the point '" + taken->second + "'");
        }
        result_.points.push_back({.name = stated.name, .cell = landing->cell, .stated = stated.place,
                                  .moved = metres(landing->moved_m), .surveyed = stated.surveyed});
        if (landing->cell != own) tell_move(stated, own, *landing);
        if (stated.surveyed) tell_misfit(stated, *landing);
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
                                           significant(landing.moved_m, 3) + " m to the cell " +
                                           (stated.surveyed ? "whose area is nearest to the surveyed one" : "of largest contributing area") +
                                           " within " + significant(in_metres(move_within_), 3) + " m",
                                   .point = stated.name, .value = landing.moved_m, .threshold = in_metres(move_within_),
                                   .place = stated.place});
        const auto before = on_.area(own);
        if (stated.surveyed || !before || landing.area < 10 * *before) return;
        result_.notices.push_back({.code = "point-moved-to-larger-stream",
                                   .text = "moving the point '" + stated.name + "' changed its area from " + in_ha(*before) +
                                           " to " + in_ha(landing.area) + "; check that it is meant to lie on the larger stream, " +
                                           "or lower move_within",
                                   .point = stated.name,
                                   .value = static_cast<double>(landing.area) / static_cast<double>(*before), .threshold = 10.0,
                                   .place = stated.place});
    }

    void tell_misfit(const StatedPoint& stated, const Landing& landing) {
        const double ratio = static_cast<double>(landing.area) / static_cast<double>(*stated.surveyed);
        if (std::abs(std::log(ratio)) <= std::log(told_survey_ratio)) return;
        result_.notices.push_back({.code = "surveyed-area-differs",
                                   .text = "the area surveyed at the point '" + stated.name + "' is " + in_ha(*stated.surveyed) +
                                           ", and the nearest to it within " + significant(in_metres(move_within_), 3) + " m is " +
                                           in_ha(landing.area) + ", " + significant(ratio, 3) + " times as much; look where survey and " +
                                           "elevations disagree, at the point's place, or raise move_within",
                                   .point = stated.name, .value = ratio, .threshold = ratio > 1 ? told_survey_ratio : 1 / told_survey_ratio,
                                   .place = stated.place});
    }

    const PointGround& on_;
    Length move_within_;
    std::unordered_map<Cell, std::string> taken_;
    PlacedPoints result_;
};

}  // namespace

std::vector<Cell> cells_near(Place stated, const Grid& grid, const Ground& ground, Length move_within) {
    std::vector<Cell> cells;
    const auto own = grid.at(stated);
    if (!own) return cells;
    const RowColumn reach = reach_of(ground, own->row, in_metres(move_within));
    for (std::int64_t row = own->row - reach.row; row <= own->row + reach.row; ++row) {
        for (std::int64_t column = own->column - reach.column; column <= own->column + reach.column; ++column) {
            if (!grid.contains({row, column})) continue;
            const bool within = distance_m(grid, ground, stated, {row, column}) <= in_metres(move_within);
            if (within || RowColumn{row, column} == *own) cells.push_back(grid.cell({row, column}));
        }
    }
    return cells;
}

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

PlacedPoints find_points(std::vector<RootArea> ways_out, const Grid& grid, double least_share) {
    FixedArea whole = 0;
    for (const RootArea& way : ways_out) whole += way.area;
    std::sort(ways_out.begin(), ways_out.end(), [](const RootArea& a, const RootArea& b) {
        return std::tuple(-a.area, a.cell) < std::tuple(-b.area, b.cell);
    });
    PlacedPoints found;
    for (const RootArea& way : ways_out) {
        const bool large = static_cast<double>(way.area) >= least_share * static_cast<double>(whole);
        if (!large && !found.points.empty()) break;
        found.points.push_back({.name = "outlet " + std::to_string(found.points.size() + 1), .cell = way.cell,
                                .stated = grid.centre(way.cell), .moved = metres(0), .found = true});
    }
    return found;
}

}  // namespace rillclock
