#include "word_table.hpp"

namespace rillclock {
namespace {

bool is_long(const std::string& name) { return name.starts_with("--"); }

/// For single quotes of any of the shells.
std::string quotable(const std::string& text, bool for_fish) {
    std::string safe;
    for (const char c : text) {
        if (c == '\'') safe += for_fish ? "\\'" : "'\\''";
        else safe += c;
    }
    return safe;
}

std::string words_of(const std::vector<OptionWord>& options) {
    std::string words;
    for (const OptionWord& option : options) {
        for (const std::string& name : option.names) words += (words.empty() ? "" : " ") + name;
    }
    return words;
}

std::string bash_script(const WordTable& table) {
    std::string names;
    std::string cases;
    for (const CommandWord& command : table.commands) {
        names += command.name + " ";
        cases += "        " + command.name + ") words='" + words_of(command.options) + "' ;;\n";
    }
    return "_rillclock() {\n    local word=${COMP_WORDS[COMP_CWORD]} words=''\n    case ${COMP_WORDS[1]} in\n" + cases + "    esac\n"
           "    if ((COMP_CWORD == 1)); then\n        words='" + names + words_of(table.options) + "'\n    fi\n"
           "    if ((COMP_CWORD == 1)) || [[ $word == -* ]]; then\n        mapfile -t COMPREPLY < <(compgen -W \"$words\" -- \"$word\")\n"
           "    else\n        mapfile -t COMPREPLY < <(compgen -f -- \"$word\")\n    fi\n}\ncomplete -o filenames -F _rillclock rillclock\n";
}

/// Brackets and colons mean something in what _arguments is told.
std::string zsh_text(const std::string& text) {
    std::string safe;
    for (const char c : quotable(text, false)) safe += c == '[' ? "(" : c == ']' ? ")" : c == ':' ? "\\:" : std::string(1, c);
    return safe;
}

std::string zsh_options(const CommandWord& command) {
    std::string text;
    for (const OptionWord& option : command.options) {
        for (const std::string& name : option.names) {
            text += " \\\n            '" + name + "[" + zsh_text(option.help) + "]" + (option.value.empty() ? "" : ":" + zsh_text(option.value) + ":_files") + "'";
        }
    }
    return text + " \\\n            '*:file:_files'";
}

std::string zsh_script(const WordTable& table) {
    std::string commands;
    std::string cases;
    for (const CommandWord& command : table.commands) {
        commands += "    '" + command.name + ":" + zsh_text(command.help) + "'\n";
        cases += "    " + command.name + ")\n        _arguments" + zsh_options(command) + " ;;\n";
    }
    return "#compdef rillclock\nlocal -a commands\ncommands=(\n" + commands + ")\nif (( CURRENT == 2 )); then\n    _describe command commands\n    return\nfi\n"
           "shift words\n(( CURRENT-- ))\ncase $words[1] in\n" + cases + "esac\n";
}

std::string fish_script(const WordTable& table) {
    std::string text;
    for (const CommandWord& command : table.commands) {
        text += "complete -c rillclock -n __fish_use_subcommand -f -a " + command.name + " -d '" + quotable(command.help, true) + "'\n";
        for (const OptionWord& option : command.options) {
            text += "complete -c rillclock -n '__fish_seen_subcommand_from " + command.name + "'";
            for (const std::string& name : option.names) text += is_long(name) ? " -l " + name.substr(2) : " -s " + name.substr(1);
            text += (option.value.empty() ? "" : " -r") + std::string(" -d '") + quotable(option.help, true) + "'\n";
        }
    }
    return text;
}

}  // namespace

std::string completion_script(const WordTable& table, const std::string& shell) {
    if (shell == "bash") return bash_script(table);
    if (shell == "zsh") return zsh_script(table);
    if (shell == "fish") return fish_script(table);
    return {};
}

}  // namespace rillclock
