#include <algorithm>

#include "chart.hpp"
#include "chart_drawing.hpp"

namespace rillclock {
namespace {

constexpr double left = 8.0;
constexpr double name_high = 22.0;     ///< of a row's name and note
constexpr double lane_high = 13.0;
constexpr double row_gap = 9.0;
constexpr double axis_high = 48.0;
constexpr std::size_t most_letters = 34;

struct Scale {
    double greatest = 1.0;
    [[nodiscard]] double x(double value) const { return left + value / greatest * (chart_width - left - chart_right); }
};

double greatest_of(const std::vector<ChartRow>& rows, std::optional<double> mark) {
    double greatest = mark.value_or(0.0);
    for (const ChartRow& row : rows) {
        for (const ChartPart& part : row.parts) greatest = std::max({greatest, part.from, part.to});
    }
    return greatest > 0 ? greatest * 1.02 : 1.0;
}

std::size_t lanes_of(const ChartRow& row) {
    std::size_t lanes = 1;
    for (const ChartPart& part : row.parts) lanes = std::max(lanes, part.lane + 1);
    return lanes;
}

std::string drawn(const Scale& scale, const ChartPart& part, double y) {
    const double middle = y + lane_high / 2;
    const double from = scale.x(std::min(part.from, part.to));
    const double to = scale.x(std::max(part.from, part.to));
    if (part.kind == "reach") return line_of(from, middle, to, middle, "reach");
    if (part.kind == "tick") return line_of(to, y - 1, to, y + lane_high, "tick");
    if (part.kind == "dot") return dot_at(to, middle, 5, "dot");
    return rect_of(from, y + 1, std::max(1.0, to - from), lane_high - 2, part.kind);
}

std::string axis(const Scale& scale, double ceiling, double base) {
    std::string svg;
    const double step = round_step(scale.greatest, 6);
    for (double value = 0.0; value <= scale.greatest; value += step) {
        svg += line_of(scale.x(value), ceiling, scale.x(value), base, "grid");
        svg += text_at(scale.x(value), base + 19, value > 0 ? "middle" : "start", significant(value, 6), "soft");
    }
    return svg;
}

}  // namespace

std::string row_chart(const std::string& finding, const std::string& x_title, const std::vector<ChartRow>& rows, std::optional<double> mark) {
    const Scale scale{.greatest = greatest_of(rows, mark)};
    std::string svg;
    double y = 2.0;
    for (const ChartRow& row : rows) {
        svg += text_at(left, y + 16, "start", shortened(row.label, most_letters)) + text_at(chart_width - chart_right, y + 16, "end", row.note, "soft");
        y += name_high;
        for (const ChartPart& part : row.parts) svg += drawn(scale, part, y + lane_high * static_cast<double>(part.lane));
        y += lane_high * static_cast<double>(lanes_of(row)) + row_gap;
    }
    const std::string mark_line = mark ? line_of(scale.x(*mark), 2, scale.x(*mark), y, "mark") : std::string();
    return chart_begun(finding, y + axis_high) + axis(scale, 2, y) + mark_line + svg + text_at(chart_width / 2, y + 41, "middle", x_title) + "</svg>";
}

std::string chart_key(const std::string& kind, const std::string& text) {
    const std::string drawing = kind == "reach" || kind == "mark" ? line_of(0, 7, 26, 7, kind)
                                : kind == "tick"                  ? line_of(13, 0, 13, 14, kind)
                                : kind == "dot"                   ? dot_at(13, 7, 5, kind)
                                                                  : rect_of(1, 2, 24, 10, kind);
    return "<span class=\"key\"><svg width=\"26\" height=\"14\" aria-hidden=\"true\">" + drawing + "</svg> " + text + "</span>";
}

}  // namespace rillclock
