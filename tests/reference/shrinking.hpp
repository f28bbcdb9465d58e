#pragma once

#include <algorithm>
#include <cmath>
#include <string>
#include <utility>
#include <vector>

#include "reference/plain/steepest_descent.hpp"

/// Makes a terrain that fails a law as small as it will go, and draws it, so that it can be understood and kept.
namespace rillclock::shrinking {

/// A terrain without one of its rows, or of its columns.
inline Elevations without_row(const Elevations& z, std::int64_t left_out) {
    Elevations rest(z.rows() - 1, z.columns());
    for (std::int64_t row = 0; row < rest.rows(); ++row) {
        const auto from = z.row(row < left_out ? row : row + 1);
        std::copy(from.begin(), from.end(), rest.row(row).begin());
    }
    return rest;
}

inline Elevations without_column(const Elevations& z, std::int64_t left_out) {
    Elevations rest(z.rows(), z.columns() - 1);
    for (std::int64_t row = 0; row < rest.rows(); ++row) {
        for (std::int64_t column = 0; column < rest.columns(); ++column) {
            rest(row, column) = z(row, column < left_out ? column : column + 1);
        }
    }
    return rest;
}

inline bool has_data(const Elevations& z) {
    return std::any_of(z.values().begin(), z.values().end(), [](double level) { return !std::isnan(level); });
}

/// Terrains with one cell lower by one: those of 200 cells and less, which are soon asked one by one.
inline std::vector<Elevations> lowered(const Elevations& z) {
    std::vector<Elevations> all;
    for (Cell cell = 0; z.size() <= 200 && cell < static_cast<Cell>(z.size()); ++cell) {
        if (!(z[cell] >= 1.0)) continue;
        all.push_back(z);
        all.back()[cell] = std::ceil(z[cell]) - 1.0;
    }
    return all;
}

/// Terrains a little simpler than `z`, with data: a row less, or a column, or a cell lower.
inline std::vector<Elevations> simpler(const Elevations& z) {
    std::vector<Elevations> all;
    for (std::int64_t row = z.rows() - 1; row >= 0 && z.rows() > 1; --row) all.push_back(without_row(z, row));
    for (std::int64_t column = z.columns() - 1; column >= 0 && z.columns() > 1; --column) all.push_back(without_column(z, column));
    for (Elevations& lower : lowered(z)) all.push_back(std::move(lower));
    std::erase_if(all, [](const Elevations& candidate) { return !has_data(candidate); });
    return all;
}

/// The simplest that still fails, stepping from `value` to the first of `simpler(value)` that `fails`, as long as there is one.
/// `value` itself fails.
template <class Value, class Simpler, class Fails>
Value shrunk(Value value, Simpler simpler, Fails fails) {
    for (bool smaller = true; smaller;) {
        smaller = false;
        auto candidates = simpler(value);
        for (Value& candidate : candidates) {
            if (!fails(candidate)) continue;
            value = std::move(candidate);
            smaller = true;
            break;
        }
    }
    return value;
}

/// As `drawings::terrain` reads it where elevations are whole numbers from 0 to 9; else numbers, a line a row.
inline std::string drawing(const Elevations& z) {
    bool digits = true;
    for (const double level : z.values()) digits = digits && (std::isnan(level) || (level == std::floor(level) && level >= 0 && level <= 9));
    std::string text;
    for (std::int64_t row = 0; row < z.rows(); ++row) {
        for (const double level : z.row(row)) {
            text += std::isnan(level) ? "#" : digits ? std::string(1, static_cast<char>('0' + static_cast<int>(level))) : std::to_string(level) + " ";
        }
        text += '\n';
    }
    return text;
}

/// A terrain that fails, shrunk and drawn: to be understood, and kept in `reference/kept_terrains.hpp` with what it is about.
template <class Fails>
std::string smallest_failing(const Elevations& z, Fails fails) {
    const Elevations smallest = shrunk(z, simpler, fails);
    return std::to_string(smallest.rows()) + " x " + std::to_string(smallest.columns()) + ":\n" + drawing(smallest);
}

}  // namespace rillclock::shrinking
