#include <algorithm>
#include <cmath>
#include <limits>

#include "chart.hpp"
#include "chart_drawing.hpp"

namespace rillclock {
namespace {

constexpr double row_left = 8.0;
constexpr double name_high = 22.0;     ///< of a row's name and note
constexpr double lane_high = 13.0;
constexpr double row_gap = 9.0;
constexpr double row_axis_high = 48.0;
constexpr std::size_t most_letters = 34;

struct Span {
    double least = 0.0;
    double greatest = 1.0;
    [[nodiscard]] double x(double value) const { return row_left + (value - least) / (greatest - least) * (chart_width - row_left - chart_right); }
};

Span span_of(const std::vector<ChartRow>& rows, const RowScale& scale) {
    Span span{.least = scale.mark.value_or(std::numeric_limits<double>::infinity()), .greatest = scale.mark.value_or(0.0)};
    for (const ChartRow& row : rows) {
        for (const ChartPart& part : row.parts) {
            const bool is_place = part.kind == "tick" || part.kind == "dot";
            span.least = std::min(span.least, is_place ? part.to : std::min(part.from, part.to));
            span.greatest = std::max({span.greatest, part.from, part.to});
        }
    }
    const double step = round_step(span.greatest - span.least, 6);
    span.least = scale.begins_at_zero || !std::isfinite(span.least) ? 0.0 : std::max(0.0, step * std::floor(span.least / step));
    if (!(span.greatest > span.least)) span.greatest = span.least + 1.0;
    return span;
}

std::size_t lanes_of(const ChartRow& row) {
    std::size_t lanes = 1;
    for (const ChartPart& part : row.parts) lanes = std::max(lanes, part.lane + 1);
    return lanes;
}

std::string drawn(const Span& scale, const ChartPart& part, double y) {
    const double middle = y + lane_high / 2;
    const double from = scale.x(std::min(part.from, part.to));
    const double to = scale.x(std::max(part.from, part.to));
    if (part.kind == "reach") return line_of(from, middle, to, middle, "reach");
    if (part.kind == "tick") return line_of(to, y - 1, to, y + lane_high, "tick");
    if (part.kind == "dot") return dot_at(to, middle, 5, "dot");
    return rect_of(from, y + 1, std::max(1.0, to - from), lane_high - 2, part.kind);
}

std::string axis(const Span& span, double base) {
    std::string svg;
    const double step = round_step(span.greatest - span.least, 6);
    for (double value = step * std::ceil(span.least / step); value <= span.greatest + 1e-9 * step; value += step) {
        const std::string anchor = span.x(value) > row_left + 15 ? "middle" : "start";
        svg += line_of(span.x(value), 2, span.x(value), base, "grid") + text_at(span.x(value), base + 19, anchor, significant(value, 6), "soft");
    }
    return svg;
}

}  // namespace

std::string row_chart(const std::string& finding, const RowScale& scale, const std::vector<ChartRow>& rows) {
    const Span span = span_of(rows, scale);
    std::string svg;
    double y = 2.0;
    for (const ChartRow& row : rows) {
        svg += text_at(row_left, y + 16, "start", shortened(row.label, most_letters)) + text_at(chart_width - chart_right - 6, y + 16, "end", row.note, "soft");
        y += name_high;
        for (const ChartPart& part : row.parts) svg += drawn(span, part, y + lane_high * static_cast<double>(part.lane));
        y += lane_high * static_cast<double>(lanes_of(row)) + row_gap;
    }
    const std::string mark = scale.mark ? line_of(span.x(*scale.mark), 2, span.x(*scale.mark), y, "mark") : std::string();
    return chart_begun(finding, y + row_axis_high) + axis(span, y) + mark + svg + text_at(chart_width / 2, y + 41, "middle", scale.title) + "</svg>";
}

std::string chart_keys(const std::vector<ChartKey>& keys) {
    std::string html = "<div class=\"keys\">";
    for (const auto& [kind, words] : keys) {
        std::string drawing = rect_of(1, 2, 24, 10, kind);
        if (kind == "reach" || kind == "mark") drawing = line_of(0, 7, 26, 7, kind);
        if (kind == "tick") drawing = line_of(13, 0, 13, 14, kind);
        if (kind == "dot") drawing = dot_at(13, 7, 5, kind);
        html += "<span><svg width=\"26\" height=\"14\" aria-hidden=\"true\">" + drawing + "</svg> " + html_text(words) + "</span>";
    }
    return html + "</div>";
}

}  // namespace rillclock
