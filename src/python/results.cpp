#include "results.hpp"

#include <pybind11/numpy.h>
#include <pybind11/stl.h>
#include <pybind11/stl/filesystem.h>

#include <algorithm>
#include <limits>
#include <string>
#include <string_view>
#include <vector>

#include "arrays.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/core/notice.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/run/explain.hpp"
#include "rillclock/run/read_result.hpp"

namespace rillclock {
namespace {

namespace py = pybind11;

/// What is known of every cell, as arrays.
struct TravelArrays {
    py::array minutes;
    py::array flow_azimuth;
    py::array contributing_area_m2;
    py::array regime;
    py::array spill_elevation;
    std::int64_t void_cells = 0;
    Notices notices;
};

/// A table of a result with the name it was asked by.
struct NamedTable {
    std::string name;
    CsvTable table;

    [[nodiscard]] std::size_t column(const std::string& asked) const {
        if (const auto found = table.column(asked)) return *found;
        throw input_error("the table '" + name + "' has no column '" + asked + "'" +
                          did_you_mean(asked, std::vector<std::string_view>(table.header.begin(), table.header.end())) +
                          "; Result.columns(\"" + name + "\") lists them");
    }
};

/// A result folder; what is asked of it is read when it is asked.
class ResultReader {
public:
    explicit ResultReader(std::filesystem::path folder) : folder_(std::move(folder)), text_(result_figures(folder_)) {}

    [[nodiscard]] const std::filesystem::path& folder() const { return folder_; }
    [[nodiscard]] py::object figures() {
        if (!figures_) figures_ = py::module_::import("json").attr("loads")(text_);
        return figures_;
    }
    [[nodiscard]] py::object headlines() { return figures()["headlines"]; }

    [[nodiscard]] Notices notices() {
        Notices notices;
        const auto number = [](const py::object& value) { return value.is_none() ? std::nullopt : std::optional(value.cast<double>()); };
        for (const py::handle item : figures()["notices"]) {
            Notice notice{.code = item["notice"].cast<std::string>(), .text = item["text"].cast<std::string>()};
            if (!item["point"].is_none()) notice.point = item["point"].cast<std::string>();
            notice.value = number(item["value"]);
            notice.threshold = number(item["threshold"]);
            notice.return_period = number(item["return_period"]);
            if (!item["place"].is_none()) notice.place = Place{item["place"][py::int_(0)].cast<double>(), item["place"][py::int_(1)].cast<double>()};
            notice.effect_s = number(item["effect_min"]).value_or(0.0) * 60.0;
            notices.push_back(std::move(notice));
        }
        return notices;
    }

    [[nodiscard]] std::vector<std::string> columns(const std::string& table) const { return result_table(folder_, table).header; }

    [[nodiscard]] std::vector<std::string> texts(const std::string& table, const std::string& column) const {
        const NamedTable read{table, result_table(folder_, table)};
        const std::size_t place = read.column(column);
        std::vector<std::string> fields;
        for (const CsvRow& row : read.table.rows) fields.push_back(row.fields[place]);
        return fields;
    }

    [[nodiscard]] py::array numbers(const std::string& table, const std::string& column) const {
        const std::vector<std::string> fields = texts(table, column);
        py::array_t<double> numbers(static_cast<py::ssize_t>(fields.size()));
        for (std::size_t row = 0; row < fields.size(); ++row) {
            const std::string subject = "row " + std::to_string(row) + " of the column '" + column + "' of the table '" + table + "'";
            numbers.mutable_at(static_cast<py::ssize_t>(row)) =
                fields[row].empty() ? std::numeric_limits<double>::quiet_NaN()
                                    : number_from_text(fields[row], {.subject = subject, .example = "12.5", .sign = Sign::any});
        }
        return numbers;
    }

    [[nodiscard]] py::array raster(const std::string& name) const {
        Raster<double> raster;
        {
            const py::gil_scoped_release unlocked;
            raster = result_raster(folder_, name);
        }
        return array_of(std::move(raster));
    }

    [[nodiscard]] std::string sheet(const std::string& point) const { return explanation(folder_, point); }

private:
    std::filesystem::path folder_;
    std::string text_;
    py::object figures_;
};

py::object place_of(const Notice& notice) {
    if (!notice.place) return py::none();
    return py::make_tuple(notice.place->x, notice.place->y);
}

void add_notice(py::module_& module) {
    py::class_<Notice>(module, "Notice", "Something the user should know, though it stops nothing.")
        .def_readonly("code", &Notice::code, "Short stable name, such as 'point-moved'.")
        .def_readonly("text", &Notice::text, "A sentence: what was found, and what to do about it.")
        .def_readonly("point", &Notice::point, "Name of the design point; empty where it is about the whole.")
        .def_readonly("value", &Notice::value, "What was found, in the unit that the text states; None where that is no number.")
        .def_readonly("threshold", &Notice::threshold, "The limit it was held against, in the same unit; None where there is none.")
        .def_property_readonly("place", &place_of, "(x, y) in the reference system of the elevations; None where it has no place.")
        .def_readonly("effect_s", &Notice::effect_s, "Seconds of travel time that hang on it; 0 where that has no answer.")
        .def("__repr__", [](const Notice& notice) { return "<rillclock.Notice " + notice.code + ": " + notice.text + ">"; });
}

void add_travel_times(py::module_& module) {
    py::class_<TravelArrays>(module, "TravelTimes", "What travel_time() found of every cell: arrays of rows × columns, the first row the northernmost.")
        .def_readonly("minutes", &TravelArrays::minutes,
                      "Travel time to where water leaves the data, or stays, in minutes; float32, NaN where void.")
        .def_readonly("flow_azimuth", &TravelArrays::flow_azimuth,
                      "Direction of flow in degrees clockwise from grid north; uint16, 65534 where water leaves, 65535 where void.")
        .def_readonly("contributing_area_m2", &TravelArrays::contributing_area_m2,
                      "Area that drains through the cell, its own included, in square metres; float64, NaN where void.")
        .def_readonly("regime", &TravelArrays::regime,
                      "How water begins its step out of the cell: 1 sheet, 2 shallow, 3 channel, 4 water, 0 void; uint8.")
        .def_readonly("spill_elevation", &TravelArrays::spill_elevation,
                      "The lowest level at which the cell's water gets out, in the unit of the elevations; float64, NaN where void.")
        .def_readonly("void_cells", &TravelArrays::void_cells, "How many cells have no elevation.")
        .def_readonly("notices", &TravelArrays::notices, "What was noticed: a list of Notice.")
        .def("__repr__", [](const TravelArrays& times) {
            return "<rillclock.TravelTimes of " + std::to_string(times.minutes.shape(0)) + " × " + std::to_string(times.minutes.shape(1)) + " cells>";
        });
}

void add_result(py::module_& module) {
    py::class_<ResultReader>(module, "Result", "The result of a study, in its folder. README.md says what tables and rasters there are, and what they mean.")
        .def_property_readonly("folder", &ResultReader::folder, "The result folder, a pathlib.Path.")
        .def_property_readonly("figures", &ResultReader::figures, "Every figure: result.json as dictionaries and lists.")
        .def_property_readonly("headlines", &ResultReader::headlines, "What matters most, in three or four sentences.")
        .def_property_readonly("notices", &ResultReader::notices, "What was noticed, by effect on the time, the greatest first: a list of Notice.")
        .def("columns", &ResultReader::columns, py::arg("table"), "The names of the columns of a table, such as columns('segments'). Units are in the names.")
        .def("texts", &ResultReader::texts, py::arg("table"), py::arg("column"), "A column of a table as a list of texts.")
        .def("numbers", &ResultReader::numbers, py::arg("table"), py::arg("column"),
             "A column of a table as an array of float64, NaN where it is empty: numbers('outlets', 'time_of_concentration_min').")
        .def("raster", &ResultReader::raster, py::arg("name"),
             "A raster of the result as an array of float64, rows × columns, NaN where it has no value: raster('travel_time') is in minutes.")
        .def("sheet", &ResultReader::sheet, py::arg("point"), "The calculation sheet of a point, by its name, as text.")
        .def("__repr__", [](const ResultReader& result) { return "<rillclock.Result in '" + result.folder().string() + "'>"; });
}

}  // namespace

void add_results(py::module_& module) {
    add_notice(module);
    add_travel_times(module);
    add_result(module);
}

py::object travel_times_object(TravelTimes&& times) {
    return py::cast(TravelArrays{.minutes = array_of(std::move(times.minutes)),
                                 .flow_azimuth = array_of(std::move(times.flow_azimuth)),
                                 .contributing_area_m2 = array_of(std::move(times.contributing_area_m2)),
                                 .regime = array_of(std::move(times.regime)),
                                 .spill_elevation = array_of(std::move(times.spill_elevation)),
                                 .void_cells = times.void_cells,
                                 .notices = std::move(times.notices)});
}

py::object result_object(const std::filesystem::path& folder) { return py::cast(ResultReader(folder)); }

}  // namespace rillclock
