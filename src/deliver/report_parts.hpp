#pragma once

#include <string>

#include "rillclock/deliver/report.hpp"

namespace rillclock {

/// How much of a point stands in the report.
enum class SectionDetail {
    with_sheet,      ///< all
    without_sheet,   ///< all but the calculation sheet
    figures,         ///< key figures, notices and segments
};

/// The section of one point: key figures, what is stated, notices, charts with their tables, segments, ground, and its calculation sheet.
[[nodiscard]] std::string point_section(const ReportMatter& matter, const Outlet& outlet, SectionDetail detail);

/// Hand-drawn catchments beside those of the elevations: areas and what they have in common. Nothing where none are drawn.
[[nodiscard]] std::string drawn_section(const StudyResult& result);

/// What of the map was reduced, in sentences; nothing where nothing was.
[[nodiscard]] std::string map_reduction(const ReportMatter& matter);

/// The pictures under the map: relief, and travel times over it. Without scripts they are the map.
[[nodiscard]] std::string map_pictures(const ReportMatter& matter);

/// What else the map is drawn from, as JSON that can stand in a script element.
[[nodiscard]] std::string map_data(const ReportMatter& matter);

/// The legend of the map.
[[nodiscard]] std::string map_legend(const ReportMatter& matter);

/// The charts of a point, each in a figure with its table one click away.
[[nodiscard]] std::string point_charts(const ReportMatter& matter, const Outlet& outlet);

/// Of its peaks: by return period, and the search for the duration that makes most. Nothing where the study has none.
[[nodiscard]] std::string peak_figures(const StudyResult& result, const Outlet& outlet);

/// Of the subareas that drain through it: when each arrives, its slack, and its share of the peak. Nothing where there is but one.
[[nodiscard]] std::string subarea_figure(const StudyResult& result, const Outlet& outlet);

/// What is stated of the point and of those above it in place of what is computed; nothing where nothing is.
[[nodiscard]] std::string stated_part(const StudyResult& result, const Outlet& outlet);

/// What the ranges of the inputs make of its time. Nothing where the study does not ask for that.
[[nodiscard]] std::string uncertainty_figure(const StudyResult& result, const Outlet& outlet);

/// A chart with its title above, its caption and its table below; all of them HTML.
[[nodiscard]] std::string figure(const std::string& title, const std::string& chart, const std::string& caption, const std::string& table);

/// A table that opens on a click: `head` and rows are cells of HTML.
[[nodiscard]] std::string hidden_table(const std::string& summary, const std::vector<std::string>& head,
                                       const std::vector<std::vector<std::string>>& rows);
[[nodiscard]] std::string plain_table(const std::vector<std::string>& head, const std::vector<std::vector<std::string>>& rows);

}  // namespace rillclock
