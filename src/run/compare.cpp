#include "rillclock/run/compare.hpp"

#include <cmath>
#include <map>
#include <set>

#include "result_tables.hpp"
#include "two_results.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/deliver/comparison.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/io/raster_output.hpp"
#include "rillclock/io/result_folder.hpp"
#include "rillclock/io/value_raster.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_rows_shown = 20;
constexpr std::int64_t rows_at_once = 512;
constexpr double no_change_value = -9999.0;

/// Names of one table that the other lacks, a few of them: "'a', 'b' and 3 more".
std::string missing_names(const std::map<std::string, std::size_t>& from, const std::map<std::string, std::size_t>& in) {
    constexpr std::size_t most_told = 3;
    std::size_t missing = 0;
    std::string names;
    for (const auto& [name, row] : from) {
        if (in.contains(name)) continue;
        if (++missing <= most_told) names += (names.empty() ? "'" : ", '") + name + "'";
    }
    if (missing > most_told) names += " and " + std::to_string(missing - most_told) + " more";
    return names;
}

void require_same_points(const ResultTables& before, const ResultTables& after) {
    const auto names_before = before.outlets.rows_by("name");
    const auto names_after = after.outlets.rows_by("name");
    const std::string gone = missing_names(names_before, names_after);
    const std::string fresh = missing_names(names_after, names_before);
    if (gone.empty() && fresh.empty()) return;
    throw input_error("the two results are not of the same points: " +
                      (gone.empty() ? "" : "only '" + before.folder.string() + "' has " + gone) + (gone.empty() || fresh.empty() ? "" : ", and ") +
                      (fresh.empty() ? "" : "only '" + after.folder.string() + "' has " + fresh) +
                      "; run both studies with the same points file");
}

/// Times are compared by a column that every result of this program has: without it nothing would seem to get worse.
void require_times(const ResultTables& tables) {
    if (tables.outlets.ending_of("time_used_min")) return;
    throw input_error("'" + tables.folder.string() + "/tables/outlets.csv' has no column time_used_min, by which points are compared; run its study again");
}

std::string same_unit(const ResultTable& before, const ResultTable& after, std::string_view stem) {
    const std::string unit = before.ending_of(stem).value_or("");
    if (unit == after.ending_of(stem).value_or("")) return unit;
    throw input_error("the two results are in different units (" + std::string(stem) + unit + " and " + std::string(stem) +
                      after.ending_of(stem).value_or("") + "); run one of them again with the report_units of the other");
}

/// Rows of the peaks by point and return period.
std::map<std::string, std::map<double, std::size_t>> peak_rows(const std::optional<ResultTable>& peaks) {
    std::map<std::string, std::map<double, std::size_t>> rows;
    if (!peaks) return rows;
    for (std::size_t row = 0; row < peaks->rows(); ++row) {
        rows[peaks->text(row, "point")].emplace(peaks->number(row, "return_period_years").value_or(0.0), row);
    }
    return rows;
}

/// Reads two results point by point.
class Comparing {
public:
    Comparing(const ResultTables& before, const ResultTables& after, double tolerance)
        : before_(before), after_(after), peaks_before_(peak_rows(before.peaks)), peaks_after_(peak_rows(after.peaks)) {
        require_times(before);
        require_times(after);
        require_same_points(before, after);
        found_.before = before.folder.string();
        found_.after = after.folder.string();
        found_.tolerance = tolerance;
        found_.length_unit = same_unit(before.outlets, after.outlets, "governing_length_");
        if (before.peaks && after.peaks) found_.flow_unit = same_unit(*before.peaks, *after.peaks, "whole_area_peak_");
    }

    Comparison comparison() {
        const auto places = after_.outlets.rows_by("name");
        for (std::size_t row = 0; row < before_.outlets.rows(); ++row) {
            found_.points.push_back(point(row, places.at(before_.outlets.text(row, "name"))));
        }
        return std::move(found_);
    }

private:
    [[nodiscard]] TwoFigures figures(std::size_t row, std::size_t other, const std::string& column) const {
        return {before_.outlets.number(row, column), after_.outlets.number(other, column)};
    }

    [[nodiscard]] ComparedPoint point(std::size_t row, std::size_t other) const {
        ComparedPoint found;
        found.name = before_.outlets.text(row, "name");
        found.time_min = figures(row, other, "time_used_min");
        found.ground_time_min = figures(row, other, "time_of_concentration_min");
        found.length = figures(row, other, "governing_length_" + found_.length_unit);
        found.lead_min = figures(row, other, "lead_min");
        found.last_before = before_.outlets.text(row, "last_subarea");
        found.last_after = after_.outlets.text(other, "last_subarea");
        for (const char* column : {"governing_head_x", "governing_head_y"}) {
            found.has_same_head = found.has_same_head && before_.outlets.text(row, column) == after_.outlets.text(other, column);
        }
        const std::string path = before_.outlets.text(row, "governing_path_digest");
        const std::string other_path = after_.outlets.text(other, "governing_path_digest");
        if (!path.empty() && !other_path.empty()) found.has_same_path = path == other_path;
        if (!found_.flow_unit.empty()) found.periods = periods(found.name);
        return found;
    }

    /// Those return periods that both results have.
    [[nodiscard]] std::vector<ComparedPeriod> periods(const std::string& name) const {
        std::vector<ComparedPeriod> found;
        const auto rows = peaks_before_.find(name);
        const auto others = peaks_after_.find(name);
        if (rows == peaks_before_.end() || others == peaks_after_.end()) return found;
        for (const auto& [period, row] : rows->second) {
            const auto other = others->second.find(period);
            if (other == others->second.end()) continue;
            const auto both = [&, place = row](const std::string& column) {
                return TwoFigures{before_.peaks->number(place, column), after_.peaks->number(other->second, column)};
            };
            found.push_back({.return_period = period, .coefficient = both("runoff_coefficient_with_factor"),
                             .whole_area_peak = both("whole_area_peak_" + found_.flow_unit), .peak = both("peak_" + found_.flow_unit)});
        }
        return found;
    }

    const ResultTables& before_;
    const ResultTables& after_;
    std::map<std::string, std::map<double, std::size_t>> peaks_before_;
    std::map<std::string, std::map<double, std::size_t>> peaks_after_;
    Comparison found_;
};

ValueRaster travel_time_of(const std::filesystem::path& folder) { return open_values(folder / "rasters/travel_time.tif"); }

void require_same_grid(const ResultTables& before, const ResultTables& after, const ValueRaster& a, const ValueRaster& b) {
    const bool same_grid = a.grid() == b.grid();
    if (same_grid && same_coordinates(a.system, b.system, a.grid())) return;
    const auto size = [](const ValueRaster& raster) {
        return std::to_string(raster.grid().rows) + " rows × " + std::to_string(raster.grid().columns) + " columns";
    };
    throw input_error("the two results are on different grids ('" + before.folder.string() + "': " + size(a) + " in " + a.system.name() + "; '" +
                      after.folder.string() + "': " + size(b) + " in " + b.system.name() +
                      "); run both studies on elevations of the same grid");
}

/// Minutes that travel time grows by, cell by cell; no value where either has none.
void write_change(ValueRaster& before, ValueRaster& after, ResultFolder& folder, const Progress& progress) {
    const Grid& grid = before.grid();
    const auto sink = create_raster<float>(folder.path("rasters/travel_time_change.tif"), grid, before.system,
                                           {.stored = StoredType::float32,
                                            .description = "travel time after less before; negative where water arrives sooner",
                                            .unit = "min",
                                            .nodata = no_change_value});
    std::vector<double> old_values;
    std::vector<double> new_values;
    std::vector<float> change;
    for (std::int64_t row = 0; row < grid.rows; row += rows_at_once) {
        progress.tell({.stage = "difference raster", .done = row * grid.columns, .total = grid.size()});
        const Window window{.row = row, .rows = std::min(rows_at_once, grid.rows - row), .columns = grid.columns};
        const auto size = static_cast<std::size_t>(window.size());
        old_values.resize(size);
        new_values.resize(size);
        change.resize(size);
        before.source->read(window, old_values);
        after.source->read(window, new_values);
        for (std::size_t i = 0; i < size; ++i) {
            const double difference = new_values[i] - old_values[i];
            change[i] = static_cast<float>(std::isnan(difference) ? no_change_value : difference);
        }
        sink->write(window, change);
    }
    sink->close();
    progress.tell({.stage = "difference raster", .done = grid.size(), .total = grid.size(), .finished = true});
}

}  // namespace

ComparedResults compare_two(const NamedResult& before, const NamedResult& after, double tolerance, ResultFolder* into,
                           const Progress& progress) {
    ResultTables old_tables = ResultTables::of(before.folder);
    ResultTables new_tables = ResultTables::of(after.folder);
    old_tables.folder = before.name;
    new_tables.folder = after.name;
    const Comparison comparison = Comparing(old_tables, new_tables, tolerance).comparison();
    ValueRaster old_times = travel_time_of(before.folder);
    ValueRaster new_times = travel_time_of(after.folder);
    require_same_grid(old_tables, new_tables, old_times, new_times);
    ComparedResults compared{.outcome = {.text = comparison_text(comparison, most_rows_shown), .json = comparison_json(comparison),
                                         .worse = comparison.worse().size(), .folder = {}},
                             .comparison = comparison};
    if (into == nullptr) return compared;
    write_change(old_times, new_times, *into, progress);
    into->write_text("tables/comparison.csv", comparison_table(comparison));
    if (!comparison.flow_unit.empty()) into->write_text("tables/compared_peaks.csv", compared_peaks_table(comparison));
    into->write_text("result.json", compared.outcome.json);
    return compared;
}

CompareOutcome compare(const std::filesystem::path& before, const std::filesystem::path& after, const CompareOptions& options,
                       const Progress& progress) {
    const GdalSession session;
    const NamedResult old_result{before, before};
    const NamedResult new_result{after, after};
    if (!options.folder) return compare_two(old_result, new_result, options.tolerance, nullptr, progress).outcome;
    ResultFolder folder(*options.folder, options.replace ? Existing::replace : Existing::refuse);
    CompareOutcome outcome = compare_two(old_result, new_result, options.tolerance, &folder, progress).outcome;
    folder.commit();
    outcome.folder = folder.target();
    return outcome;
}

double tolerance_from_text(const std::string& text) {
    try {
        return fraction_from_text(text, {.subject = "--tolerance", .example = "5 %", .sign = Sign::not_negative});
    } catch (const Error& error) {
        throw Error(Fault::command_line, error.what());
    }
}

}  // namespace rillclock
