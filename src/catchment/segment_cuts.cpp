#include "segment_cuts.hpp"

#include <algorithm>
#include <array>
#include <optional>

namespace rillclock {
namespace {

constexpr std::array<double, 9> slope_bounds = {0.001, 0.002, 0.005, 0.01, 0.02, 0.05, 0.1, 0.2, 0.5};

/// A channel's segment ends where its area has grown by this.
constexpr double area_growth = 1.5;

std::ptrdiff_t slope_class(const PathPiece& piece) {
    return std::upper_bound(slope_bounds.begin(), slope_bounds.end(), piece.part.slope) - slope_bounds.begin();
}

/// Follows a path piece by piece and says where one formula's inputs end.
class FormulaCuts {
public:
    explicit FormulaCuts(std::span<const SurfaceHydraulics> classes) : classes_(classes) {}

    /// Whether a segment must begin with this piece.
    bool begins(const PathPiece& piece) {
        const bool cut = !begun_ || piece.part.regime != start_.part.regime || changes_surface(piece) || jumps(piece) ||
                         outgrows(piece) || changes_section(piece) || passes_chart_point(piece);
        if (cut) {
            begun_ = true;
            start_ = piece;
            interval_ = chart_interval(piece);
            index_m_ = unknown;
        }
        if (piece.part.regime == Regime::sheet && !piece.part.ponded) index_m_ = piece.part.index_to_m;
        return cut;
    }

private:
    [[nodiscard]] bool changes_surface(const PathPiece& piece) const {
        return piece.part.regime != Regime::channel && piece.surface != start_.surface;
    }
    /// Ponded ground lets u jump like a joining branch does: its growth of u is not the formula's.
    [[nodiscard]] bool jumps(const PathPiece& piece) const {
        return piece.part.regime == Regime::sheet && !piece.part.ponded && index_m_ != unknown &&
               piece.part.index_from_m != index_m_;
    }
    [[nodiscard]] bool changes_section(const PathPiece& piece) const {
        return piece.part.regime == Regime::channel && section_of(piece) != section_of(start_);
    }
    static std::uint32_t section_of(const PathPiece& piece) { return piece.reach ? piece.reach->section : no_section; }

    [[nodiscard]] bool outgrows(const PathPiece& piece) const {
        return piece.part.regime == Regime::channel &&
               static_cast<double>(piece.area) > area_growth * static_cast<double>(start_.area);
    }

    /// Between which points of a chart the piece's slope lies.
    [[nodiscard]] std::size_t chart_interval(const PathPiece& piece) const {
        if (piece.part.regime != Regime::shallow || piece.part.ponded) return no_interval;
        const auto& line = classes_[piece.surface].shallow_line;
        return line ? line->law_at(piece.part.slope).interval : no_interval;
    }
    /// A stretch that begins ponded takes the interval of its first piece that is not.
    bool passes_chart_point(const PathPiece& piece) {
        const std::size_t interval = chart_interval(piece);
        if (interval == no_interval) return false;
        if (interval_ == no_interval) interval_ = interval;
        return !classes_[piece.surface].shallow_line->holds(interval_, piece.part.slope);
    }

    std::span<const SurfaceHydraulics> classes_;
    static constexpr std::size_t no_interval = static_cast<std::size_t>(-1);   ///< where no chart times a piece
    std::size_t interval_ = no_interval;
    PathPiece start_;
    bool begun_ = false;
    static constexpr double unknown = -1.0;
    double index_m_ = unknown;  ///< u where the last unponded piece ended
};

struct Run {
    std::size_t first;
    std::ptrdiff_t slope_class;
    double length_m;
};

/// Stretches of one slope class among the pieces [first, last). Ponded pieces belong to the stretch they lie in: no slope times them.
std::vector<Run> slope_runs(std::span<const PathPiece> pieces, std::size_t first, std::size_t last) {
    std::vector<Run> runs;
    for (std::size_t i = first; i < last; ++i) {
        if (pieces[i].part.ponded) continue;
        if (runs.empty() || slope_class(pieces[i]) != runs.back().slope_class) {
            runs.push_back({i, slope_class(pieces[i]), 0.0});
        }
        runs.back().length_m += pieces[i].part.length_m;
    }
    return runs;
}

/// Starts within one formula's stretch: at runs that are long enough and of another class than the last such run.
void add_slope_cuts(std::span<const PathPiece> pieces, std::size_t first, std::size_t last, double shortest_m,
                    std::vector<std::size_t>& starts) {
    starts.push_back(first);
    const bool by_slope = pieces[first].part.regime == Regime::shallow || pieces[first].part.regime == Regime::channel;
    if (!by_slope) return;
    std::optional<std::ptrdiff_t> current;
    for (const Run& run : slope_runs(pieces, first, last)) {
        if (run.length_m < shortest_m) continue;
        if (current && run.slope_class != *current) starts.push_back(run.first);
        current = run.slope_class;
    }
}

}  // namespace

std::span<const double> slope_class_bounds() { return slope_bounds; }

std::vector<std::size_t> segment_starts(std::span<const PathPiece> pieces, std::span<const SurfaceHydraulics> classes,
                                        double shortest_m) {
    std::vector<std::size_t> formula_starts;
    FormulaCuts cuts(classes);
    for (std::size_t i = 0; i < pieces.size(); ++i) {
        if (cuts.begins(pieces[i])) formula_starts.push_back(i);
    }
    formula_starts.push_back(pieces.size());
    std::vector<std::size_t> starts;
    for (std::size_t i = 0; i + 1 < formula_starts.size(); ++i) {
        add_slope_cuts(pieces, formula_starts[i], formula_starts[i + 1], shortest_m, starts);
    }
    return starts;
}

}  // namespace rillclock
