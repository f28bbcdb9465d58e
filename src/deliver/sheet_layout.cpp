#include <algorithm>
#include <string>
#include <vector>

#include "rillclock/deliver/calculation_sheet.hpp"

namespace rillclock {
namespace {

constexpr std::size_t widest = 100;

bool begins_letter(char c) { return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U; }
std::size_t letters(std::string_view text) { return static_cast<std::size_t>(std::count_if(text.begin(), text.end(), begins_letter)); }

/// Names are anything a file may hold: control characters (also those of two bytes) become blanks, so that none moves the cursor.
std::string printable(std::string_view text) {
    std::string plain;
    for (std::size_t i = 0; i < text.size(); ++i) {
        const auto byte = static_cast<unsigned char>(text[i]);
        const bool high_control = byte == 0xC2U && i + 1 < text.size() && static_cast<unsigned char>(text[i + 1]) < 0xA0U;
        if (high_control) ++i;
        plain += high_control || byte < 0x20U || byte == 0x7FU ? ' ' : text[i];
    }
    return plain;
}

/// Words put into lines; the first begins with `first`, the others with `rest`. Before an equals sign is the best place to break.
std::string wrapped(const std::string& first, const std::string& rest, std::string_view text) {
    std::string all;
    std::string line = first;
    bool line_is_bare = true;
    std::size_t at = 0;
    while (at < text.size()) {
        const std::size_t end = std::min(text.find(' ', at), text.size());
        const std::string_view word = text.substr(at, end - at);
        at = end + 1;
        if (word.empty()) continue;
        if (!line_is_bare && letters(line) + 1 + letters(word) > widest) {
            all += line + "\n";
            line = rest;
            line_is_bare = true;
        }
        line += (line_is_bare ? "" : " ") + std::string(word);
        line_is_bare = false;
    }
    return all + line + "\n";
}

std::string blanks(std::size_t count) { return std::string(count, ' '); }

/// A calculation that is too long for a line is broken before its result.
std::string calculation_text(const SheetLine& line, std::size_t indent) {
    const std::string head = blanks(indent) + line.label + " = ";
    if (letters(head) + letters(line.text) <= widest) return head + line.text + "\n";
    const std::size_t result = line.text.rfind(" = ");
    const std::string rest = blanks(indent + line.label.size() + 1);
    return wrapped(head, rest + "  ", line.text.substr(0, result)) + rest + line.text.substr(result + 1) + "\n";
}

std::string line_text(const SheetLine& line) {
    const std::string text = printable(line.text);
    const std::string label = printable(line.label);
    switch (line.kind) {
        case SheetLine::Kind::title: return wrapped("", "", text) + std::string(std::min(widest, letters(text)), '=') + "\n";
        case SheetLine::Kind::heading: return "\n" + text + "\n" + std::string(letters(text), '-') + "\n";
        case SheetLine::Kind::words: return wrapped("", "", text);
        case SheetLine::Kind::item: return wrapped("* ", "  ", text);
        case SheetLine::Kind::fact: return wrapped("    " + label + ": ", "      ", text);
        case SheetLine::Kind::calculation: return calculation_text(line, 4);
    }
    return {};
}

/// What Markdown or HTML would take for more than a letter is escaped.
std::string escaped(std::string_view text) {
    std::string safe;
    for (const char c : printable(text)) {
        if (std::string_view("\\`*_{}[]()<>#+!|~&").find(c) != std::string_view::npos) safe += '\\';
        safe += c;
    }
    return safe;
}

std::string line_markdown(const SheetLine& line) {
    switch (line.kind) {
        case SheetLine::Kind::title: return "# " + escaped(line.text) + "\n\n";
        case SheetLine::Kind::heading: return "\n## " + escaped(line.text) + "\n\n";
        case SheetLine::Kind::words: return "\n" + escaped(line.text) + "\n\n";
        case SheetLine::Kind::item: return "\n- " + escaped(line.text) + "\n";
        case SheetLine::Kind::fact: return "  - **" + escaped(line.label) + "**: " + escaped(line.text) + "\n";
        case SheetLine::Kind::calculation: return calculation_text(line, 6);
    }
    return {};
}

}  // namespace

std::string sheet_text(const CalculationSheet& sheet) {
    std::string text;
    for (const SheetLine& line : sheet) text += line_text(line);
    return text;
}

std::string sheet_markdown(const CalculationSheet& sheet) {
    std::string text;
    bool in_block = false;
    for (const SheetLine& line : sheet) {
        const bool is_calculation = line.kind == SheetLine::Kind::calculation;
        if (is_calculation != in_block) text += is_calculation ? "\n  ```text\n" : "  ```\n";
        in_block = is_calculation;
        text += line_markdown(line);
    }
    return text + (in_block ? "  ```\n" : "");
}

}  // namespace rillclock
