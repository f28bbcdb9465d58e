#include "watching.hpp"

#include <string>

namespace rillclock {

namespace py = pybind11;

Progress watching(const py::object& function) {
    // Borrowed: the caller holds the function for as long as the work runs, and it is let go of with the lock held.
    const py::handle told = function;
    return Progress([told](const StageProgress& progress) {
        const py::gil_scoped_acquire lock;
        if (PyErr_CheckSignals() != 0) throw py::error_already_set();
        if (told.is_none()) return true;
        const py::object answer = told(std::string(progress.stage), progress.done, progress.total);
        return !answer.is(py::bool_(false));
    });
}

}  // namespace rillclock
