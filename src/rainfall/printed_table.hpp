#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/quantity.hpp"
#include "rillclock/rainfall/intensity_table.hpp"

namespace rillclock {

/// What the numbers of a printed table are.
struct RainUnit {
    bool is_depth = true;               ///< depths, else intensities
    std::string_view name;              ///< as messages say it: "inches", "mm/h"
    double (*in_si)(double) = nullptr;  ///< metres, or metres per second, of a number in the unit
};

struct PrintedRow {
    int line = 0;
    std::string label;  ///< the duration as printed
    Duration duration;
    std::vector<double> values;  ///< one a return period
};

inline double si_of_inches(double number) {
    return inches(number).si();
}
inline double si_of_millimetres(double number) {
    return millimetres(number).si();
}
inline double si_of_inches_per_hour(double number) {
    return inches_per_hour(number).si();
}
inline double si_of_millimetres_per_hour(double number) {
    return millimetres_per_hour(number).si();
}

/// A table of rain as it stands in a file, not yet held to anything.
struct PrintedTable {
    std::string file;
    int header_line = 0;
    RainUnit unit;
    std::vector<double> return_periods;  ///< years
    std::vector<PrintedRow> rows;
};

/// The table in SI, once it keeps the promises of IntensityTable; otherwise throws an input error with file and line.
[[nodiscard]] IntensityTable checked_table(const PrintedTable& printed);

/// "rain.csv, line 3: what".
[[nodiscard]] Error fault_at(std::string_view file, int line, const std::string& what);

}  // namespace rillclock
