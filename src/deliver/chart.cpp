#include "chart.hpp"

#include <algorithm>
#include <cmath>

#include "html_text.hpp"

namespace rillclock {
namespace {

constexpr double width = 640.0;
constexpr double height = 300.0;
constexpr double left = 62.0;
constexpr double right = 18.0;
constexpr double top = 14.0;
constexpr double bottom = 58.0;

std::string px(double value) { return fixed_decimals(value, 1); }

/// Takes values to places in the picture.
struct Frame {
    ChartAxes axes;
    double high = height;

    [[nodiscard]] double x(double value) const { return left + (value - axes.x_least) / (axes.x_greatest - axes.x_least) * (width - left - right); }
    [[nodiscard]] double y(double value) const {
        return high - bottom - (value - axes.y_least) / (axes.y_greatest - axes.y_least) * (high - top - bottom);
    }
};

std::string text_at(double x, double y, const std::string& anchor, const std::string& text, const std::string& kind = "") {
    return "<text x=\"" + px(x) + "\" y=\"" + px(y) + "\" text-anchor=\"" + anchor + "\"" + (kind.empty() ? "" : " class=\"" + kind + "\"") + ">" +
           html_text(text) + "</text>";
}

std::string line_of(double x1, double y1, double x2, double y2, const std::string& kind) {
    return "<line class=\"" + kind + "\" x1=\"" + px(x1) + "\" y1=\"" + px(y1) + "\" x2=\"" + px(x2) + "\" y2=\"" + px(y2) + "\"/>";
}

std::string begun(const std::string& finding, double high) {
    return "<svg viewBox=\"0 0 " + px(width) + " " + px(high) + "\" role=\"img\" aria-label=\"" + html_text(finding) + "\">";
}

std::string x_grid(const Frame& frame) {
    std::string svg;
    const double step = round_step(frame.axes.x_greatest - frame.axes.x_least, 6);
    for (double value = std::ceil(frame.axes.x_least / step) * step; value <= frame.axes.x_greatest + 1e-9 * step; value += step) {
        svg += line_of(frame.x(value), top, frame.x(value), frame.high - bottom, "grid");
        svg += text_at(frame.x(value), frame.high - bottom + 17, "middle", significant(value, 6), "soft");
    }
    return svg + text_at((left + width - right) / 2, frame.high - bottom + 36, "middle", frame.axes.x_title);
}

std::string y_grid(const Frame& frame) {
    std::string svg;
    const double step = round_step(frame.axes.y_greatest - frame.axes.y_least, 5);
    for (double value = std::ceil(frame.axes.y_least / step) * step; value <= frame.axes.y_greatest + 1e-9 * step; value += step) {
        svg += line_of(left, frame.y(value), width - right, frame.y(value), "grid");
        svg += text_at(left - 6, frame.y(value) + 4, "end", significant(value, 6), "soft");
    }
    const double middle = (top + frame.high - bottom) / 2;
    return svg + "<text x=\"14\" y=\"" + px(middle) + "\" text-anchor=\"middle\" transform=\"rotate(-90 14 " + px(middle) + ")\">" +
           html_text(frame.axes.y_title) + "</text>";
}

std::string polyline(const Frame& frame, const ChartLine& line) {
    std::string points;
    for (const ChartPoint& point : line.points) points += (points.empty() ? "" : " ") + px(frame.x(point.x)) + "," + px(frame.y(point.y));
    return "<polyline class=\"" + line.kind + "\" points=\"" + points + "\"/>";
}

/// Bars under the axis; each says what it is when pointed at, and to those who hear the page the finding does.
std::string stretch_bar(const Frame& frame, const ChartStretch& stretch) {
    const double from = frame.x(stretch.from);
    return "<rect x=\"" + px(from) + "\" y=\"" + px(frame.high - 12) + "\" width=\"" + px(std::max(1.0, frame.x(stretch.to) - from)) +
           "\" height=\"9\" fill=\"" + stretch.colour + "\"><title>" + html_text(stretch.label) + "</title></rect>";
}

ChartAxes with_span(ChartAxes axes) {
    if (!(axes.x_greatest > axes.x_least)) axes.x_greatest = axes.x_least + 1.0;
    if (!(axes.y_greatest > axes.y_least)) axes.y_greatest = axes.y_least + 1.0;
    return axes;
}

}  // namespace

double round_step(double span, double wanted) {
    if (!(span > 0)) return 1.0;
    const double power = std::pow(10.0, std::floor(std::log10(span / wanted)));
    for (const double factor : {1.0, 2.0, 5.0}) {
        if (span / (factor * power) <= wanted) return factor * power;
    }
    return 10.0 * power;
}

std::string line_chart(const std::string& finding, const ChartAxes& axes, const std::vector<ChartLine>& lines,
                       const std::vector<ChartStretch>& stretches) {
    const Frame frame{.axes = with_span(axes)};
    std::string svg = begun(finding, frame.high) + y_grid(frame) + x_grid(frame);
    svg += line_of(left, frame.high - bottom, width - right, frame.high - bottom, "axis");
    for (const ChartLine& line : lines) svg += polyline(frame, line);
    for (const ChartStretch& stretch : stretches) svg += stretch_bar(frame, stretch);
    return svg + "</svg>";
}

std::string dot_chart(const std::string& finding, const std::string& x_title, const std::vector<ChartBar>& values, double mark) {
    constexpr double row = 22.0;
    constexpr double names = 335.0;
    double greatest = mark;
    for (const ChartBar& value : values) greatest = std::max(greatest, value.value);
    greatest = greatest > 0 ? greatest * 1.04 : 1.0;
    const double high = top + row * static_cast<double>(values.size()) + 46.0;
    const double base = high - 46.0;
    const auto x = [&](double value) { return names + value / greatest * (width - names - right); };
    std::string svg = begun(finding, high);
    const double step = round_step(greatest, 6);
    for (double value = 0.0; value <= greatest; value += step) {
        svg += line_of(x(value), top, x(value), base, "grid") + text_at(x(value), base + 17, "middle", significant(value, 6), "soft");
    }
    double y = top + row / 2;
    for (const ChartBar& value : values) {
        svg += text_at(names - 8, y + 4, "end", value.label) + line_of(x(0), y, x(value.value), y, "axis");
        svg += "<circle class=\"dot\" cx=\"" + px(x(value.value)) + "\" cy=\"" + px(y) + "\" r=\"5\"/>";
        y += row;
    }
    svg += line_of(x(mark), top - 6, x(mark), base, "mark");
    return svg + text_at((names + width - right) / 2, base + 36, "middle", x_title) + "</svg>";
}

}  // namespace rillclock
