#include "bench/plain_sweeps.hpp"

#include <array>

namespace rillclock::bench {
namespace {

/// Index steps of the eight directions.
class Steps {
public:
    explicit Steps(std::int64_t columns) {
        for (const Direction d : all_directions) {
            by_code_[static_cast<std::size_t>(d)] = row_step(d) * columns + column_step(d);
        }
    }
    [[nodiscard]] Cell from(Cell cell, FlowCode code) const {
        return static_cast<Cell>(static_cast<std::int64_t>(cell) + by_code_[code]);
    }

private:
    std::array<std::int64_t, 8> by_code_{};
};

constexpr std::uint8_t finished = 255;

Raster<std::uint8_t> in_degrees(const Raster<FlowCode>& codes, const Steps& steps) {
    Raster<std::uint8_t> degrees(codes.rows(), codes.columns());
    const auto size = static_cast<Cell>(codes.size());
    for (Cell cell = 0; cell < size; ++cell) {
        if (is_direction(codes[cell])) ++degrees[steps.from(cell, codes[cell])];
    }
    return degrees;
}

}  // namespace

Raster<std::int64_t> plain_accumulation(const Raster<FlowCode>& codes) {
    const Steps steps(codes.columns());
    Raster<std::uint8_t> awaited = in_degrees(codes, steps);
    Raster<std::int64_t> total(codes.rows(), codes.columns(), 1);
    const auto size = static_cast<Cell>(codes.size());
    for (Cell source = 0; source < size; ++source) {
        Cell cell = source;
        while (awaited[cell] == 0) {
            awaited[cell] = finished;
            if (!is_direction(codes[cell])) break;
            const Cell below = steps.from(cell, codes[cell]);
            total[below] += total[cell];
            --awaited[below];
            cell = below;
        }
    }
    return total;
}

Raster<std::int64_t> plain_distance(const Raster<FlowCode>& codes, std::int64_t straight, std::int64_t diagonal) {
    constexpr std::int64_t unknown = -1;
    const Steps steps(codes.columns());
    Raster<std::int64_t> distance(codes.rows(), codes.columns(), unknown);
    std::vector<Cell> path;
    const auto size = static_cast<Cell>(codes.size());
    for (Cell start = 0; start < size; ++start) {
        Cell cell = start;
        while (distance[cell] == unknown && is_direction(codes[cell])) {
            path.push_back(cell);
            cell = steps.from(cell, codes[cell]);
        }
        if (distance[cell] == unknown) distance[cell] = 0;
        std::int64_t length = distance[cell];
        for (; !path.empty(); path.pop_back()) {
            length += codes[path.back()] % 2 == 1 ? diagonal : straight;
            distance[path.back()] = length;
        }
    }
    return distance;
}

}  // namespace rillclock::bench
