#include "rillclock/catchment/segments.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/open_water.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"
#include "segment_cuts.hpp"

namespace rillclock {
namespace {

/// R^-⅔.
double inverse_conveyance(double radius_m) { return 1.0 / std::cbrt(radius_m * radius_m); }

/// The sums over the unponded pieces of one segment from which its equivalent slope and radius are made.
struct Sums {
    double by_slope = 0.0;             ///< Σ d·S^-½
    double by_radius = 0.0;            ///< Σ d·R^-⅔
    double by_radius_and_slope = 0.0;  ///< Σ d·R^-⅔·S^-½
    std::size_t pieces = 0;
};

void count_unponded(const StepPart& part, Sums& sums, Segment& segment) {
    const bool first = sums.pieces++ == 0;
    segment.length_m += part.length_m;
    segment.slope_least = first ? part.slope : std::min(segment.slope_least, part.slope);
    segment.slope_greatest = std::max(segment.slope_greatest, part.slope);
    if (first) segment.index_from_m = part.index_from_m;
    segment.index_to_m = part.index_to_m;
    sums.by_slope += part.length_m / std::sqrt(part.slope);
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

void set_equivalents(const Sums& sums, double sheet_n, Segment& segment) {
    if (!(segment.length_m > 0)) return;
    switch (segment.regime) {
        case Regime::sheet:
            segment.slope_equivalent = square(sheet_n * segment.length_m / (segment.index_to_m - segment.index_from_m));
            break;
        case Regime::shallow: segment.slope_equivalent = square(segment.length_m / sums.by_slope); break;
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
    Cutting(const PathGround& ground, std::span<const PathCell> path)
        : ground_(ground), rules_(ground.rules), path_(path), pieces_(path_pieces(ground, path)) {}

    [[nodiscard]] std::vector<Segment> segments(const SegmentRules& by) const {
        const double length = from_fixed(path_.front().flow_distance - path_.back().flow_distance);
        std::vector<std::size_t> starts = segment_starts(pieces_, std::max(in_metres(by.shortest), by.shortest_share * length));
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
        made.first_piece = first;
        made.last_piece = end - 1;
        made.area_from = pieces_[first].area;
        made.area_to = pieces_[end - 1].area;
        made.fall_m = fall_m(pieces_[first], pieces_[end - 1]);
        Sums sums;
        for (std::size_t i = first; i < end; ++i) count(pieces_[i], sums, made);
        set_equivalents(sums, surface(made).sheet_n, made);
        made.end_to_end_s = end_to_end_seconds(made);
        return made;
    }

    [[nodiscard]] const SurfaceHydraulics& surface(const Segment& made) const {
        return ground_.classes[pieces_[made.first_piece].surface];
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
            case Regime::sheet: {
                const double index_to = made.index_from_m + surface(made).sheet_n * length / std::sqrt(slope);
                return ground_.storm_factor *
                       in_seconds(rules_.sheet.formula.at_unit_storm(metres(made.index_from_m), metres(index_to)));
            }
            case Regime::shallow:
                return length / in_metres_per_second(shallow_velocity(surface(made).shallow_k, slope));
            case Regime::channel: return channel_seconds(made, length, slope);
            case Regime::water: return length / in_metres_per_second(wave_celerity(*surface(made).water_depth));
            case Regime::none: break;
        }
        return 0.0;
    }

    [[nodiscard]] double channel_seconds(const Segment& made, double length, double slope) const {
        const Length at_end = rules_.channel.radius_at(square_metres(from_fixed_area(made.area_to)));
        const Length radius = made.radius_equivalent_m > 0 ? metres(made.radius_equivalent_m) : at_end;
        const ManningReach reach{.n = rules_.channel.n, .hydraulic_radius = radius, .slope = slope};
        return in_seconds(manning_time(metres(length), reach));
    }

    const PathGround& ground_;
    const TravelRules& rules_;
    std::span<const PathCell> path_;
    std::vector<PathPiece> pieces_;
};

}  // namespace

std::vector<Segment> segments_of(const PathGround& ground, std::span<const PathCell> path,
                                 const SegmentRules& segment_rules) {
    return Cutting(ground, path).segments(segment_rules);
}

}  // namespace rillclock
