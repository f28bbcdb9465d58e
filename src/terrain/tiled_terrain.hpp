#pragma once

#include <cstdlib>
#include <limits>
#include <memory>
#include <mutex>
#include <new>
#include <span>
#include <vector>

#include "patch.hpp"
#include "rillclock/raster/raster.hpp"
#include "rillclock/terrain/descent.hpp"
#include "rillclock/tiles/executor.hpp"
#include "rillclock/tiles/tile_memory.hpp"

namespace rillclock {

/// One number a cell, with a meaning that changes from stage to stage. Memory is taken from the system tile by tile, as
/// it is first written.
class CellNumbers {
public:
    CellNumbers(std::int64_t rows, std::int64_t columns)
        : rows_(rows),
          columns_(columns),
          // A vector would write its zeros at once and on one thread; those of calloc come with the pages.
          // NOLINTNEXTLINE(cppcoreguidelines-no-malloc)
          values_(static_cast<std::uint32_t*>(std::calloc(size(), sizeof(std::uint32_t)))) {
        if (!values_) throw std::bad_alloc();
        ask_for_huge_pages(values_.get(), size() * sizeof(std::uint32_t));
    }
    [[nodiscard]] std::int64_t rows() const { return rows_; }
    [[nodiscard]] std::int64_t columns() const { return columns_; }
    [[nodiscard]] std::uint32_t operator[](Cell cell) const { return values_[cell]; }
    [[nodiscard]] std::span<std::uint32_t> row(std::int64_t r) { return {values_.get() + r * columns_, width()}; }
    [[nodiscard]] std::span<const std::uint32_t> row(std::int64_t r) const {
        return {values_.get() + r * columns_, width()};
    }

private:
    struct Free {
        void operator()(std::uint32_t* values) const { std::free(values); }  // NOLINT(cppcoreguidelines-no-malloc)
    };
    [[nodiscard]] std::size_t width() const { return static_cast<std::size_t>(columns_); }
    [[nodiscard]] std::size_t size() const { return static_cast<std::size_t>(rows_) * width(); }

    std::int64_t rows_;
    std::int64_t columns_;
    std::unique_ptr<std::uint32_t[], Free> values_;
};

/// What one thread works a tile with: about 15 bytes a cell of the tile, meant to stay in the processor's own cache.
template <class Z>
struct Desk {
    Patch<Z> z;
    Patch<FlowCode> codes;
    Patch<FlowCode> settled;  ///< codes as they will be, while those they follow from are still looked at
    Patch<FlowCode> falling;  ///< codes of the cells whose next is lower
    Patch<std::uint32_t> numbers;
    std::vector<std::uint32_t> nodes_of_ends;
    std::vector<Position> queue;
};

/// Desks that wait for the next tile.
template <class Z>
class Desks {
public:
    /// Lets `work(desk)` have a desk of its own.
    template <class Work>
    decltype(auto) lend(const Work& work) {
        struct Loan {
            Desks& desks;
            std::unique_ptr<Desk<Z>> desk;
            ~Loan() { desks.put(std::move(desk)); }
        };
        const Loan loan{*this, take()};
        return work(*loan.desk);
    }

private:
    std::unique_ptr<Desk<Z>> take() {
        const std::lock_guard lock(mutex_);
        if (free_.empty()) return std::make_unique<Desk<Z>>();
        auto desk = std::move(free_.back());
        free_.pop_back();
        return desk;
    }
    void put(std::unique_ptr<Desk<Z>> desk) {
        const std::lock_guard lock(mutex_);
        free_.push_back(std::move(desk));
    }

    std::mutex mutex_;
    std::vector<std::unique_ptr<Desk<Z>>> free_;
};

/// A terrain in tiles while its flow is being found: where local work gets its patches from and brings its results to.
///
/// All that is known of a cell is its elevation, its code and one number. A stage never reads what another tile writes
/// in it.
template <class Z>
class TiledTerrain {
public:
    TiledTerrain(const Raster<Z>& elevations, const TileGrid& grid, const Executor& workers)
        : z(elevations), tiles(grid), executor(workers), codes(z.rows(), z.columns()), numbers(z.rows(), z.columns()) {}

    const Raster<Z>& z;
    const TileGrid& tiles;
    const Executor& executor;
    Raster<FlowCode> codes;
    CellNumbers numbers;

    [[nodiscard]] PatchShape shape(Tile tile) const { return {tiles.window(tile), tiles.columns()}; }

    void load_elevations(Desk<Z>& desk, Tile tile) const {
        desk.z.load(z, shape(tile), std::numeric_limits<Z>::quiet_NaN());
    }
    void load_codes(Desk<Z>& desk, Tile tile) const { desk.codes.load(codes, shape(tile), flow_void); }
    /// Stores the codes of a tile but those of its rim, which are returned.
    [[nodiscard]] std::vector<FlowCode> store_inner_codes(const Patch<FlowCode>& patch) {
        const PatchShape& shape = patch.shape();
        for (std::int64_t row = 1; row < shape.rows() - 1; ++row) {
            const std::int64_t columns = std::max<std::int64_t>(0, shape.columns() - 2);
            std::copy_n(patch.at(row, 1), columns,
                        codes.row(shape.window().row + row).begin() + shape.window().column + 1);
        }
        std::vector<FlowCode> rim;
        shape.for_each_rim([&](Position p) { rim.push_back(patch[p]); });
        return rim;
    }
    void store_rim_codes(Tile tile, std::span<const FlowCode> rim) {
        const PatchShape of_tile = shape(tile);
        std::size_t place = 0;
        of_tile.for_each_rim([&](Position p) { codes[of_tile.cell(p)] = rim[place++]; });
    }

    /// Calls `work(tile, desk)` for the tiles in `some` and returns what it gives, in their order.
    template <class Result, class Work>
    std::vector<Result> for_tiles(std::span<const Tile> some, const Work& work) {
        std::vector<Result> results(some.size());
        executor.for_each(some.size(), [&](std::size_t i) {
            results[i] = desks_.lend([&](Desk<Z>& desk) { return work(some[i], desk); });
        });
        return results;
    }
    /// Calls `work(tile, desk)` for every tile.
    template <class Result, class Work>
    std::vector<Result> for_all_tiles(const Work& work) {
        std::vector<Result> results(tiles.count());
        executor.for_each(tiles.count(), [&](std::size_t i) {
            results[i] = desks_.lend([&](Desk<Z>& desk) { return work(static_cast<Tile>(i), desk); });
        });
        return results;
    }

private:
    Desks<Z> desks_;
};

/// The letters for each tile. A letter is about one cell of the tile it is for.
template <class Letter>
using Mail = std::vector<std::vector<Letter>>;

/// Sorts letters by the tiles they are for; returns these tiles.
template <class Letter>
std::vector<Tile> deliver(const TileGrid& tiles, const Mail<Letter>& sent, Mail<Letter>& mail) {
    std::vector<Tile> receivers;
    for (const auto& letters : sent) {
        for (const Letter& letter : letters) {
            const Tile tile = tiles.tile_of({letter.cell / tiles.columns(), letter.cell % tiles.columns()});
            if (mail[tile].empty()) receivers.push_back(tile);
            mail[tile].push_back(letter);
        }
    }
    return receivers;
}

/// Lets tiles answer their letters, by `work(tile, letters, desk)`, which returns the letters they send, until none is
/// under way.
template <class Z, class Letter, class Work>
void exchange_until_quiet(TiledTerrain<Z>& terrain, Mail<Letter> sent, const Work& work) {
    Mail<Letter> mail(terrain.tiles.count());
    for (;;) {
        const std::vector<Tile> receivers = deliver(terrain.tiles, sent, mail);
        if (receivers.empty()) return;
        sent = terrain.template for_tiles<std::vector<Letter>>(
            receivers, [&](Tile tile, Desk<Z>& desk) { return work(tile, std::span<const Letter>(mail[tile]), desk); });
        for (const Tile tile : receivers) mail[tile].clear();
    }
}

}  // namespace rillclock
