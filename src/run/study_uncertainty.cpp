#include "study_uncertainty.hpp"

#include "rillclock/catchment/candidate_heads.hpp"
#include "rillclock/catchment/head_paths.hpp"

namespace rillclock {
namespace {

/// A few of the settings to come, by which kept heads are told from those that never arrive last.
constexpr int sorting_draws = 40;

/// Paths from heads that some setting may make the last: those found by searching, and all that the study itself named.
HeadPaths paths_to_keep(const UncertaintyParts& parts, const std::vector<UncertainInput>& inputs, const TravelSetting& base,
                        const Progress& progress) {
    const int seed = parts.study.uncertainty->seed;
    std::vector<TravelSetting> settings = searching_settings(inputs, base, seed);
    std::vector<FixedArea> own_areas;
    for (const PointHeads& point : parts.heads) own_areas.push_back(point.own_area);
    std::vector<Cell> heads = candidate_heads(parts.travel, parts.owners, own_areas, settings);
    for (const PointHeads& point : parts.heads) {
        heads.push_back(point.last.cell);
        heads.push_back(point.farthest);
        for (const PointStorm& storm : point.storms) heads.push_back(storm.governing.cell);
    }
    HeadPaths paths(parts.travel, heads, parts.points, bounds_of(inputs, base));
    for (const std::vector<double>& values : drawn_values(inputs, sorting_draws, seed)) {
        settings.push_back(setting_of(inputs, values, base));
    }
    paths.keep(heads_that_may_be_last(paths, settings, parts.travel.executor(), progress));
    return paths;
}

std::optional<DrawnStorms> storms_of(const UncertaintyParts& parts) {
    if (!parts.study.timing.is_kinematic()) return std::nullopt;
    const RainCurve& rain = parts.rain.raster_storm().rain;
    return DrawnStorms{.rain = [&rain](Duration duration) { return rain.within(duration); },
                       .last = parts.rain.source->echo.range.last,
                       .duration = parts.study.timing.storm.value_or(StormDuration::whole_path),
                       .search = {.start = parts.rain.first_assumed()}};
}

}  // namespace

std::vector<bool> classes_met(const CoverBook& book, const std::vector<ClassCount>& counts) {
    std::vector<bool> met(book.classes().size(), false);
    for (const ClassCount& count : counts) {
        const CoverClass* known = book.find(count.code);
        if (known != nullptr && count.cells > 0) met[static_cast<std::size_t>(known - book.classes().data())] = true;
    }
    return met;
}

std::optional<Uncertainty> uncertainty_of_study(const UncertaintyParts& parts, const Progress& progress) {
    if (!parts.study.uncertainty) return std::nullopt;
    const TravelSetting base{.rules = parts.travel.rules(), .classes = parts.travel.ground().surface.classes};
    std::vector<UncertainInput> inputs =
        uncertain_inputs(parts.study, parts.surface.book, classes_met(parts.surface.book, parts.surface.classes));
    const HeadPaths paths = paths_to_keep(parts, inputs, base, progress);
    const UncertaintyGround ground{.paths = paths, .tree = parts.tree, .base = base, .storms = storms_of(parts)};
    return uncertainty_of(ground, std::move(inputs), parts.study.uncertainty->draws, parts.study.uncertainty->seed,
                          parts.travel.executor(), progress);
}

Notices notices_of_ranges(const Study& study, const SurfaceData& surface) {
    if (!study.uncertainty) return {};
    const std::vector<bool> met = classes_met(surface.book, surface.classes);
    std::string names;
    for (std::size_t i = 0; i < met.size(); ++i) {
        const CoverClass& cover = surface.book.classes()[i];
        if (met[i] && !cover.is_open_water() && !(cover.n_low < cover.n_high)) names += (names.empty() ? "" : ", ") + cover.name;
    }
    if (names.empty()) return {};
    return {{.code = "roughness-without-range",
             .text = "the cover book gives no range (n_low, n_high) for " + names +
                     ", whose roughness is therefore drawn as if it were known"}};
}

}  // namespace rillclock
