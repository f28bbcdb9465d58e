#include "rillclock/catchment/segments.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/open_water.hpp"
#include "segment_cuts.hpp"

namespace rillclock {
namespace {

/// R^-⅔.
double inverse_conveyance(double radius_m) { return 1.0 / std::cbrt(radius_m * radius_m); }

/// The sums over the unponded pieces of one segment from which its equivalent slope and radius are made.
struct Sums {
    double by_slope = 0.0;             ///< Σ d·S^-½, or Σ d·S^-b by a chart
    FixedTime sheet = 0;               ///< storm part of the time
    double by_radius = 0.0;            ///< Σ d·R^-⅔
    double by_radius_and_slope = 0.0;  ///< Σ d·R^-⅔·S^-½
    std::size_t pieces = 0;
};

/// S^-b; the root is kept apart for its bits.
double inverse_power(double slope, double exponent) {
    return exponent == 0.5 ? 1.0 / std::sqrt(slope) : std::pow(slope, -exponent);
}

void count_unponded(const StepPart& part, Sums& sums, Segment& segment) {
    const bool first = sums.pieces++ == 0;
    segment.length_m += part.length_m;
    segment.slope_least = first ? part.slope : std::min(segment.slope_least, part.slope);
    segment.slope_greatest = std::max(segment.slope_greatest, part.slope);
    if (first) segment.index_from_m = part.index_from_m;
    segment.index_to_m = part.index_to_m;
    sums.by_slope += part.length_m * inverse_power(part.slope, segment.shallow_exponent);
    sums.sheet += part.time.storm;
    if (part.regime != Regime::channel) return;
    if (first) segment.radius_from_m = part.radius_m;
    segment.radius_to_m = part.radius_m;
    sums.by_radius += part.length_m * inverse_conveyance(part.radius_m);
    sums.by_radius_and_slope += part.length_m * inverse_conveyance(part.radius_m) / std::sqrt(part.slope);
}

void count(const PathPiece& piece, Sums& sums, Segment& segment) {
    segment.time += piece.part.time;
    if (!piece.part.ponded) return count_unponded(piece.part, sums, segment);
    segment.pond_length_m += piece.part.length_m;
    segment.pond_time += piece.part.time;
}

double square(double x) { return x * x; }

double sheet_slope(const Sums& sums, const SurfaceHydraulics& surface, const SheetRules& sheet, const Segment& segment) {
    switch (sheet.basis) {
        case SheetBasis::index:
            return square(surface.sheet_n * segment.length_m / (segment.index_to_m - segment.index_from_m));
        case SheetBasis::characteristic:
            return sheet.formula.characteristic_slope(surface.sheet_n, metres(segment.index_from_m), metres(segment.index_to_m),
                                                      seconds(from_fixed(sums.sheet) / surface.sheet_factor));
    }
    return 0.0;
}

double shallow_slope(const Sums& sums, const Segment& segment) {
    const double power = segment.length_m / sums.by_slope;
    return segment.shallow_exponent == 0.5 ? square(power) : std::pow(power, 1.0 / segment.shallow_exponent);
}

void set_equivalents(const Sums& sums, const SurfaceHydraulics& surface, const SheetRules& sheet, Segment& segment) {
    if (!(segment.length_m > 0)) return;
    switch (segment.regime) {
        case Regime::sheet: segment.slope_equivalent = sheet_slope(sums, surface, sheet, segment); break;
        case Regime::shallow: segment.slope_equivalent = shallow_slope(sums, segment); break;
        case Regime::channel:
            segment.slope_equivalent = square(sums.by_radius / sums.by_radius_and_slope);
            segment.radius_equivalent_m = std::pow(segment.length_m / sums.by_radius, 1.5);
            break;
        case Regime::water:
        case Regime::none: break;
    }
    // Sheet index and slopes are rounded on their own; the equivalent slope must not leave the slopes it stands for.
    if (segment.slope_equivalent > 0) {
        segment.slope_equivalent = std::clamp(segment.slope_equivalent, segment.slope_least, segment.slope_greatest);
    }
}

class Cutting {
public:
    Cutting(const PathGround& ground, std::span<const PathCell> path, std::span<const PathPiece> pieces)
        : ground_(ground), rules_(ground.rules), path_(path), pieces_(pieces) {}

    [[nodiscard]] std::vector<Segment> segments(const SegmentRules& by) const {
        const double length = from_fixed(path_.front().flow_distance - path_.back().flow_distance);
        std::vector<std::size_t> starts = segment_starts(pieces_, ground_.classes, std::max(in_metres(by.shortest), by.shortest_share * length));
        starts.push_back(pieces_.size());
        std::vector<Segment> segments;
        for (std::size_t i = 0; i + 1 < starts.size(); ++i) segments.push_back(segment(starts[i], starts[i + 1]));
        return segments;
    }

private:
    [[nodiscard]] Segment segment(std::size_t first, std::size_t end) const {
        Segment made;
        made.regime = pieces_[first].part.regime;
        if (made.regime != Regime::channel) made.surface = pieces_[first].surface;
        if (made.regime == Regime::channel) set_reach(pieces_[first], pieces_[end - 1], made);
        made.from = {pieces_[first].position, pieces_[first].share_from};
        made.to = {pieces_[end - 1].position, pieces_[end - 1].share_to};
        made.area_from = pieces_[first].area;
        made.area_to = pieces_[end - 1].area;
        made.fall_m = fall_m(pieces_[first], pieces_[end - 1]);
        set_shallow_law(first, end, made);
        Sums sums;
        for (std::size_t i = first; i < end; ++i) count(pieces_[i], sums, made);
        set_equivalents(sums, surface(made), rules_.sheet, made);
        made.end_to_end_s = end_to_end_seconds(made);
        return made;
    }

    /// Between two points of a chart one power of the slope times all that is not ponded.
    void set_shallow_law(std::size_t first, std::size_t end, Segment& made) const {
        if (made.regime != Regime::shallow) return;
        made.shallow_k_m_per_s = in_metres_per_second(surface(made).shallow_k);
        const auto& line = surface(made).shallow_line;
        if (!line) return;
        while (first + 1 < end && pieces_[first].part.ponded) ++first;
        const VelocityLaw law = line->law_at(pieces_[first].part.slope);
        made.shallow_k_m_per_s = in_metres_per_second(law.at_slope_1);
        made.shallow_exponent = law.exponent;
    }

    void set_reach(const PathPiece& first, const PathPiece& last, Segment& made) const {
        made.channel_n = first.reach ? first.reach->n : rules_.channel.n;
        made.reach_from = first.reach;
        made.reach_to = last.reach;
    }

    [[nodiscard]] const SurfaceHydraulics& surface(const Segment& made) const {
        return ground_.classes[made.surface.value_or(0)];
    }

    /// Of spill elevation, from the beginning of one piece to the end of another. Made of differences alone, so that a constant
    /// added to the elevations changes no bit of it.
    [[nodiscard]] double fall_m(const PathPiece& from, const PathPiece& to) const {
        const double between_cells = path_[from.position].spill - path_[to.position].spill;
        const double fall = between_cells - from.share_from * step_fall(from.position) + to.share_to * step_fall(to.position);
        return fall * ground_.metres_per_elevation_unit;
    }

    [[nodiscard]] double step_fall(std::size_t position) const {
        return path_[position].spill - path_[position + 1].spill;
    }

    [[nodiscard]] double end_to_end_seconds(const Segment& made) const {
        const bool overland = made.regime == Regime::sheet || made.regime == Regime::shallow;
        const double floor = std::max(overland ? rules_.slope.overland_floor : rules_.slope.channel_floor, least_slope);
        const double slope = std::max(made.end_to_end_slope(), floor);
        const double length = made.whole_length_m();
        switch (made.regime) {
            case Regime::sheet: return ground_.storm_factor * unit_sheet_seconds(made, length, slope);
            case Regime::shallow: return length / in_metres_per_second(shallow_speed(surface(made), slope));
            case Regime::channel: return channel_seconds(made, length, slope);
            case Regime::water: return length / in_metres_per_second(wave_celerity(*surface(made).water_depth));
            case Regime::none: break;
        }
        return 0.0;
    }

    [[nodiscard]] double unit_sheet_seconds(const Segment& made, double length, double slope) const {
        const Length from = metres(made.index_from_m);
        const SheetStretch stretch{.n = surface(made).sheet_n, .length = metres(length), .slope = slope};
        switch (rules_.sheet.basis) {
            case SheetBasis::index: return in_seconds(rules_.sheet.formula.at_unit_storm(from, from + sheet_index(stretch)));
            case SheetBasis::characteristic:
                return surface(made).sheet_factor * in_seconds(rules_.sheet.formula.along_characteristic(stretch, from));
        }
        return 0.0;
    }

    [[nodiscard]] double channel_seconds(const Segment& made, double length, double slope) const {
        const Length at_end = channel_radius({.area = made.area_to, .reach = made.reach_to}, rules_.channel);
        const Length radius = made.radius_equivalent_m > 0 ? metres(made.radius_equivalent_m) : at_end;
        const ManningReach reach{.n = made.channel_n, .hydraulic_radius = radius, .slope = slope};
        return in_seconds(manning_time(metres(length), reach));
    }

    const PathGround& ground_;
    const TravelRules& rules_;
    std::span<const PathCell> path_;
    std::span<const PathPiece> pieces_;
};

}  // namespace

std::vector<Segment> segments_of(const PathGround& ground, std::span<const PathCell> path, std::span<const PathPiece> pieces,
                                 const SegmentRules& segment_rules) {
    return Cutting(ground, path, pieces).segments(segment_rules);
}

}  // namespace rillclock
