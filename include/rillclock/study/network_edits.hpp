#pragma once

#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "rillclock/catchment/restated_path.hpp"
#include "rillclock/core/quantity.hpp"
#include "rillclock/hydraulics/channel_flow.hpp"

namespace rillclock {

/// A pipe from an inlet to another point, as a line of a file states it.
struct StatedPipe {
    std::string from;
    std::string to;
    Length length;
    CircularPipe pipe;
    ChannelBed bed;
    std::string place;   ///< "pipes.csv, line 3", for errors
};

/// Reads pipes from CSV text. Columns in any order: `from` and `to` (names of points), `length` ("120 ft"), `diameter` ("18 in"),
/// `n` (Manning's), and either `slope` (rise over run) or `invert_from` and `invert_to` ("101.4 ft"). Throws an input error with file
/// and line for a column that is missing or unknown, a field that is missing, of the wrong unit or out of range, a pipe that does not
/// fall, and a second pipe from one point.
[[nodiscard]] std::vector<StatedPipe> parse_pipes(std::string_view text, std::string_view file);

/// What a user states of one point in place of what is computed.
struct PointOverride {
    std::string point;
    std::optional<Duration> time = {};         ///< of its own subarea
    std::optional<Duration> way_time = {};     ///< to the next point
    std::optional<double> coefficient = {};    ///< C of its own subarea
    StatedOverland overland = {};              ///< sheet flow on the way that decides the own time
    std::optional<StepTime> restated = {};     ///< the own time that follows from that; found once the ground is known
    std::string place;                         ///< "overrides.csv, line 3", for errors
};

/// Reads overrides from CSV text. Columns: `point`, and any of `time`, `way_time` ("12 min"), `sheet_length` ("80 ft"), `n` (of sheet
/// flow) and `c`; an empty field leaves what is computed. Throws an input error with file and line as above, and for a point that stands there twice, without any value,
/// or with a time beside a sheet length or n.
[[nodiscard]] std::vector<PointOverride> parse_overrides(std::string_view text, std::string_view file);

}  // namespace rillclock
