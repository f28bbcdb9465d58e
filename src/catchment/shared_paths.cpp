#include "shared_paths.hpp"

#include <limits>
#include <mutex>

#include "cells_by_tile.hpp"
#include "rillclock/catchment/tiled_cells.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

constexpr std::uint32_t unknown = std::numeric_limits<std::uint32_t>::max();

}  // namespace

SharedPaths::SharedPaths(const TiledTravel& travel, std::span<const PathEnds> paths) {
    for (const PathEnds& path : paths) walk(travel.ground().forest.codes(), path);
    look_up(travel);
}

std::uint32_t SharedPaths::place_of(Cell cell) {
    const auto [at, is_new] = place_.try_emplace(cell, static_cast<std::uint32_t>(walked_.size()));
    if (is_new) {
        walked_.push_back(cell);
        below_.push_back(unknown);
        run_of_.push_back(static_cast<std::uint32_t>(run_ends_.size()));
        run_ends_.push_back(at->second);
    }
    return at->second;
}

/// Goes on to the next cell down, where no path went before.
std::uint32_t SharedPaths::step(const Raster<FlowCode>& codes, std::uint32_t at) {
    const FlowCode code = codes[walked_[at]];
    if (!is_direction(code)) throw bug("a flow path misses the point it was asked for");
    const std::size_t before = walked_.size();
    const std::uint32_t next = place_of(neighbour(walked_[at], static_cast<Direction>(code), codes.columns()));
    below_[at] = next;
    if (next == before && at + 1 == next) {   // the last run goes on
        run_ends_.pop_back();
        run_of_[next] = run_of_[at];
        run_ends_.back() = next;
    }
    return next;
}

/// What has been walked before is not walked again: it is passed a run at a time.
void SharedPaths::walk(const Raster<FlowCode>& codes, const PathEnds& path) {
    std::uint32_t at = place_of(path.head);
    while (walked_[at] != path.end) {
        if (below_[at] == unknown) {
            at = step(codes, at);
            continue;
        }
        const std::uint32_t run = run_of_[at];
        const auto end = place_.find(path.end);
        if (end != place_.end() && run_of_[end->second] == run && end->second >= at) return;
        at = at == run_ends_[run] ? below_[at] : run_ends_[run];
    }
}

void SharedPaths::look_up(const TiledTravel& travel) {
    const TiledForest& forest = travel.ground().forest;
    const PathGround ground{.classes = travel.ground().surface.classes,
                            .metres_per_elevation_unit = travel.ground().metres_per_elevation_unit,
                            .rules = travel.rules()};
    const CellsByTile by_tile(forest, walked_);
    cells_.resize(walked_.size());
    first_pieces_.resize(walked_.size());
    std::mutex mutex;
    travel.executor().for_each(by_tile.size(), [&](std::size_t i) {
        const auto desk = travel.desks().lease();
        travel.read_ways(by_tile.tile(i), *desk, by_tile.cells(i));
        std::vector<PathPiece> pieces;
        for (const std::uint32_t at : by_tile.positions(i)) {
            cells_[at] = path_cell(travel, *desk, desk->flow.local(walked_[at]), walked_[at]);
            if (below_[at] == unknown) continue;
            pieces.clear();
            add_pieces(ground, cells_[at], 0, pieces);
            first_pieces_[at] = pieces.front();
            if (pieces.size() == 1) continue;
            const std::lock_guard lock(mutex);
            second_pieces_.emplace(at, pieces.back());
        }
    });
}

void SharedPaths::lay(const PathEnds& path, LaidPath& laid) const {
    laid.cells.clear();
    laid.pieces.clear();
    std::uint32_t at = place_.at(path.head);
    for (; walked_[at] != path.end; at = below_[at]) {
        const std::size_t position = laid.cells.size();
        laid.cells.push_back(cells_[at]);
        laid.pieces.push_back(first_pieces_[at]);
        laid.pieces.back().position = position;
        if (first_pieces_[at].part.regime != Regime::sheet) continue;
        const auto second = second_pieces_.find(at);
        if (second == second_pieces_.end()) continue;
        laid.pieces.push_back(second->second);
        laid.pieces.back().position = position;
    }
    laid.cells.push_back(cells_[at]);
}

}  // namespace rillclock
