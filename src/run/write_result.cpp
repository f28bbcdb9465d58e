#include "write_result.hpp"

#include <algorithm>
#include <future>

#include "depressions.hpp"
#include "rillclock/deliver/calculation_sheet.hpp"
#include "rillclock/deliver/depressions_table.hpp"
#include "rillclock/deliver/headlines.hpp"
#include "rillclock/deliver/own_ways_geojson.hpp"
#include "rillclock/deliver/paths_geojson.hpp"
#include "rillclock/deliver/raster_styles.hpp"
#include "rillclock/deliver/report.hpp"
#include "rillclock/deliver/result_json.hpp"
#include "rillclock/deliver/study_geopackage.hpp"
#include "rillclock/deliver/tables.hpp"
#include "rillclock/deliver/uncertainty_tables.hpp"

namespace rillclock {
namespace {

/// The sheets of the points with the largest catchments, if there are too many for all.
void write_sheets(const StudyResult& result, const SheetBook& book, const Executor& executor, ResultFolder& folder) {
    std::vector<std::size_t> order = by_area(result);
    order.resize(std::min(order.size(), most_sheets));
    executor.for_each(order.size(), [&](std::size_t at) {
        const std::size_t i = order[at];
        folder.write_text("tables/sheets/" + sheet_file_name(i + 1, result.outlets[i].point.name), sheet_markdown(book.sheet(i)));
    });
}

using Outlined = std::vector<OutlinedDepression>;

void write_shapes(const WorkedStudy& worked, const Outlined& depressions, ResultFolder& folder) {
    const StudyResult& result = worked.result;
    const StudyRegions& regions = worked.regions;
    StudyShapes shapes{.regions = regions, .depressions = depressions};
    if (!worked.flow.line_cells.empty()) shapes.own_ways = worked.flow.own_ways;
    write_study_geopackage(folder.path("study.gpkg"), result, shapes);
    folder.write_text("rasters/travel_time.sld", travel_time_sld(result));
    folder.write_text("rasters/regime.sld", regime_sld());
    folder.write_text("rasters/flow_azimuth.sld", flow_azimuth_sld());
    folder.write_text("rasters/contributing_area.sld", contributing_area_sld(result));
    folder.write_text("rasters/catchment.sld", catchment_sld(result));
    if (regions.isochrones()) folder.write_text("isochrones.geojson", isochrones_geojson(result, regions));
}

void write_texts(const StudyResult& result, ResultFolder& folder) {
    folder.write_text("governing_paths.geojson", paths_geojson(result, PathKind::governing));
    folder.write_text("longest_paths.geojson", paths_geojson(result, PathKind::longest));
    folder.write_text("tables/outlets.csv", outlets_table(result));
    folder.write_text("tables/segments.csv", segments_table(result));
    folder.write_text("tables/methods.csv", methods_table(result));
    folder.write_text("tables/subareas.csv", subareas_table(result));
    folder.write_text("tables/land.csv", land_table(result));
    folder.write_text("tables/review.csv", review_table(result));
    if (result.rain.source) folder.write_text("tables/storms.csv", storms_table(result));
    if (result.peaks.are_there()) {
        folder.write_text("tables/peaks.csv", peaks_table(result));
        folder.write_text("tables/time_area.csv", time_area_table(result));
    }
    folder.write_text("tables/handover.csv", handover_table(result));
    if (!result.drawn.empty()) folder.write_text("tables/drawn_catchments.csv", drawn_catchments_table(result));
    if (!result.network.pipes.empty()) folder.write_text("tables/pipes.csv", pipes_table(result));
    if (result.study.timing.is_kinematic()) folder.write_text("tables/iterations.csv", iterations_table(result));
    if (result.uncertainty != nullptr) {
        folder.write_text("tables/uncertainty.csv", uncertainty_table(result));
        folder.write_text("tables/uncertain_times.csv", uncertain_times_table(result));
        folder.write_text("tables/last_subareas.csv", last_subareas_table(result));
        folder.write_text("tables/draws.csv", draws_table(result));
    }
}

void write_ground(const WorkedStudy& worked, const Outlined& depressions, ResultFolder& folder) {
    const StudyResult& result = worked.result;
    folder.write_text("tables/depressions.csv", depressions_table(result, worked.depressions));
    folder.write_text("depressions.geojson", depressions_geojson(result, depressions));
    if (!worked.flow.line_cells.empty()) folder.write_text("own_paths.geojson", own_ways_geojson(result, worked.flow.own_ways));
}

ReportText report_of(const WorkedStudy& worked, const SheetBook& book) {
    const ElevationStore& elevations = worked.terrain.elevations;
    const double metres_per_unit = worked.travel.ground().metres_per_elevation_unit;
    const ReportOverview pictures = worked.overview.take(elevations, metres_per_unit, worked.terrain.ground.cell_side());
    return report_html({.result = worked.result, .regions = worked.regions, .overview = pictures, .sheets = book,
                        .ground_m = [&](Cell cell) { return elevations[cell] * metres_per_unit; }});
}

}  // namespace

ResultTexts write_result(const WorkedStudy& worked, ResultFolder& folder) {
    const StudyResult& result = worked.result;
    const Executor& executor = worked.travel.executor();
    // Each of these takes as long as all the rest and keeps one processor busy.
    const std::shared_future<Outlined> depressions =
        std::async(std::launch::async, [&] { return outlined(worked.travel, worked.terrain.grid, worked.depressions); }).share();
    std::future<void> shapes = std::async(std::launch::async, [&] { write_shapes(worked, depressions.get(), folder); });
    const ResultText text = result_json(result, executor);
    std::future<std::string> rest = std::async(std::launch::async, [&] {
        std::string json = text.whole();
        folder.write_text("result.json", json);
        write_texts(result, folder);
        write_ground(worked, depressions.get(), folder);
        return json;
    });
    const SheetBook book(text.frame, text.outlets);
    write_sheets(result, book, executor, folder);
    ReportText report = report_of(worked, book);
    shapes.get();
    return {.json = rest.get(), .report = std::move(report)};
}

}  // namespace rillclock
