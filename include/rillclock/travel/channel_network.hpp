#pragma once

#include <cstddef>
#include <span>
#include <vector>

#include "rillclock/travel/tiled_travel.hpp"

namespace rillclock {

/// A cell of a channel, or one that lies below a channel.
struct NetworkCell {
    Cell cell = no_cell;
    StepView step;                     ///< out of the cell; its reach is that of a mapped section, if any
    FixedLength flow_distance = 0;     ///< to the root
    StepTime overland;                 ///< of the water that arrives last beside the network; 0 where none does
    double runoff_area_m2 = 0.0;       ///< Σ C·A of all that drains through the cell
    std::size_t next = no_next;        ///< position of the cell below

    static constexpr std::size_t no_next = static_cast<std::size_t>(-1);
};

/// The channels of a study and all that lies below them, each cell before the one it drains to. What a channel carries and how fast changes
/// nothing beside it, so all that is kept here is the same in every storm.
///
/// Which water arrives last beside the network is found under the reference storm of the rules; its time is told in both parts, from the
/// arrival under that storm and one whose factor is a thousandth greater. Cost: two passes over the tiles; a few hundred bytes a
/// cell of the network.
class ChannelNetwork {
public:
    /// `runoff`: the runoff coefficient of each surface class, and of each class by soil (`CellSoil`).
    ChannelNetwork(const TiledTravel& travel, std::span<const double> runoff);

    [[nodiscard]] std::span<const NetworkCell> cells() const { return cells_; }

private:
    void find_cells(const TiledTravel& travel);
    void look_at_tiles(const TiledTravel& travel, std::span<const double> runoff);
    void link();

    std::vector<bool> is_in_;             ///< by cell
    std::vector<NetworkCell> cells_;
    const Raster<FlowCode>& codes_;
};

}  // namespace rillclock
