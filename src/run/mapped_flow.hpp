#pragma once

#include "rillclock/terrain/own_ways.hpp"
#include "rillclock/terrain/terrain_edits.hpp"
#include "rillclock/travel/channel_reach.hpp"
#include "study_data.hpp"

namespace rillclock {

/// The files of mapped shapes that a study names, read.
struct MappedShapes {
    EditShapes shapes;
    std::vector<std::optional<MappedSection>> sections;   ///< of each channel
    std::vector<std::string> facts;   ///< "channels: 12 features, 11 of 12 lines within the elevations"
    Notices notices;
};

/// A file of mapped shapes that a study may name.
struct MappedFile {
    const char* role;   ///< as messages and result.json call it
    const std::optional<std::string>& name;
};
[[nodiscard]] std::vector<MappedFile> mapped_files(const Study& study);

/// Throws an input error where a file cannot be read or nothing of it lies within the grid.
[[nodiscard]] MappedShapes read_mapped_shapes(const Study& study, const Grid& grid, const ReferenceSystem& system);

/// Flow over the ground with all that is mapped beside it.
struct MappedFlow {
    Raster<FlowCode> codes;
    std::vector<Cell> line_cells;   ///< of channels and crossings: channel flow, whatever drains to them
    std::vector<MappedSection> sections;   ///< that channels state
    ChannelReaches reaches;         ///< of the cells of those channels; where several pass a cell, of the one that the flow follows from there
    std::vector<OwnWay> own_ways;   ///< where their water would go by the ground alone: the 1 000 that depart farthest, beyond the stated length
};

/// Finds the flow. Afterwards the elevations of lines are their beds, and the terrain's notices say what the edits came to.
[[nodiscard]] MappedFlow mapped_flow(const Study& study, const ResolvedStudy& resolved, TerrainData& terrain, const FindCodes& find_codes);

}  // namespace rillclock
