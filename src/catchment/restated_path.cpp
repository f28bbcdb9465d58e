#include "rillclock/catchment/restated_path.hpp"

#include <algorithm>

#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

bool is_overland(const PathPiece& piece) {
    const bool sheet_or_shallow = piece.part.regime == Regime::sheet || piece.part.regime == Regime::shallow;
    return sheet_or_shallow && !piece.part.ponded;
}

double sheet_length_m(std::span<const PathPiece> pieces) {
    double length = 0.0;
    for (const PathPiece& piece : pieces) length += piece.part.regime == Regime::sheet ? piece.part.length_m : 0.0;
    return length;
}

}  // namespace

StepTime restated_time(const PathGround& ground, std::span<const PathPiece> pieces, const StatedOverland& stated) {
    double left_m = stated.sheet_length ? in_metres(*stated.sheet_length) : sheet_length_m(pieces);
    const SheetRules& sheet = ground.rules.sheet;
    double index_m = 0.0;
    double from_head_m = 0.0;
    StepTime time;
    for (const PathPiece& piece : pieces) {
        const SurfaceHydraulics& surface = ground.classes[piece.surface];
        if (!is_overland(piece)) {
            left_m = 0.0;
            time += piece.part.time;
            continue;
        }
        const double sheet_m = std::min(left_m, piece.part.length_m);
        left_m -= sheet_m;
        if (sheet_m > 0) {
            const SheetStretch stretch{.n = stated.n.value_or(surface.sheet_n), .length = metres(sheet_m), .slope = piece.part.slope};
            const bool by_index = sheet.basis == SheetBasis::index;
            const Duration alone = by_index ? sheet.formula.at_unit_storm(metres(index_m), metres(index_m) + sheet_index(stretch))
                                            : surface.sheet_factor * sheet.formula.along_characteristic(stretch, metres(from_head_m));
            time.storm += to_fixed(in_seconds(alone));
            index_m += in_metres(sheet_index(stretch));
            from_head_m += sheet_m;
        }
        const Length shallow = metres(piece.part.length_m - sheet_m);
        if (shallow > Length{}) time.fixed += to_fixed(in_seconds(shallow / shallow_speed(surface, piece.part.slope)));
    }
    return time;
}

}  // namespace rillclock
