#include "rillclock/catchment/candidate_heads.hpp"

#include <algorithm>
#include <cmath>
#include <compare>
#include <map>
#include <mutex>
#include <unordered_map>

#include "scaled_steps.hpp"

namespace rillclock {
namespace {

/// Heads of a subarea that lie close together.
struct HeadBlock {
    std::uint32_t subarea = 0;
    std::int64_t number = 0;   ///< within its subarea
    [[nodiscard]] auto operator<=>(const HeadBlock&) const = default;
};

/// Heads of one block in one tile whose ways leave the tile by the same exit: which of them is the last hangs on the tile alone.
struct HeadGroup {
    std::uint32_t block = 0;   ///< place among the tile's blocks
    Exit exit = no_exit;       ///< none where the ways end in the tile
};

/// The last head of a group under a setting.
struct GroupLast {
    std::int32_t time = -1;   ///< to the exit, in units
    Local cell = 0;
};

/// What is kept of a tile until it is known how long the ways below its exits take.
struct TileHeads {
    std::vector<HeadBlock> blocks;
    std::vector<HeadGroup> groups;
    std::vector<GroupLast> last;   ///< by group, then by setting
};

/// A cell that nothing drains to.
struct HeadCell {
    Local cell = 0;
    std::uint32_t group = 0;   ///< place among the tile's groups
};

/// Room for one tile after another.
struct HeadDesk {
    TileDesk desk;
    ScaledTile steps;
    std::vector<Exit> exit;        ///< by cell: where its water leaves the tile
    std::vector<HeadCell> heads;
    std::vector<up::Lanes> time;   ///< to the exit or root under the settings of a group
};

/// A block's last cell to arrive under a setting.
struct BlockLast {
    std::int32_t time = -1;   ///< to the root, in units
    Cell cell = no_cell;
    std::int64_t block = 0;   ///< within its subarea
    [[nodiscard]] bool is_before(const BlockLast& other) const { return time != other.time ? time > other.time : cell < other.cell; }
};

/// The latest of many blocks. Which ones does not depend on the order in which they come, nor on whether a block comes in parts.
class LatestBlocks {
public:
    void add(const BlockLast& block) {
        const auto same = std::find_if(blocks_.begin(), blocks_.end(), [&](const BlockLast& kept) { return kept.block == block.block; });
        if (same != blocks_.end()) {
            if (!block.is_before(*same)) return;
            blocks_.erase(same);
        }
        if (blocks_.size() == most_blocks && !block.is_before(blocks_.back())) return;
        blocks_.insert(std::upper_bound(blocks_.begin(), blocks_.end(), block,
                                        [](const BlockLast& a, const BlockLast& b) { return a.is_before(b); }),
                       block);
        if (blocks_.size() > most_blocks) blocks_.pop_back();
    }
    [[nodiscard]] const std::vector<BlockLast>& blocks() const { return blocks_; }

private:
    static constexpr std::size_t most_blocks = 16;
    std::vector<BlockLast> blocks_;
};

constexpr double blocks_of_subarea = 256.0;            // about so many, whatever its size
constexpr std::size_t most_heads_of_subarea = 40;

/// Side of a subarea's blocks, in cells.
std::int64_t block_side(double cells) { return std::max<std::int64_t>(1, static_cast<std::int64_t>(std::sqrt(cells / blocks_of_subarea))); }

/// Heads of a subarea from the latest blocks of all settings, the latest of each setting first, then the second latest, as long as
/// there is room.
void take_heads(const std::vector<LatestBlocks>& by_setting, std::vector<Cell>& heads) {
    std::vector<Cell> taken;
    for (std::size_t rank = 0; taken.size() < most_heads_of_subarea; ++rank) {
        bool any = false;
        for (const LatestBlocks& latest : by_setting) {
            if (rank >= latest.blocks().size() || taken.size() == most_heads_of_subarea) continue;
            any = true;
            const Cell cell = latest.blocks()[rank].cell;
            if (std::find(taken.begin(), taken.end(), cell) == taken.end()) taken.push_back(cell);
        }
        if (!any) break;
    }
    heads.insert(heads.end(), taken.begin(), taken.end());
}

/// Where the water of each cell leaves the tile.
void find_exits(const TileFlow& flow, Exit first, std::vector<Exit>& exit) {
    exit.assign(flow.size(), no_exit);
    for (std::size_t i = 0; i < flow.exits().size(); ++i) exit[flow.exits()[i]] = first + static_cast<Exit>(i);
    const auto order = flow.order();
    for (std::size_t i = order.size(); i-- > 0;) {
        const Local below = flow.down(order[i]);
        if (below < ends_here) exit[order[i]] = exit[below];
    }
}

/// Step times of a tile under the settings of a group.
struct GroupTimes {
    const ScaledSteps& steps;
    const SettingGroup& group;
    const ScaledTile& tile;
    up::Lanes operator()(Local cell) const { return steps.times(group, tile, cell); }
};

using TimeChannel = up::AddLanes<GroupTimes>;

class Candidates {
public:
    Candidates(const TiledTravel& travel, const TiledOwners& owners, std::span<const FixedArea> own_areas,
               std::span<const TravelSetting> settings)
        : travel_(travel), owners_(owners), settings_(settings.size()), steps_(travel, settings),
          tiles_(travel.ground().forest.tiles().count()) {
        const Ground& ground = travel.ground().ground;
        const auto cell_area = static_cast<double>(ground.cell_area(travel.ground().forest.tiles().rows() / 2));
        for (const FixedArea area : own_areas) block_sides_.push_back(block_side(static_cast<double>(area) / cell_area));
        borders_.assign(steps_.groups().size(), UpBorders<up::Lanes>(travel.ground().forest));
    }

    std::vector<Cell> find() {
        const Executor& executor = travel_.executor();
        executor.for_each(tiles_.size(), [&](std::size_t tile) { time_tile(static_cast<Tile>(tile)); });
        executor.for_each(borders_.size(), [&](std::size_t i) { borders_[i].solve<TimeChannel>(); });
        executor.for_each(tiles_.size(), [&](std::size_t tile) { keep_latest(static_cast<Tile>(tile)); });
        return cells();
    }

private:
    /// The last head of each group of heads of a tile under each setting.
    void time_tile(Tile tile) {
        const auto at = desks_.lease();
        travel_.read_tile(tile, at->desk);
        owners_.read_tile(tile, at->desk);
        steps_.sort(at->desk, at->steps);
        list_heads(tile, *at);
        tiles_[tile].last.resize(tiles_[tile].groups.size() * settings_);
        for (std::size_t i = 0; i < borders_.size(); ++i) {
            const SettingGroup& group = steps_.groups()[i];
            collect_up_within(tile, at->desk.flow, borders_[i].part(TimeChannel{{steps_, group, at->steps}}, at->time));
            keep_last(group, *at, tiles_[tile]);
        }
    }

    /// Lists the cells that nothing drains to, each in a group.
    void list_heads(Tile tile, HeadDesk& at) {
        const TiledForest& forest = travel_.ground().forest;
        TileHeads& kept = tiles_[tile];
        find_exits(at.desk.flow, forest.first_exit(tile), at.exit);
        std::map<HeadBlock, std::uint32_t> block_place;
        std::unordered_map<std::uint64_t, std::uint32_t> group_place;
        at.heads.clear();
        const std::int64_t columns = forest.codes().columns();
        for (Local local = 0; local < at.desk.flow.size(); ++local) {
            const std::uint32_t owner = at.desk.owner[local];
            if (owner == 0 || at.desk.from_divide[local] > 0) continue;
            const std::int64_t side = block_sides_[owner - 1];
            const Cell cell = at.desk.flow.cell(local);
            const HeadBlock block{owner, cell / columns / side * columns + cell % columns / side};
            const auto [in_block, is_new_block] = block_place.emplace(block, static_cast<std::uint32_t>(kept.blocks.size()));
            if (is_new_block) kept.blocks.push_back(block);
            const std::uint64_t key = (std::uint64_t{in_block->second} << 32U) | at.exit[local];
            const auto [in_group, is_new_group] = group_place.emplace(key, static_cast<std::uint32_t>(kept.groups.size()));
            if (is_new_group) kept.groups.push_back({in_block->second, at.exit[local]});
            at.heads.push_back({local, in_group->second});
        }
    }

    void keep_last(const SettingGroup& group, const HeadDesk& at, TileHeads& kept) const {
        const std::size_t lanes = std::min(up::Lanes::count, settings_ - group.first);
        for (const HeadCell& head : at.heads) {
            const up::Lanes& time = at.time[head.cell];
            GroupLast* last = &kept.last[head.group * settings_ + group.first];
            for (std::size_t lane = 0; lane < lanes; ++lane) {
                if (time.total[lane] > last[lane].time) last[lane] = {time.total[lane], head.cell};
            }
        }
    }

    /// The last head of each block of a tile under each setting, the ways below the tile included.
    [[nodiscard]] std::vector<BlockLast> last_of_blocks(Tile tile) const {
        const TileHeads& heads = tiles_[tile];
        const Window window = travel_.ground().forest.tiles().window(tile);
        const std::int64_t columns = travel_.ground().forest.codes().columns();
        std::vector<BlockLast> last(heads.blocks.size() * settings_);
        for (std::size_t i = 0; i < heads.groups.size(); ++i) {
            const HeadGroup& group = heads.groups[i];
            for (std::size_t setting = 0; setting < settings_; ++setting) {
                const GroupLast& head = heads.last[i * settings_ + setting];
                const std::int64_t row = window.row + head.cell / window.columns;
                const BlockLast arrival{.time = std::min(head.time + below(group.exit, setting), up::Lanes::most),
                                        .cell = static_cast<Cell>(row * columns + window.column + head.cell % window.columns),
                                        .block = heads.blocks[group.block].number};
                BlockLast& kept = last[group.block * settings_ + setting];
                if (arrival.is_before(kept)) kept = arrival;
            }
        }
        return last;
    }

    /// How long the way below an exit takes under a setting.
    [[nodiscard]] std::int32_t below(Exit exit, std::size_t setting) const {
        if (exit == no_exit) return 0;
        return borders_[setting / up::Lanes::count].below(exit).total[setting % up::Lanes::count];
    }

    void keep_latest(Tile tile) {
        const std::vector<BlockLast> last = last_of_blocks(tile);
        const std::lock_guard lock(mutex_);
        for (std::size_t block = 0; block < tiles_[tile].blocks.size(); ++block) {
            std::vector<LatestBlocks>& latest = latest_[tiles_[tile].blocks[block].subarea];
            latest.resize(settings_);
            for (std::size_t setting = 0; setting < settings_; ++setting) latest[setting].add(last[block * settings_ + setting]);
        }
    }

    [[nodiscard]] std::vector<Cell> cells() const {
        std::vector<Cell> cells;
        for (const auto& [owner, latest] : latest_) take_heads(latest, cells);
        std::sort(cells.begin(), cells.end());
        return cells;
    }

    const TiledTravel& travel_;
    const TiledOwners& owners_;
    std::size_t settings_;
    ScaledSteps steps_;
    std::vector<std::int64_t> block_sides_;       ///< by subarea's number − 1
    std::vector<UpBorders<up::Lanes>> borders_;   ///< by group of settings
    std::vector<TileHeads> tiles_;
    Workspaces<HeadDesk> desks_;
    std::mutex mutex_;
    std::map<std::uint32_t, std::vector<LatestBlocks>> latest_;   ///< by subarea, then by setting
};

}  // namespace

std::vector<Cell> candidate_heads(const TiledTravel& travel, const TiledOwners& owners, std::span<const FixedArea> own_areas,
                                  std::span<const TravelSetting> settings) {
    return Candidates(travel, owners, own_areas, settings).find();
}

}  // namespace rillclock
