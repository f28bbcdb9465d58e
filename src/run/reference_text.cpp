#include "rillclock/run/reference_text.hpp"

#include "rillclock/deliver/cautions.hpp"
#include "rillclock/deliver/version.hpp"
#include "rillclock/hydraulics/lump_methods.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/hydraulics/methods.hpp"
#include "rillclock/hydraulics/roughness.hpp"
#include "rillclock/io/library_versions.hpp"
#include "rillclock/study/study_keys.hpp"
#include "rillclock/surface/printed_coefficients.hpp"
#include "rillclock/surface/runoff_coefficients.hpp"

namespace rillclock {
namespace {

std::string method_text(const Method& method) {
    std::string text = std::string(method.id) + ": " + std::string(method.name) + "\n";
    text += "    formula  " + std::string(method.formula) + "\n";
    for (const MethodInput& input : method.inputs) {
        text += "    input    " + std::string(input.symbol) + ": " + std::string(input.meaning);
        text += input.unit.empty() ? "\n" : " [" + std::string(input.unit) + "]\n";
    }
    text += "    range    " + std::string(method.range) + "\n";
    return text + "    source   " + std::string(method.source) + " (" + std::string(words(method.trust)) + ")\n";
}

std::string roughness_text(const RoughnessTable& table) {
    std::string text = "Manning's n of " + std::string(table.of) + "\n";
    for (const RoughnessEntry& row : table.entries) {
        const bool is_range = row.least < row.greatest;
        text += "    " + significant(row.typical, 4) + "  " + std::string(row.surface) +
                (is_range ? " (" + significant(row.least, 4) + " to " + significant(row.greatest, 4) + ")\n" : "\n");
    }
    if (!table.remark.empty()) text += "    remark   " + std::string(table.remark) + "\n";
    return text + "    source   " + std::string(table.source) + " (" + std::string(words(table.trust)) + ")\n";
}

std::string range_text(const PrintedRange& range) {
    return significant(range.used(), 4) + (range.is_range() ? " (" + significant(range.least, 4) + " to " + significant(range.greatest, 4) + ")" : "");
}

std::string coefficients_text(const CoefficientTable& table) {
    std::string text = "Runoff coefficients of " + std::string(table.of) + (table.is_of_addends ? "\n" : ", named in the column land_use of a cover book\n");
    for (const CoefficientRow& row : table.rows) {
        text += "    " + std::string(row.name) + ": ";
        for (const PrintedRange& range : row.by_slope) text += (&range == &row.by_slope.front() ? "" : ", ") + range_text(range);
        text += "\n";
    }
    if (!table.remark.empty()) text += "    remark   " + std::string(table.remark) + "\n";
    return text + "    source   " + std::string(table.source) + " (" + std::string(words(table.trust)) + ")\n";
}

/// The names of the uses whose coefficients are printed by soil group, slope and return period.
std::string land_uses_text() {
    std::string text;
    for (const LandUse& use : land_uses()) text += (text.empty() ? "" : ", ") + std::string(use.name);
    return "Land uses of the method runoff-land-use, named in the column land_use of a cover book\n    " + text + "\n";
}

}  // namespace

std::string version_line() {
    const std::string database = proj_database_opens() ? "its database opens" : "but its database does not open: install proj-data, or set PROJ_DATA";
    return "rillclock " + std::string(version_text) + ", GDAL " + gdal_version() + ", PROJ " + proj_version() + " (" + database + ")";
}

std::string methods_text() {
    std::string text;
    for (const Method& method : methods()) text += (text.empty() ? "" : "\n") + method_text(method);
    for (const LumpMethod& method : lump_methods()) text += "\n" + method_text(method.about);
    for (const RoughnessTable& table : roughness_tables()) text += "\n" + roughness_text(table);
    text += "\n" + land_uses_text();
    for (const CoefficientTable& table : coefficient_tables()) text += "\n" + coefficients_text(table);
    return text;
}

std::string keys_text() {
    std::string text;
    std::string section;
    for (const StudyKey& key : study_keys()) {
        const std::size_t dot = key.key.find('.');
        const std::string own = dot == std::string_view::npos ? "" : std::string(key.key.substr(0, dot));
        if (own != section) text += "\n[" + own + "]\n";
        section = own;
        const auto name = dot == std::string_view::npos ? key.key : key.key.substr(dot + 1);
        text += "# " + std::string(key.help) + " (default: " + std::string(key.standard) + ")\n";
        text += std::string(name) + " = " + std::string(key.form) + "\n";
    }
    return text + "\n# [scenario.NAME] holds those keys of surface, rain, timing, peaks and methods, points.pipes and title that differ from the study in a\n" +
           "# scenario, such as surface.cover = \"cover-plan.tif\"; a run works out both and compares them\n";
}

std::vector<std::string> caution_lines() { return {cautions.begin(), cautions.end()}; }

}  // namespace rillclock
