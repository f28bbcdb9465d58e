#include "last_pass.hpp"

#include <algorithm>
#include <future>
#include <numeric>

#include "rillclock/catchment/arrival_tally.hpp"
#include "rillclock/catchment/tiled_cells.hpp"
#include "rillclock/deliver/raster_strips.hpp"
#include "rillclock/travel/isochrone_step.hpp"
#include "study_storms.hpp"

namespace rillclock {
namespace {

/// The times from points to the root that rasters refer to: of the last points, and of all where there are isochrones of each. The others are
/// noted on the way, since to make their tiles would cost as much as to make all.
std::vector<StepTime> times_for_rasters(const LastPass& pass) {
    std::vector<PointNumber> wanted = pass.tree.last_points();
    if (pass.study.output.isochrones.are_asked()) std::iota(wanted.begin(), wanted.end(), PointNumber{0});
    std::vector<Cell> cells;
    for (const PointNumber number : wanted) {
        if (number != 0) cells.push_back(pass.points[number - 1].cell);
    }
    const auto found = path_cells_at(pass.travel, cells);
    std::vector<StepTime> times(pass.points.size());
    for (const PointNumber number : wanted) {
        if (number != 0) times[number - 1] = found.at(pass.points[number - 1].cell).time_to_root;
    }
    return times;
}

/// Notes the times of the points that lie in the tile on the desk.
void note_times(const LastPass& pass, const TileDesk& desk, std::vector<StepTime>& times) {
    for (std::size_t i = 0; i < times.size(); ++i) {
        const Cell cell = pass.points[i].cell;
        if (desk.flow.holds(cell)) times[i] = desk.time_to_root(desk.flow.local(cell));
    }
}

/// The greatest time to any point, under its storm.
Duration greatest_of(const std::vector<PointHeads>& heads, const std::vector<StepTime>& times) {
    double greatest_s = 0.0;
    for (std::size_t i = 0; i < heads.size(); ++i) {
        greatest_s = std::max(greatest_s, in_seconds((heads[i].last.time - times[i]).under(heads[i].storm_factor)));
    }
    return seconds(greatest_s);
}

/// `heads` are needed only where a study asks for so many bands.
std::optional<IsochroneRules> isochrone_rules(const LastPass& pass, const std::vector<PointHeads>& heads, const std::vector<StepTime>& times) {
    const IsochroneStudy& asked = pass.study.output.isochrones;
    if (!asked.are_asked()) return std::nullopt;
    return IsochroneRules{.step = asked.step ? *asked.step : isochrone_step(greatest_of(heads, times), *asked.bands),
                          .catchments = pass.isochrone_catchments, .smoothed = asked.smoothed};
}

/// Has the outlines and the report's pictures gathered from the strips that the rasters are written from.
void begin_regions(const LastPass& pass, const std::vector<StepTime>& times, const std::optional<IsochroneRules>& rules, RasterStory& story) {
    std::vector<double> minutes;   // those of isochrones alone are asked for
    for (std::size_t i = 0; i < times.size(); ++i) {
        minutes.push_back(in_minutes((times[i] - story.last_point_times[i + 1]).under(story.last_point_factors[i + 1])));
    }
    pass.regions.emplace(pass.terrain.grid, pass.terrain.ground, pass.tree, std::move(minutes), rules);
    story.look = [&pass](const RegionStrip& strip) {
        pass.regions->look(strip);
        pass.overview.look(strip);
    };
}

/// `factors`: storm factor of each point by number − 1; empty where one storm times all.
RasterStory story_of(const LastPass& pass, const std::vector<StepTime>& times, const std::vector<double>& factors,
                     const std::optional<IsochroneRules>& isochrones) {
    RasterStory story{.grid = pass.terrain.grid,
                      .system = pass.terrain.system,
                      .format = pass.terrain.format,
                      .storm = storm_words(pass.study, pass.rain),
                      .sheet_flow = sheet_words(pass.study),
                      .has_voids = pass.terrain.void_cells > 0,
                      .cloud_optimized = pass.study.output.cloud_optimized,
                      .points = pass.points,
                      .last_point_times = {},
                      .last_point_factors = {}};
    for (const PointNumber last : pass.tree.last_points()) {
        const bool own = last != 0 && !factors.empty();
        story.last_point_times.push_back(last == 0 ? StepTime{} : times[last - 1]);
        story.last_point_factors.push_back(own ? factors[last - 1] : pass.travel.rules().sheet.storm_factor);
    }
    begin_regions(pass, times, isochrones, story);
    return story;
}

/// Makes all tiles, a row of them at a time: `look(desk)` at each, `after(first row, rows)` after each row, `end()` after the last.
template <class Look, class After, class End>
void work_all_tiles(const LastPass& pass, std::string_view stage, Look look, After after, End end) {
    const TileGrid& tiles = pass.travel.ground().forest.tiles();
    const auto across = static_cast<std::size_t>(tiles.tiles_across());
    const std::int64_t cells = tiles.rows() * tiles.columns();
    for (std::int64_t down = 0; down < tiles.tiles_down(); ++down) {
        const auto first = static_cast<Tile>(static_cast<std::size_t>(down) * across);
        pass.progress.tell({.stage = stage, .done = tiles.window(first).row * tiles.columns(), .total = cells});
        pass.travel.executor().for_each(across, [&](std::size_t column) {
            const auto desk = pass.travel.desks().lease();
            const Tile tile = first + static_cast<Tile>(column);
            pass.travel.read_tile(tile, *desk);
            pass.owners.read_tile(tile, *desk);
            look(*desk);
        });
        after(tiles.window(first).row, tiles.window(first).rows);
    }
    end();
    pass.progress.tell({.stage = stage, .done = cells, .total = cells, .finished = true});
}

void tally_all(const LastPass& pass, ArrivalTally& tally, HistogramTally* histograms, std::vector<StepTime>& times) {
    const auto look = [&](const TileDesk& desk) {
        note_times(pass, desk, times);
        tally.add(desk);
        if (histograms != nullptr) histograms->add(desk);
    };
    work_all_tiles(pass, "storms", look, [](std::int64_t, std::int64_t) {}, [] {});
}

std::vector<PointHeads> under_one_storm_alone(const LastPass& pass) {
    const double factor = pass.travel.rules().sheet.storm_factor;
    ArrivalTally tally(pass.travel, pass.points.size(), factor);
    std::vector<StepTime> times(pass.points.size());
    tally_all(pass, tally, nullptr, times);
    std::vector<PointHeads> heads = heads_of(tally.take(), pass.tree, factor, pass.study.timing.ignore_tail);
    add_storms(heads, times, intensities_of(pass.rain.storms));
    return heads;
}

std::vector<PointHeads> under_one_storm(const LastPass& pass) {
    const double factor = pass.travel.rules().sheet.storm_factor;
    std::vector<StepTime> times = times_for_rasters(pass);
    ArrivalTally tally(pass.travel, pass.points.size(), factor);
    // How long the step is for so many bands hangs on the greatest time, which takes a pass of its own.
    const bool needs_heads = pass.study.output.isochrones.bands.has_value();
    const auto isochrones = isochrone_rules(pass, needs_heads ? under_one_storm_alone(pass) : std::vector<PointHeads>{}, times);
    RasterStrips rasters(story_of(pass, times, {}, isochrones), pass.travel, pass.folder);
    const auto look = [&](const TileDesk& desk) {
        note_times(pass, desk, times);
        tally.add(desk);
        if (pass.histograms != nullptr) pass.histograms->add(desk);
        rasters.fill(desk);
    };
    work_all_tiles(pass, "writing rasters", look,
                   [&](std::int64_t row, std::int64_t rows) { rasters.write(row, rows); }, [&] { rasters.close(); });
    return stage(pass.progress, "arrivals at points", pass.terrain.grid.size(), [&] {
        std::future<void> outlines = std::async(std::launch::async, [&] { pass.regions->finish(); });
        std::vector<PointHeads> heads = heads_of(tally.take(), pass.tree, factor, pass.study.timing.ignore_tail);
        add_storms(heads, times, intensities_of(pass.rain.storms));
        outlines.get();
        return heads;
    });
}

/// Gives `times` the times of all points.
std::vector<PointHeads> under_own_storms_alone(const LastPass& pass, std::vector<StepTime>& times, const OwnStorms& storms,
                                               HistogramTally* histograms) {
    ArrivalTally tally(pass.travel, pass.points.size(), storms.reference_factor, Storms::by_point);
    tally_all(pass, tally, histograms, times);
    std::vector<PointHeads> heads = heads_of(tally.take(), pass.tree, times, storms);
    if (pass.study.timing.is_kinematic()) require_settled(heads, pass.points, pass.rain);
    return heads;
}

std::vector<PointHeads> under_own_storms(const LastPass& pass, const OwnStorms& storms) {
    std::vector<StepTime> times(pass.points.size());
    std::vector<PointHeads> heads = under_own_storms_alone(pass, times, storms, pass.histograms);
    std::vector<double> factors;
    for (const PointHeads& point : heads) factors.push_back(point.storm_factor);
    RasterStrips rasters(story_of(pass, times, factors, isochrone_rules(pass, heads, times)), pass.travel, pass.folder);
    work_all_tiles(
        pass, "writing rasters", [&](const TileDesk& desk) { rasters.fill(desk); },
        [&](std::int64_t row, std::int64_t rows) { rasters.write(row, rows); },
        [&] {
            rasters.close();
            pass.regions->finish();
        });
    return heads;
}

}  // namespace

std::vector<PointHeads> heads_alone(const LastPass& pass) {
    const std::optional<OwnStorms> own = own_storms_of(pass.study, pass.travel.rules(), pass.rain);
    if (!own) return under_one_storm_alone(pass);
    std::vector<StepTime> times(pass.points.size());
    return under_own_storms_alone(pass, times, *own, nullptr);   // histograms are of the times that the rasters show
}

std::vector<PointHeads> heads_and_rasters(const LastPass& pass) {
    const std::optional<OwnStorms> own = own_storms_of(pass.study, pass.travel.rules(), pass.rain);
    return own ? under_own_storms(pass, *own) : under_one_storm(pass);
}

}  // namespace rillclock
