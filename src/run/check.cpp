#include "rillclock/run/check.hpp"

#include <algorithm>
#include <filesystem>
#include <memory>
#include <optional>
#include <utility>

#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/paths_geojson.hpp"
#include "rillclock/deliver/study_geopackage.hpp"
#include "rillclock/io/cover_file.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/hydraulics/velocity_table.hpp"
#include "rillclock/io/ground_of.hpp"
#include "rillclock/io/text_file.hpp"
#include "rillclock/rainfall/return_periods.hpp"
#include "rillclock/study/scenario.hpp"
#include "rillclock/study/uncertain_inputs.hpp"
#include "cover_areas.hpp"
#include "mapped_flow.hpp"
#include "rain_zones.hpp"
#include "read_soil.hpp"
#include "sentences.hpp"
#include "study_data.hpp"

namespace rillclock {
namespace {

/// Bytes a cell of the six rasters before compression, overviews included.
constexpr double disk_bytes_per_cell = 31.0;
/// The same of the raster by which a scenario is compared.
constexpr double change_bytes_per_cell = 5.5;

/// "2, 10, 100 years; rasters, paths and segments are for 10".
std::string storms_text(const StudyRain& rain) {
    std::vector<double> periods;
    for (const StudyStorm& storm : rain.storms) periods.push_back(storm.return_period);
    return list_of_years(periods) + " years; rasters, paths and segments are for " + significant(rain.raster_storm().return_period, 6);
}

class Checking {
public:
    explicit Checking(const Study& study) : study_(study) {}

    // A scenario is checked as a study of its own, which has none: one level deep.
    // NOLINTBEGIN(misc-no-recursion)
    CheckReport report() {
        attempt([&] { check_study(study_); });
        attempt([&] { elevations(); });
        attempt([&] { book(); });
        attempt([&] { rain(); });
        attempt([&] { network(); });
        attempt([&] { uncertainty(); });
        if (terrain_) {
            attempt([&] { cover(); });
            attempt([&] { soil(); });
            attempt([&] { mapped_shapes(); });
            attempt([&] { points(); });
            if (study_.scenario.empty()) costs();
        }
        output();
        for (const ScenarioStudy& scenario : study_.scenarios) attempt([&] { add_scenario(scenario); });
        report_.notices = in_sentences(std::move(report_.notices));
        return std::move(report_);
    }
    // NOLINTEND(misc-no-recursion)

private:
    /// Input faults are what a check is for; others go on to the caller.
    template <class Work>
    void attempt(Work work) {   // NOLINT(misc-no-recursion)
        try {
            work();
        } catch (const Error& error) {
            if (error.fault() != Fault::inputs) throw;
            report_.problems.emplace_back(error.what());
        }
    }

    void note(const Notices& notices) { report_.notices.insert(report_.notices.end(), notices.begin(), notices.end()); }

    void elevations() {
        if (study_.terrain.elevation.empty()) return;
        terrain_ = std::make_unique<ElevationFile>(open_elevation_of(study_));
        const Grid& grid = terrain_->grid();
        const Ground ground = ground_of(grid, terrain_->system);
        note(terrain_->notices);
        report_.facts.push_back("elevations: " + std::to_string(grid.rows) + " rows × " + std::to_string(grid.columns) +
                                " columns in " + terrain_->system.name() + ", vertical unit " + terrain_->format.unit.name +
                                ", cells of " + significant(in_metres(ground.cell_side()), 4) + " m on the ground");
        const ResolvedStudy resolved = resolve(study_, facts_of(terrain_->format, ground));
        report_.facts.push_back("slopes: read over " + significant(in_metres(resolved.slope_window), 4) +
                                " m of path, believed from a fall of " + significant(in_metres(resolved.vertical_step), 4) + " m on");
    }

    void book() {
        if (study_.surface.book.empty()) return;
        if (study_.timing.velocity_chart) {
            const VelocityTable chart = parse_velocity_table(read_text(located(study_, *study_.timing.velocity_chart)), *study_.timing.velocity_chart);
            report_.facts.push_back("velocity chart: " + *study_.timing.velocity_chart + ", " + std::to_string(chart.lines.size()) + " lines");
        }
        const CoverBook book = read_book(study_);
        report_.facts.push_back("cover book: " + book.name() + ", " + std::to_string(book.classes().size()) + " classes");
    }

    void rain() {
        // What is missing altogether has been said already.
        if (!study_.rain.two_year_24_hour && !study_.rain.is_by_duration()) return;
        const StudyRain rain = read_rain(study_, read_rain_zones(study_).files);
        note(rain.notices);
        if (rain.source && rain.is_everywhere) report_.facts.push_back("rain: " + sentence(rain.source->echo));
        for (const ZoneRain& zone : rain.zones) report_.facts.push_back("rain zone: " + sentence(zone.source.echo));
        if (rain.source) report_.facts.push_back("storms: " + storms_text(rain));
        if (rain.two_year_24_hour && rain.is_everywhere) {
            report_.facts.push_back("rain: 2-year 24-hour depth " + significant(in_inches(*rain.two_year_24_hour), 4) + " in (" +
                                    significant(in_millimetres(*rain.two_year_24_hour), 4) + " mm)");
        }
    }

    void network() {
        const StatedEdits stated = read_edits(study_);
        if (!stated.pipes.empty()) report_.facts.push_back("pipes: " + std::to_string(stated.pipes.size()));
        if (!stated.overrides.empty()) report_.facts.push_back("overrides: of " + std::to_string(stated.overrides.size()) + " points");
    }

    /// Says what would be drawn, and from whose ranges.
    void uncertainty() {
        if (!study_.uncertainty || study_.surface.book.empty()) return;
        const CoverBook book = read_book(study_);
        std::string ours;
        for (const UncertainInput& input : uncertain_inputs(study_, book, std::vector<bool>(book.classes().size(), false))) {
            if (input.source != "study") ours += (ours.empty() ? "" : ", ") + input.name;
        }
        report_.facts.push_back("uncertainty: " + std::to_string(study_.uncertainty->draws) + " draws" +
                                (ours.empty() ? "" : "; ranges that the study does not state are ours: " + ours));
    }

    void cover() {
        if (study_.surface.cover.empty()) return;
        CoverOptions options;
        options.band = study_.surface.band;
        const CoverFile file = open_cover(located(study_, study_.surface.cover), options, terrain_->grid(), terrain_->system);
        note(file.notices);
        report_.facts.push_back("land cover: '" + study_.surface.cover + "', " + std::to_string(file.file_grid.rows) + " rows × " +
                                std::to_string(file.file_grid.columns) + " columns in " + file.system.name());
        if (!study_.surface.cover_areas.file || study_.surface.book.empty()) return;
        const CoverAreas areas = read_cover_areas(study_, read_book(study_), terrain_->system);
        note(areas.notices);
        report_.facts.push_back("cover areas: " + std::to_string(areas.parts.size()) + " polygons of '" + *study_.surface.cover_areas.file +
                                "', laid over the land cover");
    }

    void soil() {
        if (study_.surface.soil_group) report_.facts.push_back("soil group: " + letter_of(cell_soil(*study_.surface.soil_group)) + " everywhere");
        if (!study_.surface.soil.file) return;
        const CoverFile file = open_soil(study_, terrain_->grid(), terrain_->system);
        note(file.notices);
        report_.facts.push_back("soil groups: " + std::to_string(file.file_grid.rows) + " rows × " +
                                std::to_string(file.file_grid.columns) + " columns in " + file.system.name() + ", a byte a cell of memory");
    }

    void mapped_shapes() {
        const MappedShapes mapped = read_mapped_shapes(study_, terrain_->grid(), terrain_->system);
        report_.facts.insert(report_.facts.end(), mapped.facts.begin(), mapped.facts.end());
        note(mapped.notices);
    }

    void points() {
        const std::optional<StatedPoints> stated = read_stated_points(study_, terrain_->system);
        if (!stated) {
            report_.facts.emplace_back("points: none stated, so they will stand where water leaves the data");
            return;
        }
        points_ = stated->count();
        note(stated->notices);
        if (!stated->drawn.empty()) {
            isochrones(stated->drawn.size());
            report_.facts.push_back("catchments: " + std::to_string(stated->drawn.size()) + " drawn, whose points will stand where their water leaves them");
            return;
        }
        std::vector<std::string> names;
        for (const StatedPoint& point : stated->points) {
            if (terrain_->grid().at(point.place)) {
                names.push_back(point.name);
            } else {
                report_.notices.push_back({.code = "point-off-data",
                                           .text = "the point '" + point.name + "' lies off the elevation data and will be left out",
                                           .point = point.name, .place = point.place});
            }
        }
        const std::size_t inside = names.size();
        report_.facts.push_back("points: " + std::to_string(stated->points.size()) + ", " + std::to_string(inside) +
                                " of them within the elevations");
        if (study_.points.area) {
            const auto surveyed = std::count_if(stated->points.begin(), stated->points.end(), [](const StatedPoint& p) { return p.surveyed.has_value(); });
            report_.facts.push_back("surveyed areas: beside " + std::to_string(surveyed) + " points, which move to the area nearest to theirs");
        }
        if (const std::string left_out = words_on_left_out_paths(inside); !left_out.empty()) report_.facts.push_back("paths: " + left_out);
        if (const std::string left_out = words_on_left_out_catchments(study_, inside); !left_out.empty()) report_.facts.push_back("catchments: " + left_out);
        attempt([&] { (void)isochrone_catchments(study_, names); });
        isochrones(inside);
        if (inside == 0) report_.problems.push_back("none of the points in '" + *study_.points.file +
                                                    "' lies within the elevations; check their reference system");
    }

    /// How many bands there may be, and how long water may then take: nobody knows the times beforehand.
    void isochrones(std::size_t points) {
        const IsochroneStudy& asked = study_.output.isochrones;
        if (!asked.step || points == 0) return;
        const std::size_t most = most_isochrone_bands(points);
        const std::size_t shapes = points + 1 + asked.catchments.size();
        const double minutes = in_minutes(*asked.step) * static_cast<double>(most) / static_cast<double>(shapes);
        const std::string step = isochrone_step_text(*asked.step);
        const std::string bound = "at most " + std::to_string(most) + " bands are made in all, which " + std::to_string(shapes) +
                                  " subareas and catchments reach where their water takes " + significant(minutes, 3) + " min on an average";
        report_.facts.push_back("isochrones: every " + step + "; " + bound);
        constexpr double usual_minutes = 30.0;
        if (!(minutes < usual_minutes)) return;
        report_.notices.push_back({.code = "isochrones-many",
                                   .text = "isochrones every " + step + " will be refused where they are too many: " + bound +
                                           "; state a longer step in output.isochrones, or how many bands there may be, such as \"12 bands\"",
                                   .value = minutes,
                                   .threshold = usual_minutes});
    }

    /// What a scenario states, and what is said of it that is not said of the study itself.
    void add_scenario(const ScenarioStudy& scenario) {   // NOLINT(misc-no-recursion)
        const std::string begin = "scenario " + scenario.name + ": ";
        std::vector<std::string> keys;
        for (const StatedChange& change : scenario.changes) {
            if (std::find(keys.begin(), keys.end(), change.key) == keys.end()) keys.push_back(change.key);
        }
        std::string list;
        for (const std::string& key : keys) list += (list.empty() ? "" : ", ") + key;
        report_.facts.push_back(begin + "differs in " + list);
        const Study study = scenario_study(study_, scenario);
        const CheckReport own = Checking(study).report();
        const auto add_new = [&](const std::vector<std::string>& from, std::vector<std::string>& to) {
            for (const std::string& text : from) {
                if (std::find(to.begin(), to.end(), text) == to.end()) to.push_back(begin + text);
            }
        };
        add_new(own.facts, report_.facts);
        add_new(own.problems, report_.problems);
        for (const Notice& notice : own.notices) {
            const auto is_same = [&](const Notice& other) { return other.code == notice.code && other.point == notice.point; };
            if (std::none_of(report_.notices.begin(), report_.notices.end(), is_same)) report_.notices.push_back(notice);
        }
    }

    void costs() {
        const MemoryTask task = memory_task(study_, *terrain_, points_);
        const MemoryLimit limit = usable_memory();
        const auto results = static_cast<double>(study_.scenarios.size() + 1);
        report_.facts.push_back("cost: about " + bytes_text(memory_need(task)) + " of memory (" + limit.set_by + " allows " +
                                bytes_text(limit.bytes) + "), and at most " +
                                bytes_text(static_cast<double>(task.cells) * (disk_bytes_per_cell * results + change_bytes_per_cell * (results - 1.0))) +
                                " of disk for the result");
        if (const auto lack = lack_of_memory(task, limit)) report_.lacking.push_back(*lack);
    }

    void output() {
        const std::string folder = located(study_, study_.output.folder);
        if (std::filesystem::exists(folder)) {
            report_.facts.push_back("result: the folder '" + folder + "' is there already; run with --replace to replace it");
        } else {
            report_.facts.push_back("result: will be written to '" + folder + "'");
        }
    }

    const Study& study_;
    std::unique_ptr<ElevationFile> terrain_;
    std::size_t points_ = 0;   ///< stated
    CheckReport report_;
};

}  // namespace

CheckReport check(const Study& study) {
    const GdalSession session;
    return Checking(study).report();
}

}  // namespace rillclock
