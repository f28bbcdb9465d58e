#include <pybind11/pybind11.h>
#include <pybind11/stl/filesystem.h>

#include <string>

#include "arrays.hpp"
#include "errors.hpp"
#include "results.hpp"
#include "rillclock/run/run_study.hpp"
#include "rillclock/run/study_source.hpp"
#include "rillclock/run/travel_times.hpp"
#include "rillclock/study/study_keys.hpp"
#include "settings.hpp"
#include "watching.hpp"

namespace rillclock {
namespace {

namespace py = pybind11;

constexpr const char* module_doc =
    "How long water takes to arrive: travel times over terrain, for drainage planners.\n\n"
    "travel_time() takes arrays and gives arrays; run() works out a whole study into its result folder and gives a Result; read_result() opens\n"
    "one that is there. The interpreter is free for other threads while they compute. What goes wrong is an Error with a sentence that says\n"
    "what to do.\n\n"
    "Planning-level estimates only, not for life-safety or flood-warning decisions; a licensed engineer checks them before anyone builds.";

constexpr const char* run_doc =
    "Works out a study and writes its result folder, as the command `rillclock run` does.\n\n"
    "study: the name of a study file, or a dictionary of settings in place of one.\n"
    "settings: what counts before the study file: keys as README.md lists them, {'timing.sheet_limit': '150 ft'}. Names of files are from the\n"
    "    folder of the study file, or from the current folder where there is none.\n"
    "replace: whether a result that is already there may be replaced.\n"
    "threads: how many to work on; 0 for as many as may be used. No figure depends on it.\n"
    "progress: called with (stage, done, total) while the work goes on; where it returns False the work stops with Stopped, and the folder\n"
    "    is as it was.\n\n"
    "Returns a Result. Raises InputError where files or settings are at fault, MachineError where the machine is; nothing was written then.";

std::string travel_time_doc() {
    return "Travel times from arrays: the time of water from every cell to where it leaves the data, by the rules of a study without points.\n\n"
           "elevation: rows × columns, the first row the northernmost; float32, float64 or whole numbers; NaN and masked cells are void.\n"
           "cell: the side of a cell on the ground, in metres or as text ('10 ft'), or a pair of width and height.\n"
           "cover: codes of land cover, whole numbers in the shape of elevation, or one for all cells.\n"
           "book: what the codes mean: 'nlcd', 'worldcover', or the name of a CSV file.\n"
           "rain: 2-year 24-hour rainfall depth, such as '3.6 in' or '91 mm'.\n"
           "settings: further keys of a study (below), such as {'timing.sheet_limit': '150 ft'}.\n"
           "threads: how many to work on; 0 for as many as may be used. No figure depends on it.\n"
           "progress: called with (stage, done, total) while the work goes on; where it returns False the work stops with Stopped.\n\n"
           "Returns TravelTimes; `minutes` is in every cell what the command writes to travel_time.tif for the same data. Raises InputError\n"
           "where shapes, types or values cannot be used. Memory: 12 to 24 bytes a cell and the arrays that are returned, 23 more.\n\n"
           "Settings:\n" + travel_settings_text();
}

/// A study from the name of its file or from a dictionary, with settings laid over it.
Study study_from(const py::object& given, const py::dict& settings) {
    Study study;
    if (py::isinstance<py::dict>(given)) state_settings(study, py::reinterpret_borrow<py::dict>(given));
    else study = read_study_file(py::str(py::module_::import("os").attr("fspath")(given)).cast<std::string>());
    state_settings(study, settings);
    return study;
}

py::object run_from_python(const py::object& given, const py::object& settings, bool replace, unsigned threads, const py::object& progress) {
    const Study study = study_from(given, settings.is_none() ? py::dict() : settings.cast<py::dict>());
    const Progress told = watching(progress);
    RunOutcome outcome;
    {
        const py::gil_scoped_release unlocked;
        outcome = run(study, {.replace = replace, .threads = threads}, told);
    }
    return result_object(outcome.folder);
}

py::object travel_time_from_python(const py::object& elevation, const py::object& cell, const py::object& cover, const py::object& book,
                                   const py::object& rain, const py::object& settings, unsigned threads, const py::object& progress) {
    Study study;
    if (!settings.is_none()) state_travel_settings(study, settings.cast<py::dict>());
    set_study_value(study, "surface.book", {.value = py::str(book).cast<std::string>(), .subject = "book"});
    set_study_value(study, "rain.two_year_24_hour", {.value = py::str(rain).cast<std::string>(), .subject = "rain"});
    auto elevations = elevation_source(elevation);
    auto classes = cover_source(cover, elevations.grid());
    const auto [width, height] = cell_sides(cell);
    const PlaneLand land{.elevations = elevations, .cover = classes, .cell_width = width, .cell_height = height,
                         .whole_numbers = elevations.is_whole(), .wide = elevations.item_size() > (elevations.is_whole() ? 2 : 4)};
    const Progress told = watching(progress);
    TravelTimes times;
    {
        const py::gil_scoped_release unlocked;
        times = travel_times(land, study, threads, told);
    }
    return travel_times_object(std::move(times));
}

}  // namespace
}  // namespace rillclock

PYBIND11_MODULE(rillclock, module) {
    namespace py = pybind11;
    using namespace rillclock;
    module.doc() = module_doc;
    module.attr("__version__") = RILLCLOCK_VERSION;
    add_errors(module);
    add_results(module);
    module.def("travel_time", &travel_time_from_python, py::arg("elevation"), py::kw_only(), py::arg("cell"), py::arg("cover"), py::arg("book"),
               py::arg("rain"), py::arg("settings") = py::none(), py::arg("threads") = 0, py::arg("progress") = py::none(), travel_time_doc().c_str());
    module.def("run", &run_from_python, py::arg("study"), py::kw_only(), py::arg("settings") = py::none(), py::arg("replace") = false,
               py::arg("threads") = 0, py::arg("progress") = py::none(), run_doc);
    module.def("read_result", [](const std::filesystem::path& folder) { return result_object(folder); }, py::arg("folder"),
               "Opens the result folder of a study that was run before. Raises InputError where it is none.");
}
