#pragma once

#include <string>
#include <string_view>

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// The 2-year 24-hour depths that occur on land lie well between these; outside, a unit or a number is wrong.
inline constexpr Length least_two_year_24_hour = inches(0.5);
inline constexpr Length greatest_two_year_24_hour = inches(30);

/// The depth itself, where it is plausible. Otherwise throws an input error; `subject` begins its sentence and says
/// what was read where: "two_year_24_hour (study.toml, line 9, column 20)".
[[nodiscard]] Length checked_two_year_24_hour(Length depth, std::string_view subject);

/// The depth from a text such as "3.6 in" or "91 mm", checked in the same way.
[[nodiscard]] Length two_year_24_hour_from_text(std::string_view text, std::string_view subject);

/// The sentence for a study in which no rain is given: there is no default for rain.
[[nodiscard]] std::string rain_is_missing(std::string_view where);

}  // namespace rillclock
