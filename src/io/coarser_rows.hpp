#pragma once

#include <cmath>
#include <cstddef>
#include <cstdint>
#include <optional>
#include <span>
#include <type_traits>
#include <vector>

#include "raster_statistics.hpp"
#include "raster_writer.hpp"

namespace rillclock {

/// Every second value of a row, the first one first.
template <class S>
void halve_nearest(std::span<const S> row, std::span<S> coarser) {
    for (std::size_t c = 0; c < coarser.size(); ++c) coarser[c] = row[2 * c];
}

/// The mean of each square of two by two cells, of those that hold a value; integers rounded to the nearest, halves up. `lower` is empty
/// below the last row.
template <class S>
void halve_average(std::span<const S> upper, std::span<const S> lower, const std::optional<S>& nodata, std::span<S> coarser) {
    for (std::size_t c = 0; c < coarser.size(); ++c) {
        double sum = 0.0;
        int count = 0;
        const auto add = [&](S value) {
            if (!is_value(value, nodata)) return;
            sum += static_cast<double>(value);
            ++count;
        };
        const bool has_right = 2 * c + 1 < upper.size();
        add(upper[2 * c]);
        if (has_right) add(upper[2 * c + 1]);
        if (!lower.empty()) add(lower[2 * c]);
        if (has_right && !lower.empty()) add(lower[2 * c + 1]);
        const double mean = sum / count;
        if (count == 0) coarser[c] = upper[2 * c];
        else if constexpr (std::is_floating_point_v<S>) coarser[c] = static_cast<S>(mean);
        else coarser[c] = static_cast<S>(std::floor(mean + 0.5));
    }
}

/// Writes a raster and its overviews together, from the top down: each level is a row of blocks that is filled from the level above,
/// written when it is whole, and filled anew. So no level is ever read back from the file, and none is held whole.
template <class S>
class CoarserRows {
public:
    CoarserRows(RasterWriter& writer, OverviewKind kind, const std::optional<S>& nodata)
        : writer_(writer), kind_(kind), nodata_(nodata), levels_(static_cast<std::size_t>(writer.levels())) {
        for (std::size_t i = 1; i < levels_.size(); ++i) {
            const auto level = static_cast<int>(i);
            const std::int64_t rows = std::min(writer.block_rows(level), writer.rows(level));
            levels_[i].rows.resize(static_cast<std::size_t>(rows * writer.columns(level)));
        }
    }

    /// Takes the next row of blocks of the raster itself: `block_rows` whole rows, fewer at the end.
    void add(std::span<const S> rows) { write(0, rows); }

private:
    struct Level {
        std::vector<S> rows;           ///< of the level's next row of blocks
        std::int64_t filled = 0;       ///< rows of it that are there
        std::int64_t written = 0;      ///< rows of blocks
    };

    // A level hands its rows on to the next coarser one: no deeper than there are levels.
    // NOLINTBEGIN(misc-no-recursion)
    void write(int level, std::span<const S> rows) {
        Level& state = levels_[static_cast<std::size_t>(level)];
        writer_.write_blocks(level, state.written++, std::as_bytes(rows));
        if (level + 1 < writer_.levels()) halve(level, rows);
    }

    void halve(int level, std::span<const S> rows) {
        const auto columns = static_cast<std::size_t>(writer_.columns(level));
        for (std::size_t at = 0; at < rows.size(); at += 2 * columns) {
            const bool has_lower = at + columns < rows.size();
            add_row(level + 1, rows.subspan(at, columns), has_lower ? rows.subspan(at + columns, columns) : std::span<const S>{});
        }
    }

    void add_row(int level, std::span<const S> upper, std::span<const S> lower) {
        Level& state = levels_[static_cast<std::size_t>(level)];
        const auto columns = static_cast<std::size_t>(writer_.columns(level));
        const auto row = std::span(state.rows).subspan(static_cast<std::size_t>(state.filled) * columns, columns);
        if (kind_ == OverviewKind::nearest) halve_nearest(upper, row);
        else halve_average(upper, lower, nodata_, row);
        ++state.filled;
        const std::int64_t begun = state.written * writer_.block_rows(level);
        if (state.filled < writer_.block_rows(level) && begun + state.filled < writer_.rows(level)) return;
        const std::int64_t filled = std::exchange(state.filled, 0);
        write(level, std::span<const S>(state.rows).first(static_cast<std::size_t>(filled) * columns));
    }
    // NOLINTEND(misc-no-recursion)

    RasterWriter& writer_;
    OverviewKind kind_;
    std::optional<S> nodata_;
    std::vector<Level> levels_;   ///< 0 is the raster itself
};

}  // namespace rillclock
