#include "word_table.hpp"

namespace rillclock {
namespace {

/// Text that troff takes as it stands.
std::string plain(const std::string& text) {
    std::string safe;
    for (const char c : text) {
        if (c == '\\') safe += "\\e";
        else if (c == '-') safe += "\\-";
        else if (c == '\n') safe += ' ';
        else safe += c;
    }
    if (safe.starts_with('.') || safe.starts_with('\'')) safe.insert(0, "\\&");
    return safe;
}

std::string option_text(const OptionWord& option) {
    std::string names;
    for (const std::string& name : option.names) names += (names.empty() ? "\\fB" : ", \\fB") + plain(name) + "\\fR";
    if (!option.value.empty()) names += " \\fI" + plain(option.value) + "\\fR";
    return ".TP\n" + names + "\n" + plain(option.help) + "\n";
}

std::string command_text(const CommandWord& command) {
    std::string synopsis = "\\fBrillclock " + command.name + "\\fR";
    for (const PlaceWord& place : command.places) synopsis += place.is_needed ? " \\fI" + place.name + "\\fR" : " [\\fI" + place.name + "\\fR]";
    std::string text = ".SS " + command.name + "\n" + synopsis + "\n.PP\n" + plain(command.help) + ".\n";
    for (const PlaceWord& place : command.places) text += ".TP\n\\fI" + place.name + "\\fR\n" + plain(place.help) + "\n";
    for (const OptionWord& option : command.options) text += option_text(option);
    return text;
}

constexpr const char* rest =
    ".SH EXIT STATUS\n.TP\n0\ndone\n.TP\n1\nthe inputs or the study are at fault; nothing was written\n.TP\n2\nthe command line is at fault\n"
    ".TP\n3\nthe machine is at fault: disk, memory, permissions; nothing was written\n.TP\n130\nstopped by an interrupt; nothing was written\n"
    ".TP\n143\nstopped by a request to end; nothing was written\n"
    ".SH ENVIRONMENT\nWhat GDAL reads of it counts here too, such as \\fBGDAL_CACHEMAX\\fR and \\fBGDAL_NUM_THREADS\\fR. "
    "Nothing is printed in colour, so \\fBNO_COLOR\\fR has nothing to turn off.\n";

}  // namespace

std::string manual_page(const WordTable& table) {
    std::string text = ".TH RILLCLOCK 1\n.SH NAME\nrillclock \\- travel time of water over terrain\n.SH SYNOPSIS\n\\fBrillclock\\fR \\fICOMMAND\\fR ...\n"
                       ".SH DESCRIPTION\n" + plain(table.about) + "\n.SH OPTIONS\n";
    for (const OptionWord& option : table.options) text += option_text(option);
    text += ".SH COMMANDS\n";
    for (const CommandWord& command : table.commands) text += command_text(command);
    return text + rest;
}

}  // namespace rillclock
