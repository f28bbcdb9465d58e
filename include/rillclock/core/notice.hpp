#pragma once

#include <optional>
#include <string>
#include <vector>

namespace rillclock {

/// A place in the coordinates of the DEM's reference system.
struct Place {
    double x = 0.0;
    double y = 0.0;
};

/// Something the user should know, as a value: the report and the log are both made from it and so cannot differ.
struct Notice {
    std::string code;                 ///< short stable name, lower case with hyphens: "point-moved"
    std::string text;                 ///< one sentence: what was found, and what to do about it
    std::string point = {};           ///< name of the design point; empty where the notice is about the whole study
    std::optional<double> value = {};      ///< what was found, in the unit the text states
    std::optional<double> threshold = {};  ///< the limit it was held against, same unit
    std::optional<double> return_period = {};  ///< years; none where it holds for all of them, or for none
    std::optional<Place> place = {};       ///< of what was noticed; else that of the point, once the points are placed
    double effect_s = 0.0;            ///< how many seconds of travel time hang on it; 0 where that has no answer
};

/// What was noticed, in an order that its maker states.
using Notices = std::vector<Notice>;

}  // namespace rillclock
