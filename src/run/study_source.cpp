#include "rillclock/run/study_source.hpp"

#include <algorithm>
#include <array>
#include <filesystem>
#include <string_view>

#include "rillclock/io/text_file.hpp"
#include "rillclock/study/study_file.hpp"
#include "rillclock/study/study_keys.hpp"
#include "rillclock/surface/cover_book.hpp"

namespace rillclock {
namespace {

bool names_a_file(std::string_view key, const std::string& value) {
    constexpr std::array<std::string_view, 4> files = {"terrain.elevation", "surface.cover", "points.file", "output.folder"};
    if (key == "surface.book") return !is_built_in_book(value);
    return std::find(files.begin(), files.end(), key) != files.end();
}

/// A name from the current folder, as seen from the study file's folder.
std::string as_study_path(const Study& study, const std::string& value) {
    const auto folder = std::filesystem::absolute(study.file).parent_path();
    return std::filesystem::absolute(value).lexically_proximate(folder).string();
}

}  // namespace

Study read_study_file(const std::string& path) { return read_study(read_text(path), path); }

void state_in_study(Study& study, const std::string& key, const std::string& value, const std::string& option) {
    const bool moved = !study.file.empty() && names_a_file(key, value) && located(Study{}, value) == value && !value.empty();
    set_study_value(study, key, {.value = moved ? as_study_path(study, value) : value, .subject = option});
}

}  // namespace rillclock
