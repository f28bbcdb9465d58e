#pragma once

#include <stdexcept>
#include <string>

namespace rillclock {

/// Who can put an error right.
enum class Fault {
    inputs,        ///< a file, the study or a value in it
    command_line,  ///< the words after the command's name
    machine,       ///< disk, memory, permission, installation
    bug,           ///< ourselves
};

/// The one exception of the library: a sentence that says what failed, on which file or cell, what was expected and what
/// to do.
class Error : public std::runtime_error {
public:
    Error(Fault fault, const std::string& sentence) : std::runtime_error(sentence), fault_(fault) {}
    [[nodiscard]] Fault fault() const { return fault_; }

private:
    Fault fault_;
};

/// A fault of a file, the study or a value in it.
[[nodiscard]] inline Error input_error(const std::string& sentence) { return {Fault::inputs, sentence}; }
/// A fault of disk, memory, permission or installation.
[[nodiscard]] inline Error machine_error(const std::string& sentence) { return {Fault::machine, sentence}; }
/// A fault of ours; the sentence is lengthened by a request to report it.
[[nodiscard]] inline Error bug(const std::string& sentence) {
    return {Fault::bug, sentence + " (this is a fault of rillclock itself; please report it)"};
}

/// Thrown when the caller's progress callback asked to stop; carries nothing, since nothing went wrong.
class Cancelled : public std::exception {
public:
    [[nodiscard]] const char* what() const noexcept override { return "stopped on request"; }
};

}  // namespace rillclock
