#pragma once

#include <cmath>
#include <functional>
#include <string>
#include <utility>
#include <vector>

#include "rillclock/core/csv_text.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/io/reference_system.hpp"

namespace rillclock {

/// A table described once, as named columns that each know how to print a row: header and rows cannot drift apart.
template <class Row>
class TableWriter {
public:
    using Print = std::function<std::string(const Row&)>;

    TableWriter& column(std::string name, Print print) {
        names_.push_back(std::move(name));
        prints_.push_back(std::move(print));
        return *this;
    }

    [[nodiscard]] std::string header() const { return csv_line(names_); }
    [[nodiscard]] std::string line(const Row& row) const {
        std::vector<std::string> fields;
        fields.reserve(prints_.size());
        for (const Print& print : prints_) fields.push_back(print(row));
        return csv_line(fields);
    }

private:
    std::vector<std::string> names_;
    std::vector<Print> prints_;
};

/// Five significant digits; nothing where there is no number.
inline std::string five_digits(double value) { return std::isfinite(value) ? significant(value, 5) : std::string(); }
/// To a hundredth of a metre in degrees, to a millimetre in lengths.
inline std::string coordinate(const ReferenceSystem& system, double value) { return fixed_decimals(value, system.is_geographic() ? 7 : 3); }
inline std::string yes_or_no(bool value) { return value ? "yes" : "no"; }

}  // namespace rillclock
