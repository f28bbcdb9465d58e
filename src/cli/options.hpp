#pragma once

#include <string>
#include <vector>

#include "rillclock/run/run_study.hpp"

namespace rillclock {

/// What the words after the command's name ask for.
struct CommandLine {
    enum class Command { run, check, explain, compare, methods, demo };
    Command command = Command::run;
    std::string study_file;
    /// Keys of the study with their values as texts, from options such as --elevation.
    struct Stated {
        std::string option;   ///< "--elevation"
        std::string key;      ///< "terrain.elevation"
        std::string value;
    };
    std::vector<Stated> stated;
    std::string demo_folder;
    std::string result_folder;
    std::string point;
    std::string after_folder;         ///< of compare; the result before is `result_folder`
    std::string tolerance = "5 %";
    std::string compare_folder;       ///< empty where nothing is to be written
    bool replace = false;
    unsigned threads = 0;   ///< 0 for as many as may be used
    bool quiet = false;
    bool verbose = false;
    bool json = false;
    bool keys = false;
};

/// What reading the words came to: either a command line, or an exit status where help was asked for and given.
struct ParsedWords {
    CommandLine line;
    bool finished = false;
};

/// Reads the words. Throws a command-line Error that says what is wrong with them; prints help where it is asked for.
[[nodiscard]] ParsedWords parse_words(int count, const char* const* words);

/// The study that the words describe: the file, if one is named, with the options laid over it.
[[nodiscard]] Study study_of(const CommandLine& line);

}  // namespace rillclock
