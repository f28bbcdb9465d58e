#include "level_ground.hpp"

#include "rillclock/core/vectorised.hpp"
#include "tile_descent.hpp"

namespace rillclock {
namespace {

/// A row of a tile, seen from its first cell; neighbours stand `stride` before and after.
template <class Z>
struct LevelRow {
    const Z* z;
    const FlowCode* codes;
    std::int64_t stride;
    std::int64_t columns;
};

template <class Z>
LevelRow<Z> level_row(const Desk<Z>& desk, std::int64_t row) {
    return {desk.z.at(row, 0), desk.codes.at(row, 0), desk.z.shape().columns() + 2, desk.z.shape().columns()};
}

/// 1 where `is_seed(i, neighbour)` holds for one of the neighbours, unreached elsewhere; 0 where the code is below
/// `lowest`.
template <class Z, class IsSeed>
[[gnu::always_inline]] inline void begin_row(const LevelRow<Z>& row, FlowCode lowest, std::uint32_t* __restrict numbers,
                                             const IsSeed& is_seed) {
    const std::int64_t stride = row.stride;
    for (std::int64_t i = 0; i < row.columns; ++i) {
        const auto ask = [&](std::int64_t step) { return static_cast<std::uint32_t>(is_seed(i, i + step)); };
        const std::uint32_t seed = ask(-stride) | ask(-stride + 1) | ask(1) | ask(stride + 1) | ask(stride) |
                                   ask(stride - 1) | ask(-1) | ask(-stride - 1);
        const std::uint32_t distance = seed != 0 ? 1U : unreached;
        numbers[i] = row.codes[i] >= lowest ? distance : 0U;
    }
}

template <class Z>
[[gnu::always_inline]] inline void begin_row_to_exit(const LevelRow<Z>& row, std::uint32_t* __restrict numbers) {
    const Z* z = row.z;
    const FlowCode* codes = row.codes;
    begin_row(row, flow_undecided, numbers, [z, codes](std::int64_t i, std::int64_t beside) {
        return static_cast<unsigned>(z[beside] == z[i]) & static_cast<unsigned>(codes[beside] < flow_undecided);
    });
}
RILLCLOCK_VECTORISED
void begin_row_at_exit(const LevelRow<float>& row, std::uint32_t* __restrict numbers) {
    begin_row_to_exit(row, numbers);
}
RILLCLOCK_VECTORISED
void begin_row_at_exit(const LevelRow<double>& row, std::uint32_t* __restrict numbers) {
    begin_row_to_exit(row, numbers);
}

template <class Z>
[[gnu::always_inline]] inline void begin_row_from_higher(const LevelRow<Z>& row, std::uint32_t* __restrict numbers) {
    const Z* z = row.z;
    begin_row(row, flow_awaited, numbers, [z](std::int64_t i, std::int64_t beside) { return z[beside] > z[i]; });
}
RILLCLOCK_VECTORISED
void begin_row_at_higher(const LevelRow<float>& row, std::uint32_t* __restrict numbers) {
    begin_row_from_higher(row, numbers);
}
RILLCLOCK_VECTORISED
void begin_row_at_higher(const LevelRow<double>& row, std::uint32_t* __restrict numbers) {
    begin_row_from_higher(row, numbers);
}

/// Whether a row has a cell whose code is at least `lowest`: most rows have none, and are not asked further.
RILLCLOCK_VECTORISED
bool has_code_from(FlowCode lowest, const FlowCode* codes, std::int64_t columns) {
    FlowCode highest = 0;
    for (std::int64_t i = 0; i < columns; ++i) highest = highest < codes[i] ? codes[i] : highest;
    return highest >= lowest;
}

RILLCLOCK_VECTORISED
void mark_row(FlowCode* __restrict codes, const std::uint32_t* __restrict numbers, std::int64_t columns) {
    for (std::int64_t i = 0; i < columns; ++i) {
        const bool awaited = (codes[i] == flow_undecided) & (numbers[i] != unreached);
        codes[i] = awaited ? static_cast<FlowCode>(flow_awaited | (numbers[i] & 3U)) : codes[i];
    }
}

/// An exit has distance 0 and is decided; it has no number, and nothing is nearer to higher ground.
template <class Z>
[[gnu::always_inline]] inline void decide_row(const LevelRow<Z>& row, const std::uint32_t* __restrict numbers,
                                              FlowCode* __restrict settled) {
    const std::int64_t stride = row.stride;
    const Z* z = row.z;
    const FlowCode* codes = row.codes;
    for (std::int64_t i = 0; i < row.columns; ++i) {
        const std::uint32_t nearer = (codes[i] + 3U) & 3U;
        std::uint32_t code = flow_undecided;
        std::uint32_t best = 0;
        const auto ask = [&](Direction d, std::int64_t beside) __attribute__((always_inline)) {
            const std::uint32_t flat = codes[beside] >= flow_undecided ? UINT32_MAX : 0U;
            const std::uint32_t distance = codes[beside] & 3U & flat;
            const std::uint32_t from_higher = numbers[beside] & flat;
            const std::uint32_t level = z[beside] == z[i] ? UINT32_MAX : 0U;
            const std::uint32_t way = distance == nearer ? level : 0U;
            // One more than the distance, so that 0 is no way at all; what is unreached is so in the whole flat.
            const std::uint32_t score = (from_higher == unreached ? from_higher : from_higher + 1U) & way;
            code = score > best ? std::uint32_t{flow_code(d)} : code;
            best = score > best ? score : best;
        };
        ask(Direction::north, i - stride);
        ask(Direction::north_east, i - stride + 1);
        ask(Direction::east, i + 1);
        ask(Direction::south_east, i + stride + 1);
        ask(Direction::south, i + stride);
        ask(Direction::south_west, i + stride - 1);
        ask(Direction::west, i - 1);
        ask(Direction::north_west, i - stride - 1);
        settled[i] = static_cast<FlowCode>(codes[i] >= flow_awaited ? code : std::uint32_t{codes[i]});
    }
}
RILLCLOCK_VECTORISED
void decide_row_awaited(const LevelRow<float>& row, const std::uint32_t* __restrict numbers,
                        FlowCode* __restrict settled) {
    decide_row(row, numbers, settled);
}
RILLCLOCK_VECTORISED
void decide_row_awaited(const LevelRow<double>& row, const std::uint32_t* __restrict numbers,
                        FlowCode* __restrict settled) {
    decide_row(row, numbers, settled);
}

/// Lets `begin(row, numbers)` write the numbers of the rows that have a code from `lowest` on; 0 in the others.
template <class Z, class Begin>
void for_each_row(Desk<Z>& desk, FlowCode lowest, const Begin& begin) {
    desk.numbers.resize(desk.z.shape(), 0);
    for (std::int64_t row = 0; row < desk.z.shape().rows(); ++row) {
        const LevelRow<Z> level = level_row(desk, row);
        std::uint32_t* numbers = desk.numbers.at(row, 0);
        if (has_code_from(lowest, level.codes, level.columns)) {
            begin(level, numbers);
        } else {
            std::fill_n(numbers, level.columns, 0U);
        }
    }
}

}  // namespace

template <class Z>
bool has_level_rim(const Desk<Z>& desk) {
    bool level = false;
    desk.z.shape().for_each_rim([&](Position p) {
        level = level || (desk.codes[p] == flow_undecided && has_level_neighbour(desk.z, p));
    });
    return level;
}

template <class Z>
void begin_distance_to_exit(Desk<Z>& desk) {
    for_each_row(desk, flow_undecided,
                 [&](const LevelRow<Z>& row, std::uint32_t* numbers) { begin_row_at_exit(row, numbers); });
}

template <class Z>
void begin_distance_from_higher(Desk<Z>& desk) {
    for_each_row(desk, flow_awaited,
                 [&](const LevelRow<Z>& row, std::uint32_t* numbers) { begin_row_at_higher(row, numbers); });
}

template <class Z>
void begin_distance_to_entry(Desk<Z>& desk) {
    const PatchShape& shape = desk.codes.shape();
    desk.numbers.resize(shape, 0);
    for (std::int64_t row = 0; row < shape.rows(); ++row) {
        const FlowCode* codes = desk.codes.at(row, 0);
        std::transform(codes, codes + shape.columns(), desk.numbers.at(row, 0),
                       [](FlowCode code) { return is_flat(code) ? unreached : 0U; });
    }
}

template <class Z>
void mark_awaited(Desk<Z>& desk) {
    const PatchShape& shape = desk.codes.shape();
    for (std::int64_t row = 0; row < shape.rows(); ++row)
        mark_row(desk.codes.at(row, 0), desk.numbers.at(row, 0), shape.columns());
}

template <class Z>
void decide_awaited(Desk<Z>& desk) {
    for (std::int64_t row = 0; row < desk.z.shape().rows(); ++row) {
        const LevelRow<Z> level = level_row(desk, row);
        if (!has_code_from(flow_awaited, level.codes, level.columns)) continue;
        decide_row_awaited(level, desk.numbers.at(row, 0), desk.settled.at(row, 0));
    }
}

template bool has_level_rim(const Desk<float>&);
template bool has_level_rim(const Desk<double>&);
template void begin_distance_to_exit(Desk<float>&);
template void begin_distance_to_exit(Desk<double>&);
template void begin_distance_from_higher(Desk<float>&);
template void begin_distance_from_higher(Desk<double>&);
template void begin_distance_to_entry(Desk<float>&);
template void begin_distance_to_entry(Desk<double>&);
template void mark_awaited(Desk<float>&);
template void mark_awaited(Desk<double>&);
template void decide_awaited(Desk<float>&);
template void decide_awaited(Desk<double>&);

}  // namespace rillclock
