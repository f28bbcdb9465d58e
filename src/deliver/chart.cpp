#include "chart.hpp"

#include <algorithm>
#include <cmath>

#include "chart_drawing.hpp"

namespace rillclock {
namespace {

constexpr double left = 66.0;
constexpr double top = 30.0;          ///< room for the title of the y axis
constexpr double plot_high = 215.0;
constexpr double axis_high = 50.0;    ///< room for the numbers and the title of the x axis
constexpr double strip_high = 18.0;
constexpr double panel_high = 92.0;
constexpr double panel_gap = 34.0;
constexpr double letter = 9.6;        ///< width of a letter where they are largest

/// Takes values to places in the picture.
struct Frame {
    ChartAxes axes;
    double ceiling = top;
    double base = top + plot_high;

    [[nodiscard]] double x(double value) const { return left + (value - axes.x_least) / (axes.x_greatest - axes.x_least) * (chart_width - left - chart_right); }
    [[nodiscard]] double y(double value) const { return base - (value - axes.y_least) / (axes.y_greatest - axes.y_least) * (base - ceiling); }
};

/// Round numbers between two values.
std::vector<double> round_numbers(double least, double greatest, double wanted) {
    std::vector<double> numbers;
    const double step = round_step(greatest - least, wanted);
    for (double value = std::ceil(least / step) * step; value <= greatest + 1e-9 * step; value += step) numbers.push_back(value);
    return numbers;
}

std::string x_lines(const Frame& frame) {
    std::string svg;
    for (const double value : round_numbers(frame.axes.x_least, frame.axes.x_greatest, 6)) {
        svg += line_of(frame.x(value), frame.ceiling, frame.x(value), frame.base, "grid");
    }
    return svg;
}

std::string x_axis(const Frame& frame) {
    std::string svg = line_of(left, frame.base, chart_width - chart_right, frame.base, "axis");
    for (const double value : round_numbers(frame.axes.x_least, frame.axes.x_greatest, 6)) {
        svg += text_at(frame.x(value), frame.base + 19, "middle", significant(value, 6), "soft");
    }
    return svg + text_at((left + chart_width - chart_right) / 2, frame.base + 41, "middle", frame.axes.x_title);
}

std::string y_axis(const Frame& frame, double wanted) {
    std::string svg;
    for (const double value : round_numbers(frame.axes.y_least, frame.axes.y_greatest, wanted)) {
        svg += line_of(left, frame.y(value), chart_width - chart_right, frame.y(value), "grid");
        svg += text_at(left - 7, frame.y(value) + 5, "end", significant(value, 6), "soft");
    }
    return svg + text_at(4, frame.ceiling - 12, "start", frame.axes.y_title);
}

std::string polyline(const Frame& frame, const ChartLine& line) {
    std::string points;
    for (const ChartPoint& point : line.points) points += (points.empty() ? "" : " ") + px(frame.x(point.x)) + "," + px(frame.y(point.y));
    return "<polyline class=\"" + line.kind + "\" points=\"" + points + "\"/>";
}

/// A stretch says what it is when pointed at, and in it where there is room; to those who hear the page the finding does.
std::string stretch_bar(const Frame& frame, const ChartStretch& stretch, double y) {
    const double from = frame.x(stretch.from);
    const double wide = std::max(1.0, frame.x(stretch.to) - from);
    const std::string look = stretch.colour.empty() ? "class=\"strip\"" : "fill=\"" + stretch.colour + "\"";
    std::string svg = "<rect x=\"" + px(from) + "\" y=\"" + px(y) + "\" width=\"" + px(wide) + "\" height=\"" + px(stretch.colour.empty() ? strip_high : 9.0) +
                      "\" " + look + "><title>" + html_text(stretch.label) + "</title></rect>";
    const auto room = static_cast<std::size_t>(wide / letter);
    if (stretch.colour.empty() && room >= 5) svg += text_at(from + wide / 2, y + 13, "middle", shortened(stretch.label, room), "small");
    return svg;
}

ChartAxes with_span(ChartAxes axes) {
    if (!(axes.x_greatest > axes.x_least)) axes.x_greatest = axes.x_least + 1.0;
    if (!(axes.y_greatest > axes.y_least)) axes.y_greatest = axes.y_least + 1.0;
    return axes;
}

Frame panel_frame(const ChartPanel& panel, const std::string& x_title, double x_greatest, double ceiling) {
    double greatest = 0.0;
    for (const ChartPoint& point : panel.points) greatest = std::max(greatest, point.y);
    return {.axes = with_span({.x_title = x_title, .y_title = panel.title, .x_greatest = x_greatest, .y_greatest = greatest}),
            .ceiling = ceiling, .base = ceiling + panel_high};
}

/// The names of two marks stand one above the other, to that side of the line where there is more room.
std::string mark_line(const Frame& frame, const ChartMark& mark, double name_at, double base) {
    const double x = frame.x(mark.x);
    const bool is_right = x > chart_width / 2;
    return line_of(x, name_at - 11, x, base, "mark") + text_at(x + (is_right ? -5 : 5), name_at, is_right ? "end" : "start", mark.label);
}

}  // namespace

std::string shortened(const std::string& text, std::size_t letters) {
    std::size_t seen = 0;
    std::size_t cut = text.size();   // before the last letter that may stay, for the dots
    for (std::size_t i = 0; i < text.size(); ++i) {
        if ((static_cast<unsigned char>(text[i]) & 0xC0U) == 0x80U) continue;   // within a letter of several bytes
        ++seen;
        if (seen == letters) cut = i;
        if (seen > letters) return text.substr(0, cut) + "…";
    }
    return text;
}

double round_step(double span, double wanted) {
    if (!(span > 0)) return 1.0;
    const double power = std::pow(10.0, std::floor(std::log10(span / wanted)));
    for (const double factor : {1.0, 2.0, 5.0}) {
        if (span / (factor * power) <= wanted) return factor * power;
    }
    return 10.0 * power;
}

std::string line_chart(const std::string& finding, const ChartAxes& axes, const std::vector<ChartLine>& lines,
                       const std::vector<ChartStrip>& strips) {
    const Frame frame{.axes = with_span(axes)};
    double y = frame.base + axis_high;
    std::string bars;
    for (const ChartStrip& strip : strips) {
        double lowest = 0.0;
        for (const ChartStretch& stretch : strip) {
            bars += stretch_bar(frame, stretch, y);
            lowest = std::max(lowest, stretch.colour.empty() ? strip_high : 9.0);
        }
        y += lowest + 4.0;
    }
    std::string svg = chart_begun(finding, y) + y_axis(frame, 5) + x_lines(frame);
    for (const ChartLine& line : lines) svg += polyline(frame, line);
    return svg + x_axis(frame) + bars + "</svg>";
}

std::string panel_chart(const std::string& finding, const std::string& x_title, const std::vector<ChartPanel>& panels,
                        const std::vector<ChartMark>& marks) {
    double x_greatest = 0.0;
    for (const ChartPanel& panel : panels) {
        for (const ChartPoint& point : panel.points) x_greatest = std::max(x_greatest, point.x);
    }
    const double names = 20.0 * static_cast<double>(marks.size());
    std::string svg;
    Frame frame;
    double ceiling = names + top;
    for (const ChartPanel& panel : panels) {
        frame = panel_frame(panel, x_title, x_greatest, ceiling);
        svg += x_lines(frame) + y_axis(frame, 3) + polyline(frame, {.kind = "curve", .points = panel.points});
        for (const ChartPoint& point : panel.points) svg += dot_at(frame.x(point.x), frame.y(point.y), 2.5, "curve-dot");
        ceiling += panel_high + panel_gap;
    }
    svg += x_axis(frame);
    for (std::size_t i = 0; i < marks.size(); ++i) svg += mark_line(frame, marks[i], 19.0 + 20.0 * static_cast<double>(i), frame.base);
    return chart_begun(finding, frame.base + axis_high) + svg + "</svg>";
}

}  // namespace rillclock
