#include "rillclock/core/number_text.hpp"

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <string_view>

namespace rillclock {
namespace {

std::string printed(double value, std::chars_format format, int precision) {
    std::array<char, 400> buffer{};  // the longest fixed double has 309 digits before the point and 17 after
    const auto [end, error] = std::to_chars(buffer.data(), buffer.data() + buffer.size(), value, format, precision);
    return std::string(buffer.data(), end);
}

std::string without_sign_of_zero(std::string text) {
    const bool has_digit_above_zero = text.find_first_of("123456789") != std::string::npos;
    if (text.starts_with('-') && !has_digit_above_zero) text.erase(0, 1);
    return text;
}

std::string without_closing_zeros(std::string text) {
    if (text.find('.') == std::string::npos) return text;
    text.erase(text.find_last_not_of('0') + 1);
    if (text.ends_with('.')) text.pop_back();
    return text;
}

std::string not_finite(double value) {
    if (std::isnan(value)) return "nan";
    return value < 0 ? "-inf" : "inf";
}

/// The decimal exponent that a number in scientific form has after rounding: 3 of "1.2e+03".
int exponent_of(std::string_view scientific) {
    std::string_view digits = scientific.substr(scientific.find('e') + 1);
    if (digits.starts_with('+')) digits.remove_prefix(1);
    int exponent = 0;
    std::from_chars(digits.data(), digits.data() + digits.size(), exponent);
    return exponent;
}

}  // namespace

std::string significant(double value, int digits) {
    if (!std::isfinite(value)) return not_finite(value);
    if (value == 0) return "0";
    const std::string scientific = printed(value, std::chars_format::scientific, digits - 1);
    const int exponent = exponent_of(scientific);
    if (exponent < -6 || exponent >= 15) return scientific;
    return without_closing_zeros(printed(value, std::chars_format::fixed, std::max(0, digits - 1 - exponent)));
}

std::string fixed_decimals(double value, int decimals) {
    if (!std::isfinite(value)) return not_finite(value);
    return without_sign_of_zero(printed(value, std::chars_format::fixed, decimals));
}

}  // namespace rillclock
