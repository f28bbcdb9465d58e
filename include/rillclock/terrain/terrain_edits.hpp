#pragma once

#include <functional>
#include <vector>

#include "rillclock/forest/flow_code.hpp"
#include "rillclock/raster/grid_shapes.hpp"
#include "rillclock/terrain/elevation_store.hpp"
#include "rillclock/terrain/flow_lines.hpp"

namespace rillclock {

/// What a study maps beside its elevations, in the coordinates of the grid.
struct EditShapes {
    std::vector<Line> channels;       ///< flow follows them in the order of their corners
    std::vector<Line> crossings;      ///< flow follows them from the higher to the lower end
    std::vector<Line> barriers;       ///< flow does not cross them
    std::vector<Place> kept_places;   ///< water stays
    std::vector<Polygon> kept_areas;  ///< water stays
};

/// What one kind of mapped shape came to on the grid.
struct EditCount {
    std::size_t used = 0;      ///< shapes that change something
    std::size_t unused = 0;    ///< shapes that are off the data, or channels and crossings within one cell
    std::size_t covered = 0;   ///< shapes on the data that change nothing, since shapes that count before them have their cells
    std::size_t turned = 0;    ///< channels drawn against the ground, and followed the other way
    std::size_t cells = 0;     ///< cells claimed
};

/// Edits in grid space. Where shapes of several kinds claim a cell, kept water counts before lines and lines before barriers: a line
/// through a barrier is a gate in it. Of shapes of one kind the first in the file counts first.
///
/// Lines claim `shortened` ways, within the data: at a void or the edge of the grid a way ends, and begins anew beyond. Barriers
/// claim `cells_crossed`, so that no diagonal step passes between two of their cells.
///
///     channel      crossing under a road (=)      barrier (H)          a diagonal step of water (\) past a barrier that
///     . # .  .     . = .                          . H .  .             claimed only corners would pass; so it claims edges
///     . . #  .     #→#→#                          . H H  .             H \ .
///     . . .  #     . = .                          . . H  .             H H \    .
struct TerrainEdits {
    FlowLines lines;
    std::vector<Cell> barrier;   ///< increasing, as is `kept`
    std::vector<Cell> kept;
    EditCount channels;
    EditCount crossings;
    EditCount barriers;
    EditCount kept_waters;

    [[nodiscard]] bool empty() const { return lines.size() == 0 && barrier.empty() && kept.empty(); }
};

/// Finds the cells that mapped shapes claim. A channel whose last cell lies more than `turn_from` (in elevation units) above its first
/// is followed the other way: small rises are noise of the ground, great ones a line drawn upstream.
[[nodiscard]] TerrainEdits place_edits(const EditShapes& shapes, const Grid& grid, const ElevationStore& elevations, double turn_from);

/// Flow over an edited terrain.
struct EditedFlow {
    Raster<FlowCode> codes;
    std::vector<Cell> ends_without_way;   ///< ends of lines from which the ground leads nowhere but back over the line: roots
    std::vector<Cell> enclosed;           ///< lowest ground beside a barrier that shuts it in: roots
};

/// Finds the flow codes of elevations.
using FindCodes = std::function<Raster<FlowCode>(const ElevationStore&)>;

/// Flow codes with the edits: `find_codes` is any builder of flow codes (plain or tiled; one answer means one answer here).
///
/// 1. The builder sees lines and kept water at the `swallowing_level` and barriers as far above all ground. So whatever lies beside a line
///    enters it, and a depression opens into a line, kept water or the outside, whichever pass is the lowest.
/// 2. Each cell of a line drains to its next one, exactly: nothing else ever changes its way.
/// 3. At the end of a line: on the edge of the data or beside a void the water leaves; else it goes on over the ground by the lowest
///    way that leads out without the line's own cells (a flood from the end, which stops as soon as it meets a cell whose way is
///    settled), through other lines where these come first. Where there is none, it stays: the end is a root.
/// 4. Where barriers leave a basin no way out, its water stays beside the barrier at the lowest place of it: a root.
///
/// Why there is no circle: 1 is a forest whose roots are lines, kept water and the outside; 3 joins one line after the other to what
/// is settled already, and changes only cells whose way led into lines that were not.
/// `elevations` are changed meanwhile, and are as they were afterwards (also where `find_codes` throws). Cost: beyond the builder's,
/// what is flooded at the ends of lines: the ponds that would form there.
[[nodiscard]] EditedFlow edited_flow(ElevationStore& elevations, const TerrainEdits& edits, const FindCodes& find_codes);

/// Lowers the cells of lines to their *bed*: the lowest ground that the line has met so far, its own cell included. Returns the
/// greatest cut, in elevation units.
///
/// What is computed along the flow (spill elevation, ponding, slope ahead) sees the bed, since water in a channel or a crossing
/// does not climb what its line cuts through; all other cells keep their ground. Beds take values of the ground only, so that no bit
/// of any elevation is new.
///
///     ground  5 4 7 8 3 2      a crossing under the embankment 7 8
///     bed     5 4 4 4 3 2
double lower_to_beds(ElevationStore& elevations, const FlowLines& lines);

}  // namespace rillclock
