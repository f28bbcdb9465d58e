#pragma once

#include <string>
#include <vector>

namespace rillclock {

struct ChartPoint {
    double x = 0.0;
    double y = 0.0;
};

struct ChartLine {
    std::string kind;   ///< class of the report's style sheet: "ground", "spill", "curve"
    std::vector<ChartPoint> points = {};
};

/// A stretch of the x axis that is marked below the chart.
struct ChartStretch {
    double from = 0.0;
    double to = 0.0;
    std::string colour;
    std::string label;
};

struct ChartAxes {
    std::string x_title;
    std::string y_title;
    double x_least = 0.0;
    double x_greatest = 1.0;
    double y_least = 0.0;
    double y_greatest = 1.0;
};

/// A chart with axes in round numbers, as SVG. `finding` is its alternative text: what there is to see.
[[nodiscard]] std::string line_chart(const std::string& finding, const ChartAxes& axes, const std::vector<ChartLine>& lines,
                                     const std::vector<ChartStretch>& stretches = {});

struct ChartBar {
    std::string label;
    double value = 0.0;
};

/// Values on one scale, each with its name; a dashed line at `mark`.
[[nodiscard]] std::string dot_chart(const std::string& finding, const std::string& x_title, const std::vector<ChartBar>& values, double mark);

/// A step of 1, 2 or 5 times a power of ten of which about `wanted` make the span.
[[nodiscard]] double round_step(double span, double wanted);

}  // namespace rillclock
