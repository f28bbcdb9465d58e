#include "errors.hpp"

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

namespace py = pybind11;

/// The exception types, which live as long as the interpreter.
struct ErrorTypes {
    py::handle error;
    py::handle input;
    py::handle machine;
    py::handle stopped;
};

ErrorTypes& types() {
    static ErrorTypes of_module;
    return of_module;
}

py::handle type_of(Fault fault) {
    switch (fault) {
        case Fault::inputs:
        case Fault::command_line: return types().input;
        case Fault::machine: return types().machine;
        case Fault::bug: return types().error;
    }
    return types().error;
}

void translate(std::exception_ptr thrown) {
    try {
        if (thrown) std::rethrow_exception(thrown);
    } catch (const Error& error) {
        PyErr_SetString(type_of(error.fault()).ptr(), error.what());
    } catch (const Cancelled& stopped) {
        PyErr_SetString(types().stopped.ptr(), stopped.what());
    }
}

py::handle add_error(py::module_& module, const char* name, const char* doc, const py::tuple& bases) {
    const std::string full = std::string("rillclock.") + name;
    PyObject* made = PyErr_NewExceptionWithDoc(full.c_str(), doc, bases.ptr(), nullptr);
    if (made == nullptr) throw py::error_already_set();
    module.add_object(name, made);
    return made;
}

}  // namespace

void add_errors(py::module_& module) {
    const auto base = [](PyObject* type) { return py::reinterpret_borrow<py::object>(type); };
    types().error = add_error(module, "Error", "What went wrong: a sentence that says what failed, where, what was expected and what to do.",
                              py::make_tuple(base(PyExc_Exception)));
    types().input = add_error(module, "InputError", "The inputs are at fault: a file, an array, a setting.",
                              py::make_tuple(types().error, base(PyExc_ValueError)));
    types().machine = add_error(module, "MachineError", "The machine is at fault: disk, memory, permission, installation.",
                                py::make_tuple(types().error, base(PyExc_RuntimeError)));
    types().stopped = add_error(module, "Stopped", "The caller's progress function asked to stop; nothing went wrong.",
                                py::make_tuple(base(PyExc_Exception)));
    py::register_exception_translator(&translate);
}

}  // namespace rillclock
