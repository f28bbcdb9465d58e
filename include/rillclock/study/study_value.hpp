#pragma once

#include <cstdint>
#include <string>
#include <variant>
#include <vector>

namespace rillclock {

/// A value as stated (dates as texts, "2026-05-01"), and where: what begins an error's sentence, "slope_window (study.toml, line 3, column 16)".
struct StudyValue {
    std::variant<std::string, std::int64_t, double, bool, std::vector<double>, std::vector<std::string>> value;
    std::string subject;
    std::string entry = {};  ///< where the key holds a table whose names are the user's: the name, such as "10"
};

}  // namespace rillclock
