#include "rillclock/travel/tiled_travel.hpp"

#include <algorithm>
#include <array>
#include <mutex>
#include <utility>

#include "ground_kind.hpp"
#include "tile_slopes.hpp"

namespace rillclock {

namespace {

constexpr FixedTime not_timed = -1;   // times are not negative

/// Calls `look(local, cell, row of the raster)` for all cells of a tile, voids too, row by row.
template <class Look>
void for_each_cell(const TileFlow& flow, Look look) {
    const Window& window = flow.window();
    Local local = 0;
    for (std::int64_t r = 0; r < window.rows; ++r) {
        Cell cell = flow.cell(local);
        for (std::int64_t c = 0; c < window.columns; ++c) look(local++, cell++, window.row + r);
    }
}

}  // namespace

/// What reaches the cells that other tiles' water passes of their own tile's water.
struct TiledTravel::OwnOfPassed {
    PassedValues<FixedArea> area;
    PassedValues<FixedLength> from_divide;
    PassedValues<FixedLength> sheet_index;

    explicit OwnOfPassed(const TiledForest& forest) : area(forest), from_divide(forest), sheet_index(forest) {}
    [[nodiscard]] bool is_kept(Tile tile) const { return area.is_kept(tile); }
    [[nodiscard]] std::size_t bytes() const { return area.bytes() + from_divide.bytes() + sheet_index.bytes(); }
    void clear() {
        area.clear();
        from_divide.clear();
        sheet_index.clear();
    }
};

TiledTravel::TiledTravel(const TiledGround& ground, const TravelRules& rules, const Executor& executor)
    : in_(ground), rules_(rules), executor_(executor), area_(ground.forest), from_divide_(ground.forest),
      sheet_index_(ground.forest), flow_distance_(ground.forest), spill_border_(ground.forest), storm_(ground.forest),
      fixed_(ground.forest), spill_(ground.elevations, ground.forest.tiles()),
      kind_(ground.elevations.rows(), ground.elevations.columns()),
      slope_(ground.elevations.rows(), ground.elevations.columns()) {
    OwnOfPassed own(ground.forest);
    find_areas(own);
    find_kinds();
    // Memory is judged as if every cell had a spill elevation of its own; what they leave of it is used here.
    if (own.bytes() > (static_cast<std::size_t>(kind_.size()) - spill_.count_below()) * spill_.value_bytes()) own.clear();
    find_slopes(own);
    find_times(&own);
}

void TiledTravel::find_areas(OwnOfPassed& own) {
    for_each_tile(in_.forest, executor_, desks_, [&](Tile tile, TileDesk& desk) {
        read_lengths(desk);
        collect_down(tile, desk.flow, area_.part(area_channel(desk.flow), desk.area, own.area.of(tile)),
                     from_divide_.part(divide_channel(desk), desk.from_divide, own.from_divide.of(tile)));
        desk.elevation.resize(desk.flow.size());
        for (const auto& passed : desk.flow.passage().cells()) desk.elevation[passed.cell] = in_.elevations[desk.flow.cell(passed.cell)];
        collect_up(tile, desk.flow, flow_distance_.part(distance_channel(desk), desk.flow_distance),
                   spill_border_.part(spill_channel(desk), desk.spill));
    });
    area_.solve<decltype(area_channel(std::declval<TileFlow&>()))>();
    from_divide_.solve<decltype(divide_channel(std::declval<TileDesk&>()))>();
    flow_distance_.solve<decltype(distance_channel(std::declval<TileDesk&>()))>();
    spill_border_.solve<decltype(spill_channel(std::declval<TileDesk&>()))>();
}

void TiledTravel::find_kinds() {
    std::mutex roots_mutex;
    for_each_tile(in_.forest, executor_, desks_, [&](Tile tile, TileDesk& desk) {
        read_elevations(desk);
        fill_up(tile, desk.flow, spill_border_.part(spill_channel(desk), desk.spill));
        for (Local local = 0; local < desk.flow.size(); ++local) {
            if (desk.flow.code(local) == flow_void) desk.spill[local] = desk.elevation[local];
        }
        spill_.write(tile, desk.elevation, desk.spill);

        fill_down(tile, desk.flow, area_.part(area_channel(desk.flow), desk.area));
        std::vector<RootArea> roots;
        for_each_cell(desk.flow, [&](Local local, Cell cell, std::int64_t row) {
            kind_[cell] = kind_of(in_.surface.at(cell), rules_.channel, desk.area[local], in_.ground.cell_area(row));
            if (desk.flow.code(local) == flow_root) roots.push_back({cell, desk.area[local]});
        });
        const std::lock_guard lock(roots_mutex);
        roots_.insert(roots_.end(), roots.begin(), roots.end());
    });
    for (const Cell cell : in_.mapped_channels) kind_[cell] = GroundKind::channel;
    std::sort(roots_.begin(), roots_.end(), [](const RootArea& a, const RootArea& b) { return a.cell < b.cell; });
}

void TiledTravel::find_slopes(OwnOfPassed& own) {
    const SlopeGround ground{.in = in_, .spill = spill_, .rules = rules_.slope};
    for_each_tile(in_.forest, executor_, desks_, [&](Tile tile, TileDesk& desk) {
        read_lengths(desk);
        fill_up(tile, desk.flow, flow_distance_.part(distance_channel(desk), desk.flow_distance));
        read_elevations(desk);
        read_spill(tile, desk);
        find_tile_slopes(ground, desk, kind_, slope_);
        read_index_steps(desk);
        collect_down(tile, desk.flow, sheet_index_.part(index_channel(desk), desk.sheet_index, own.sheet_index.of(tile)));
    });
    sheet_index_.solve<decltype(index_channel(std::declval<TileDesk&>()))>();
}

void TiledTravel::find_times(OwnOfPassed* own) {
    executor_.for_each(in_.forest.tiles().count(), [&](std::size_t number) {
        const auto tile = static_cast<Tile>(number);
        if (in_.forest.passed_count(tile) == 0) return;
        const auto desk = desks_.lease();
        const TilePassage& passage = desk->passage;
        desk->passage.read(in_.forest.codes(), in_.forest.tiles().window(tile));
        if (own != nullptr && own->is_kept(tile)) {
            read_passed_ground(tile, *desk, *own);
        } else {
            desk->flow.read(in_.forest.codes(), in_.forest.tiles().window(tile));
            read_step_ground(tile, *desk);
        }
        desk->step.resize(passage.frame().size());
        for (const auto& passed : passage.cells()) {
            desk->step[passed.cell] = step_outcome(step_view(*desk, passed.cell, passage.frame().cell(passed.cell)), rules_).time;
        }
        collect_up(tile, passage, storm_.part(storm_channel(*desk), desk->storm), fixed_.part(fixed_channel(*desk), desk->fixed));
    });
    storm_.solve<decltype(storm_channel(std::declval<TileDesk&>()))>();
    fixed_.solve<decltype(fixed_channel(std::declval<TileDesk&>()))>();
}

void TiledTravel::time_again(const ChannelReaches& reaches) {
    in_.reaches = &reaches;
    find_times(nullptr);
}

void TiledTravel::read_elevations(TileDesk& desk) const {
    desk.elevation.resize(desk.flow.size());
    in_.elevations.read(desk.flow.window(), desk.elevation);
}

/// Of a tile whose elevations were read.
void TiledTravel::read_spill(Tile tile, TileDesk& desk) const {
    desk.spill.resize(desk.flow.size());
    spill_.read(tile, desk.elevation, desk.spill);
}

void TiledTravel::read_lengths(TileDesk& desk) const {
    desk.length.resize(desk.flow.size());
    const Window& window = desk.flow.window();
    Local local = 0;
    for (std::int64_t r = 0; r < window.rows; ++r) {
        std::array<FixedLength, 256> by_code{};  // 0 for roots and voids
        for (const Direction d : all_directions) by_code[flow_code(d)] = in_.ground.length(window.row + r, d);
        for (std::int64_t c = 0; c < window.columns; ++c, ++local) desk.length[local] = by_code[desk.flow.code(local)];
    }
}

void TiledTravel::read_index_steps(TileDesk& desk) const {
    desk.index_step.resize(desk.flow.size());
    for_each_cell(desk.flow, [&](Local local, Cell cell, std::int64_t) {
        desk.index_step[local] = sheet_index_step(index_view(desk, local, cell));
    });
}

/// All that steps are timed from.
void TiledTravel::read_step_ground(Tile tile, TileDesk& desk) const {
    read_elevations(desk);
    read_lengths(desk);
    read_index_steps(desk);
    read_spill(tile, desk);
    fill_down(tile, desk.flow, area_.part(area_channel(desk.flow), desk.area),
              from_divide_.part(divide_channel(desk), desk.from_divide), sheet_index_.part(index_channel(desk), desk.sheet_index));
}

/// The same at the passed cells alone, from what was kept of the tile's own water.
void TiledTravel::read_passed_ground(Tile tile, TileDesk& desk, OwnOfPassed& own) {
    const TilePassage& passage = desk.passage;
    const std::size_t size = passage.frame().size();
    desk.elevation.resize(size);
    desk.spill.resize(size);
    desk.length.resize(size);
    desk.index_step.resize(size);
    for (const auto& passed : passage.cells()) {
        const Cell cell = passage.frame().cell(passed.cell);
        const FlowCode code = in_.forest.codes()[cell];
        desk.elevation[passed.cell] = in_.elevations[cell];
        desk.spill[passed.cell] = spill_[cell];
        desk.length[passed.cell] = is_direction(code) ? in_.ground.length(passage.frame().row(passed.cell), static_cast<Direction>(code)) : 0;
        desk.index_step[passed.cell] = sheet_index_step(index_view(desk, passed.cell, cell));
    }
    fill_passed_down(tile, passage, area_.part(area_channel(desk.flow), desk.area, own.area.of(tile)),
                     from_divide_.part(divide_channel(desk), desk.from_divide, own.from_divide.of(tile)),
                     sheet_index_.part(index_channel(desk), desk.sheet_index, own.sheet_index.of(tile)));
}

void TiledTravel::read_steps(Tile tile, TileDesk& desk) const {
    read_step_ground(tile, desk);
    desk.step.resize(desk.flow.size());
    desk.regime.resize(desk.flow.size());
    desk.sheet_time.assign(desk.flow.size(), SharedSheet::unknown);
    for_each_cell(desk.flow, [&](Local local, Cell cell, std::int64_t) {
        const StepOutcome outcome = desk.flow.code(local) == flow_void ? StepOutcome{} : outcome_with_shared(desk, local, cell);
        desk.step[local] = outcome.time;
        desk.regime[local] = outcome.regime;
    });
}

StepOutcome TiledTravel::outcome_with_shared(TileDesk& desk, Local local, Cell cell) const {
    const Local below = desk.flow.down(local) < ends_here ? desk.flow.down(local) : local;   // itself has another index than its step ends with
    const SharedSheet shared(desk.index_step[local], desk.sheet_time[local], desk.sheet_time[below], desk.sheet_index[below]);
    return step_outcome(step_view(desk, local, cell), rules_, shared);
}

void TiledTravel::read_areas(Tile tile, TileDesk& desk) const {
    desk.flow.read(in_.forest.codes(), in_.forest.tiles().window(tile));
    fill_down(tile, desk.flow, area_.part(area_channel(desk.flow), desk.area));
}

void TiledTravel::read_tile(Tile tile, TileDesk& desk) const {
    desk.flow.read(in_.forest.codes(), in_.forest.tiles().window(tile));
    read_steps(tile, desk);
    fill_up(tile, desk.flow, flow_distance_.part(distance_channel(desk), desk.flow_distance),
            storm_.part(storm_channel(desk), desk.storm), fixed_.part(fixed_channel(desk), desk.fixed));
}

void TiledTravel::read_ways(Tile tile, TileDesk& desk, std::span<const Cell> cells) const {
    desk.flow.read(in_.forest.codes(), in_.forest.tiles().window(tile));
    read_step_ground(tile, desk);
    fill_up(tile, desk.flow, flow_distance_.part(distance_channel(desk), desk.flow_distance));
    desk.storm.assign(desk.flow.size(), 0);
    desk.fixed.assign(desk.flow.size(), not_timed);
    std::vector<Local> way;
    for (const Cell cell : cells) {
        way.clear();
        Local at = desk.flow.local(cell);
        for (; at < ends_here && desk.fixed[at] == not_timed; at = desk.flow.down(at)) way.push_back(at);
        if (!way.empty()) time_way(tile, desk, way);
    }
}

/// Times the cells of a way, each before the one it drains to, below which all times are known.
void TiledTravel::time_way(Tile tile, TileDesk& desk, std::span<const Local> way) const {
    const Local below = desk.flow.down(way.back());
    StepTime time;
    if (below < ends_here) time = desk.time_to_root(below);
    if (below == leaves_tile) {
        const auto exits = desk.flow.exits();
        const auto place = std::lower_bound(exits.begin(), exits.end(), way.back()) - exits.begin();
        const Exit exit = in_.forest.first_exit(tile) + static_cast<Exit>(place);
        time = {.fixed = fixed_.below(exit), .storm = storm_.below(exit)};
    }
    for (std::size_t i = way.size(); i-- > 0;) {
        const Local cell = way[i];
        if (desk.flow.down(cell) != ends_here) time += step_outcome(step_view(desk, cell), rules_).time;
        desk.fixed[cell] = time.fixed;
        desk.storm[cell] = time.storm;
    }
}

/// As much of a step as its share of the sheet index asks for.
StepView TiledTravel::index_view(const TileDesk& desk, Local local, Cell cell) const {
    return {.length = desk.length[local], .slope = static_cast<double>(slope_[cell]), .surface = &in_.surface.at(cell), .kind = kind_[cell]};
}

StepView TiledTravel::step_view(const TileDesk& desk, Local local, Cell cell) const {
    StepView step = index_view(desk, local, cell);
    step.ponded_m = (desk.spill[local] - desk.elevation[local]) * in_.metres_per_elevation_unit;
    step.area = desk.area[local];
    step.from_divide = desk.from_divide[local];
    step.sheet_index = desk.sheet_index[local];
    step.reach = in_.reaches ? reach_at(*in_.reaches, cell) : nullptr;
    return step;
}

TiledOwners::TiledOwners(const TiledForest& forest, std::vector<CellLabel> labels, const Executor& executor)
    : forest_(forest), labels_(std::move(labels)), owner_(forest) {
    const auto tile_of = [&](const CellLabel& label) {
        return forest.tiles().tile_of({label.cell / forest.codes().columns(), label.cell % forest.codes().columns()});
    };
    std::sort(labels_.begin(), labels_.end(), [&](const CellLabel& a, const CellLabel& b) {
        return std::pair(tile_of(a), a.cell) < std::pair(tile_of(b), b.cell);
    });
    first_of_tile_.assign(forest.tiles().count() + 1U, 0);
    for (const CellLabel& label : labels_) ++first_of_tile_[tile_of(label) + 1U];
    for (std::size_t tile = 1; tile < first_of_tile_.size(); ++tile) first_of_tile_[tile] += first_of_tile_[tile - 1];

    Workspaces<TileDesk> desks;
    const auto channel = [](const TileDesk& desk) { return up::First{[&desk](Local cell) { return desk.label[cell]; }}; };
    executor.for_each(forest.tiles().count(), [&](std::size_t number) {
        const auto tile = static_cast<Tile>(number);
        if (first_of_tile_[tile] == first_of_tile_[tile + 1U]) return;   // no path finds a label here
        const auto desk = desks.lease();
        desk->passage.read(forest.codes(), forest.tiles().window(tile));
        put_labels(tile, desk->passage.frame(), *desk);
        collect_up(tile, desk->passage, owner_.part(channel(*desk), desk->owner));
    });
    owner_.solve<decltype(channel(std::declval<TileDesk&>()))>();
}

std::uint32_t TiledOwners::owner_of(Cell cell) const {
    const Raster<FlowCode>& codes = forest_.codes();
    const auto tile_of = [&](Cell at) { return forest_.tiles().tile_of({at / codes.columns(), at % codes.columns()}); };
    const Tile tile = tile_of(cell);
    const auto begin = labels_.begin() + static_cast<std::ptrdiff_t>(first_of_tile_[tile]);
    const auto end = labels_.begin() + static_cast<std::ptrdiff_t>(first_of_tile_[tile + 1U]);
    while (true) {
        const auto label = std::lower_bound(begin, end, cell, [](const CellLabel& a, Cell at) { return a.cell < at; });
        if (label != end && label->cell == cell) return label->number;
        if (!is_direction(codes[cell])) return 0;
        const Cell below = neighbour(cell, static_cast<Direction>(codes[cell]), codes.columns());
        if (tile_of(below) != tile) return owner_.below(forest_.exit_of(cell));
        cell = below;
    }
}

void TiledOwners::put_labels(Tile tile, const TileFrame& frame, TileDesk& desk) const {
    desk.label.assign(frame.size(), 0);
    for (std::size_t i = first_of_tile_[tile]; i < first_of_tile_[tile + 1U]; ++i) {
        desk.label[frame.local(frame.row_column(labels_[i].cell))] = labels_[i].number;
    }
}

void TiledOwners::read_tile(Tile tile, TileDesk& desk) const {
    put_labels(tile, desk.flow.frame(), desk);
    fill_up(tile, desk.flow, owner_.part(up::First{[&desk](Local cell) { return desk.label[cell]; }}, desk.owner));
}

}  // namespace rillclock
