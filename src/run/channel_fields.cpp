#include "channel_fields.hpp"

#include <algorithm>
#include <array>
#include <cmath>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

enum Field : std::size_t { n_field, width_m, width_ft, side_slope, depth_m, depth_ft, cross_fall, spread_m, spread_ft };

const std::array<std::string, 9> names{"n", "width_m", "width_ft", "side_slope", "depth_m", "depth_ft", "cross_fall", "spread_m", "spread_ft"};

/// The fields of one line, asked for one by one.
class Fields {
public:
    Fields(const std::vector<std::optional<double>>& numbers, const std::string& subject) : numbers_(numbers), subject_(subject) {}

    [[nodiscard]] bool has(Field field) const { return numbers_[field].has_value(); }
    [[nodiscard]] Error fault(const std::string& what) const { return input_error(subject_ + " " + what); }

    /// The number of a field, in [least, greatest] and not at the least where that is 0 and `zero_too` is not said.
    [[nodiscard]] double number(Field field, double greatest, bool zero_too = false) const {
        const double value = *numbers_[field];
        if ((zero_too ? value >= 0 : value > 0) && value <= greatest) return value;
        throw fault("has " + names[field] + " = " + significant(value) + "; give it a number " + (zero_too ? "from" : "above") +
                    " 0 up to " + significant(greatest) + ", or leave it empty");
    }

    /// A length that is given in one of two units.
    [[nodiscard]] std::optional<Length> length(Field si, Field us, bool zero_too = false) const {
        if (has(si) && has(us)) throw fault("has both " + names[si] + " and " + names[us] + "; keep one");
        if (has(si)) return metres(number(si, greatest_m, zero_too));
        if (has(us)) return feet(number(us, greatest_m, zero_too));
        return std::nullopt;
    }

private:
    static constexpr double greatest_m = 10000;
    const std::vector<std::optional<double>>& numbers_;
    const std::string& subject_;
};

void set_trapezoid(const Fields& fields, const std::optional<Length>& depth, const std::optional<Length>& width, MappedSection& section) {
    section.shape = SectionShape::trapezoid;
    section.trapezoid.bottom_width = width.value_or(metres(0));
    if (fields.has(side_slope)) section.trapezoid.side_slope = fields.number(side_slope, 100, true);
    if (!depth) throw fields.fault("states a trapezoid without its depth of flow; give depth_m or depth_ft");
    const bool is_open = section.trapezoid.bottom_width > metres(0) || section.trapezoid.side_slope > 0;
    if (!is_open) throw fields.fault("states a depth without a bottom; give width_m, width_ft or side_slope above 0");
    section.depth = *depth;
}

void set_gutter(const Fields& fields, const std::optional<Length>& spread, MappedSection& section) {
    section.shape = SectionShape::gutter;
    if (!fields.has(cross_fall) || !spread) throw fields.fault("states only half a gutter; give cross_fall, and spread_m or spread_ft");
    section.cross_fall = fields.number(cross_fall, 1);
    section.spread = *spread;
}

}  // namespace

std::span<const std::string> channel_fields() { return names; }

std::optional<MappedSection> section_of(const std::vector<std::optional<double>>& numbers, double standard_n, const std::string& subject) {
    if (std::none_of(numbers.begin(), numbers.end(), [](const auto& number) { return number.has_value(); })) return std::nullopt;
    const Fields fields(numbers, subject);
    MappedSection section{.n = fields.has(n_field) ? fields.number(n_field, 1) : standard_n};
    const auto width = fields.length(width_m, width_ft, true);
    const auto depth = fields.length(depth_m, depth_ft);
    const auto spread = fields.length(spread_m, spread_ft);
    const bool trapezoid = width || depth || fields.has(side_slope);
    const bool gutter = spread || fields.has(cross_fall);
    if (trapezoid && gutter) throw fields.fault("states both a trapezoid and a gutter; keep the fields of one");
    if (trapezoid) set_trapezoid(fields, depth, width, section);
    if (gutter) set_gutter(fields, spread, section);
    return section;
}

}  // namespace rillclock
