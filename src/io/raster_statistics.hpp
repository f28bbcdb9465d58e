#pragma once

#include <algorithm>
#include <array>
#include <cmath>
#include <cstddef>
#include <limits>
#include <optional>
#include <span>

namespace rillclock {

/// Least, greatest, mean and spread of values, joined part by part in a fixed order.
struct RasterStatistics {
    double count = 0;
    double least = std::numeric_limits<double>::infinity();
    double greatest = -std::numeric_limits<double>::infinity();
    double mean = 0;
    double squares = 0;  ///< sum of squared distances from the mean

    /// T. F. Chan, G. H. Golub, R. J. LeVeque, Updating formulae and a pairwise algorithm for computing sample
    /// variances, 1979.
    void join(const RasterStatistics& other) {
        if (!(other.count > 0)) return;
        const double both = count + other.count;
        const double apart = other.mean - mean;
        squares += other.squares + apart * apart * count * other.count / both;
        mean += apart * other.count / both;
        count = both;
        least = std::min(least, other.least);
        greatest = std::max(greatest, other.greatest);
    }
    [[nodiscard]] double standard_deviation() const { return std::sqrt(squares / count); }
};

/// Whether a stored value is one, and not the mark of a cell without any.
template <class S>
[[nodiscard]] bool is_value(S value, const std::optional<S>& nodata) {
    return !(nodata && value == *nodata) && std::isfinite(static_cast<double>(value));
}

/// Sums a number for each value in four lanes, so that one addition need not wait for the last.
template <class S, class Number>
[[nodiscard]] double sum_in_lanes(std::span<const S> values, const Number& number) {
    std::array<double, 4> lanes{};
    std::size_t i = 0;
    for (; i + lanes.size() <= values.size(); i += lanes.size()) {
        for (std::size_t lane = 0; lane < lanes.size(); ++lane) lanes[lane] += number(values[i + lane]);
    }
    for (; i < values.size(); ++i) lanes[0] += number(values[i]);
    return (lanes[0] + lanes[1]) + (lanes[2] + lanes[3]);
}

template <class S>
[[nodiscard]] RasterStatistics statistics_of(std::span<const S> values, const std::optional<S>& nodata) {
    RasterStatistics result;
    result.count = sum_in_lanes(values, [&](S value) { return is_value(value, nodata) ? 1.0 : 0.0; });
    if (!(result.count > 0)) return result;
    const double sum = sum_in_lanes(values, [&](S value) { return is_value(value, nodata) ? static_cast<double>(value) : 0.0; });
    result.mean = sum / result.count;
    result.squares = sum_in_lanes(values, [&](S value) {
        const double apart = is_value(value, nodata) ? static_cast<double>(value) - result.mean : 0.0;
        return apart * apart;
    });
    for (const S value : values) {
        if (!is_value(value, nodata)) continue;
        result.least = std::min(result.least, static_cast<double>(value));
        result.greatest = std::max(result.greatest, static_cast<double>(value));
    }
    return result;
}

}  // namespace rillclock
