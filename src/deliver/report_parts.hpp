#pragma once

#include <string>

#include "rillclock/deliver/report.hpp"

namespace rillclock {

/// How much of a point stands in the report.
enum class SectionDetail { with_sheet, without_sheet };

/// The section of one point: key figures, notices, charts with their tables, segments, methods, ground, and its calculation sheet.
[[nodiscard]] std::string point_section(const ReportMatter& matter, const Outlet& outlet, SectionDetail detail);

/// What the map is drawn from, as JSON that can stand in a script element.
[[nodiscard]] std::string map_data(const ReportMatter& matter);

/// The legend of the map.
[[nodiscard]] std::string map_legend(const ReportMatter& matter);

/// The charts of a point, each in a figure with its table one click away.
[[nodiscard]] std::string point_charts(const ReportMatter& matter, const Outlet& outlet);

/// A table that opens on a click: `head` and rows are cells of HTML.
[[nodiscard]] std::string hidden_table(const std::string& summary, const std::vector<std::string>& head,
                                       const std::vector<std::vector<std::string>>& rows);
[[nodiscard]] std::string plain_table(const std::vector<std::string>& head, const std::vector<std::vector<std::string>>& rows);

}  // namespace rillclock
