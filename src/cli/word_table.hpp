#pragma once

#include <string>
#include <vector>

namespace rillclock {

/// An option of a command: "-q,--quiet" or "--elevation", what its value is ("FILE"; empty where it has none), and what it does.
struct OptionWord {
    std::vector<std::string> names;
    std::string value;
    std::string help;
};

/// A word that stands without a name: "STUDY".
struct PlaceWord {
    std::string name;
    std::string help;
    bool is_needed = false;
};

struct CommandWord {
    std::string name;
    std::string help;
    std::vector<PlaceWord> places;
    std::vector<OptionWord> options;
};

/// All words of the command line, as help, completion and manual are made from them.
struct WordTable {
    std::string about;
    std::vector<OptionWord> options;   ///< before any command
    std::vector<CommandWord> commands;
};

/// A script that completes the words in "bash", "zsh" or "fish"; empty for another shell.
[[nodiscard]] std::string completion_script(const WordTable& table, const std::string& shell);

/// The manual page, as troff with the macros of man(7).
[[nodiscard]] std::string manual_page(const WordTable& table);

}  // namespace rillclock
