#include "rillclock/run/study_source.hpp"

#include <algorithm>
#include <array>
#include <charconv>
#include <cstdint>
#include <filesystem>
#include <string_view>

#include "rillclock/io/text_file.hpp"
#include "rillclock/study/study_file.hpp"
#include "rillclock/study/study_keys.hpp"
#include "rillclock/surface/cover_book.hpp"

namespace rillclock {
namespace {

bool names_a_file(std::string_view key, const std::string& value) {
    constexpr std::array<std::string_view, 5> files = {"terrain.elevation", "surface.cover", "points.file", "rain.file", "output.folder"};
    if (key == "surface.book") return !is_built_in_book(value);
    return std::find(files.begin(), files.end(), key) != files.end();
}

/// A name from the current folder, as seen from the study file's folder.
std::string as_study_path(const Study& study, const std::string& value) {
    const auto folder = std::filesystem::absolute(study.file).parent_path();
    return std::filesystem::absolute(value).lexically_proximate(folder).string();
}

/// Words on a command line are texts; a key that is a number in a study file is made one where it can be.
StudyValue typed(const std::string& key, const std::string& text, const std::string& option) {
    std::int64_t number = 0;
    const auto [end, failed] = std::from_chars(text.data(), text.data() + text.size(), number);
    const bool is_number = key == "surface.fallback_class" && failed == std::errc{} && end == text.data() + text.size();
    if (is_number) return {.value = number, .subject = option};
    return {.value = text, .subject = option};
}

}  // namespace

Study read_study_file(const std::string& path) { return read_study(read_text(path), path); }

void state_in_study(Study& study, const std::string& key, const std::string& value, const std::string& option) {
    const bool moved = !study.file.empty() && names_a_file(key, value) && located(Study{}, value) == value && !value.empty();
    set_study_value(study, key, typed(key, moved ? as_study_path(study, value) : value, option));
}

}  // namespace rillclock
