#include "json_text.hpp"

#include "rillclock/core/error.hpp"

namespace rillclock {

std::string json_text(const Json& json) { return json.dump(1, ' ', false, Json::error_handler_t::replace); }

std::string member_text(const Json& member) {
    const std::string text = json_text(member);
    std::string indented = "\n  ";
    indented.reserve(2 * text.size());
    // Strings hold no line ends as they are, so that each one found ends a line.
    for (const char c : text) {
        indented += c;
        if (c == '\n') indented += "  ";
    }
    return indented;
}

std::string with_members(const std::string& whole, std::string_view list, const std::vector<std::string>& members) {
    if (members.empty()) return whole;
    const std::string empty = "\n \"" + std::string(list) + "\": []";
    const std::size_t found = whole.find(empty);
    if (found == std::string::npos) throw bug("there is no empty list \"" + std::string(list) + "\"");
    const std::size_t open = found + empty.size() - 1;
    std::size_t size = whole.size() + 2;
    for (const std::string& member : members) size += member.size() + 1;
    std::string text;
    text.reserve(size);
    text.append(whole, 0, open);
    for (std::size_t i = 0; i < members.size(); ++i) text.append(i == 0 ? "" : ",").append(members[i]);
    return text.append("\n ").append(whole, open);
}

}  // namespace rillclock
