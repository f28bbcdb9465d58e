#pragma once

#include <cstdint>
#include <limits>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/study/study_value.hpp"

namespace rillclock {

/// Return periods beyond it are taken for a slip.
inline constexpr double greatest_return_period = 1e6;  // years

/// A value under its key: read as one kind of thing or another, or refused with the right form.
class Stated {
public:
    /// The form that errors show is that of the key's description. `value` is looked at as long as this is.
    Stated(std::string_view key, const StudyValue& value);

    [[nodiscard]] Error fault(const std::string& what) const { return input_error(value_.subject + " " + what); }

    [[nodiscard]] const std::string& text() const;
    [[nodiscard]] bool is_text() const { return std::holds_alternative<std::string>(value_.value); }

    [[nodiscard]] QuantityAsked asked(Sign sign = Sign::positive) const;
    [[nodiscard]] const std::string& form() const { return form_; }
    /// What is asked of either end of a range.
    [[nodiscard]] QuantityAsked one_of_range() const;
    [[nodiscard]] Length length() const { return length_from_text(text(), asked()); }
    [[nodiscard]] Speed speed() const { return speed_from_text(text(), asked()); }
    [[nodiscard]] Area area() const { return area_from_text(text(), asked()); }
    [[nodiscard]] PowerLaw power_law() const { return power_law_from_text(text(), asked()); }

    [[nodiscard]] double fraction(Sign sign) const;

    /// A bare number in [least, greatest].
    [[nodiscard]] double number(double least, double greatest) const;
    [[nodiscard]] int whole_number(int least, int greatest = std::numeric_limits<int>::max()) const;

    /// The place of the text among the words that are served.
    [[nodiscard]] std::size_t choice(const std::vector<std::string_view>& served) const;

    /// Years, at least 1 each, rising. One number alone is a list of one.
    [[nodiscard]] std::vector<double> return_periods() const;

    /// Texts, none of them empty. One alone is a list of one.
    [[nodiscard]] std::vector<std::string> texts() const;

    /// A day of the calendar, as "2026-05-01".
    [[nodiscard]] std::string date() const;
    [[nodiscard]] Duration duration(Sign sign) const { return duration_from_text(text(), asked(sign)); }

    /// The return period that the value's place in a table of the user's names stands for; none outside of such.
    [[nodiscard]] std::optional<double> entry_period() const;

    /// The class value that the value's place in a table of the user's names stands for.
    [[nodiscard]] int entry_class() const;
    [[nodiscard]] const std::string& subject() const { return value_.subject; }

private:
    [[nodiscard]] std::string shown() const;

    std::string form_;
    const StudyValue& value_;
};

}  // namespace rillclock
