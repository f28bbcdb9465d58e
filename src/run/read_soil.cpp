#include "read_soil.hpp"

#include <map>

#include "read_classes.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

std::map<int, SoilGroup> groups_of(const Study& study) {
    if (!study.surface.soil.classes.empty()) return study.surface.soil.classes;
    return {{1, SoilGroup::a}, {2, SoilGroup::b}, {3, SoilGroup::c}, {4, SoilGroup::d}};
}

/// Turns values of the raster into soil groups while counting those that stand for none.
class SoilReading {
public:
    explicit SoilReading(const Study& study)
        : study_(study), groups_(groups_of(study)), fallback_(study.surface.soil.fallback_group) {}

    CellSoil soil(std::int32_t value) {
        // Soils come in patches: most cells have the value of the cell before.
        if (value != last_value_ || last_count_ == nullptr) {
            last_value_ = value;
            last_count_ = &counts_[value];
            const auto known = groups_.find(value);
            last_soil_ = known != groups_.end() ? cell_soil(known->second) : for_unknown();
        }
        ++*last_count_;
        return last_soil_;
    }

    [[nodiscard]] Notices notices() const {
        const std::string unknown = unknown_values();
        if (unknown.empty()) return {};
        if (!fallback_ && !any_known())
            throw input_error(subject() + " gives no cell a soil group, but: " + unknown +
                              "; say what its values mean, such as soil_classes = { 1 = \"A\", 2 = \"B\" } under "
                              "[surface]");
        if (fallback_)
            return {{.code = "soil-unknown",
                     .text = "the soil group " + letter_of(cell_soil(*fallback_)) + " was taken for what " + subject() +
                             " does not know: " + unknown}};
        return {{.code = "soil-unknown",
                 .text = subject() + " has no soil group for " + unknown +
                         "; catchments with such cells have no curve number; name the groups in soil_classes, or one "
                         "for them all in fallback_soil_group"}};
    }

    [[nodiscard]] std::vector<SoilCount> counts() const {
        std::map<CellSoil, std::int64_t> by_soil;
        for (const auto& [value, cells] : counts_) {
            const auto known = groups_.find(value);
            by_soil[known != groups_.end() ? cell_soil(known->second) : for_unknown()] += cells;
        }
        std::vector<SoilCount> counts;
        for (const auto& [soil, cells] : by_soil) counts.push_back({.soil = soil, .cells = cells});
        return counts;
    }

private:
    [[nodiscard]] CellSoil for_unknown() const { return fallback_ ? cell_soil(*fallback_) : CellSoil::unknown; }
    [[nodiscard]] std::string subject() const { return "the soil raster '" + *study_.surface.soil.file + "'"; }

    [[nodiscard]] bool any_known() const {
        for (const auto& [value, cells] : counts_)
            if (groups_.contains(value)) return true;
        return false;
    }

    /// "value 13 (3 cells), no value (12 cells)"; empty where all are known.
    [[nodiscard]] std::string unknown_values() const {
        std::string list;
        for (const auto& [value, cells] : counts_) {
            if (groups_.contains(value)) continue;
            const std::string name = value == no_class ? "no value" : "value " + std::to_string(value);
            list += (list.empty() ? "" : ", ") + name + " (" + std::to_string(cells) + (cells == 1 ? " cell)" : " cells)");
        }
        return list;
    }

    const Study& study_;
    std::map<int, SoilGroup> groups_;
    std::optional<SoilGroup> fallback_;
    std::map<std::int32_t, std::int64_t> counts_;
    std::int32_t last_value_ = 0;
    std::int64_t* last_count_ = nullptr;
    CellSoil last_soil_ = CellSoil::unknown;
};

}  // namespace

CoverFile open_soil(const Study& study, const Grid& target, const ReferenceSystem& system) {
    const CoverOptions options{.band = study.surface.soil.band, .role = "soil", .band_key = "soil_band"};
    return open_cover(located(study, *study.surface.soil.file), options, target, system);
}

void read_soil(const Study& study, const TerrainData& terrain, SurfaceData& surface, const Progress& progress) {
    if (study.surface.soil_group) surface.table.soil_everywhere = cell_soil(*study.surface.soil_group);
    if (!study.surface.soil.file) return;
    const CoverFile file = open_soil(study, terrain.grid, terrain.system);
    SoilReading reading(study);
    surface.table.soil = Raster<CellSoil>(terrain.grid.rows, terrain.grid.columns);
    for_each_class(*file.source, progress, "reading soils", [&](Cell cell, std::int32_t value) {
        if (!std::isnan(terrain.elevations[cell])) surface.table.soil[cell] = reading.soil(value);
    });
    surface.soils = reading.counts();
    surface.notices.insert(surface.notices.end(), file.notices.begin(), file.notices.end());
    const Notices unknown = reading.notices();
    surface.notices.insert(surface.notices.end(), unknown.begin(), unknown.end());
}

}  // namespace rillclock
