#include "rillclock/rainfall/design_rain.hpp"

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/core/quantity_text.hpp"

namespace rillclock {

Length checked_two_year_24_hour(Length depth, std::string_view subject) {
    if (depth >= least_two_year_24_hour && depth <= greatest_two_year_24_hour) return depth;
    throw input_error(
        std::string(subject) + " is " + significant(in_inches(depth), 4) + " in (" +
        significant(in_millimetres(depth), 4) +
        " mm), but a 2-year 24-hour rainfall depth lies between 0.5 in and 30 in; check the unit and write "
        "it as in \"3.6 in\" or \"91 mm\"");
}

Length two_year_24_hour_from_text(std::string_view text, std::string_view subject) {
    const Length depth = length_from_text(text, {.subject = std::string(subject), .example = "3.6 in"});
    return checked_two_year_24_hour(depth, subject);
}

std::string rain_is_missing(std::string_view where) {
    return std::string(where) +
           " gives no rain, and there is no default for it; state the 2-year 24-hour depth of the place, under [rain] "
           "as "
           "two_year_24_hour = \"3.6 in\" or on the command line as --rain \"3.6 in\", or rain by duration as "
           "file = \"atlas14.csv\" or --rain-file atlas14.csv";
}

}  // namespace rillclock
