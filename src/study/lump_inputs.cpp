#include "rillclock/study/lump_inputs.hpp"

#include <span>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/hydraulics/lump_formulas.hpp"

namespace rillclock {
namespace {

constexpr std::array kirpich_factors{
    SurfaceCoefficient{"paved overland", kirpich_paved_overland},
    SurfaceCoefficient{"concrete channel", kirpich_concrete_channel},
    SurfaceCoefficient{"natural channel", 1.0},
};

/// What a method's own table names; nothing where it has none.
std::span<const SurfaceCoefficient> named_values(LumpInput input) {
    switch (input) {
        case LumpInput::kerby_n:
            return kerby_retardances();
        case LumpInput::izzard_c:
            return izzard_retardances();
        case LumpInput::county_k:
            return county_initial_factors();
        case LumpInput::kirpich_factor:
            return kirpich_factors;
        case LumpInput::impervious:
        case LumpInput::undeveloped_coefficient:
            return {};
    }
    return {};
}

bool begins_a_number(std::string_view text) {
    return !text.empty() && std::string_view("0123456789.+-").find(text.front()) != std::string_view::npos;
}

[[noreturn]] void refuse_name(LumpInput input, std::string_view text, const std::string& subject) {
    const LumpRange range = range_of(input);
    std::string list;
    std::vector<std::string_view> names;
    for (const SurfaceCoefficient& named : named_values(input)) {
        names.push_back(named.surface);
        list += (list.empty() ? ", or one of: " : "; ") + std::string(named.surface);
    }
    throw input_error(subject + " is \"" + std::string(text) + "\"; write a number from " + significant(range.least) +
                      " to " + significant(range.greatest) + list + did_you_mean(text, names));
}

}  // namespace

LumpRange range_of(LumpInput input) {
    switch (input) {
        case LumpInput::kerby_n:
        case LumpInput::izzard_c:
            return {.least = 0.001, .greatest = 1};
        case LumpInput::impervious:
        case LumpInput::undeveloped_coefficient:
            return {.least = 0, .greatest = 1};
        case LumpInput::county_k:
            return {.least = 0.01, .greatest = 2};
        case LumpInput::kirpich_factor:
            return {.least = 0.01, .greatest = 10};
    }
    return {};
}

std::string_view name_of(LumpInput input) {
    switch (input) {
        case LumpInput::kerby_n:
            return "kerby_n";
        case LumpInput::izzard_c:
            return "izzard_c";
        case LumpInput::impervious:
            return "impervious";
        case LumpInput::undeveloped_coefficient:
            return "undeveloped_coefficient";
        case LumpInput::county_k:
            return "county_k";
        case LumpInput::kirpich_factor:
            return "kirpich_factor";
    }
    return "";
}

double lump_input_from_text(LumpInput input, std::string_view text, const std::string& subject) {
    for (const SurfaceCoefficient& named : named_values(input))
        if (named.surface == text) return named.value;
    if (!begins_a_number(text)) refuse_name(input, text, subject);
    const double number =
        number_from_text(text, {.subject = subject, .example = "0.4", .sign = Sign::not_negative});
    const LumpRange range = range_of(input);
    if (!(number >= range.least && number <= range.greatest)) refuse_name(input, text, subject);
    return number;
}

}  // namespace rillclock
