#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

namespace rillclock {

// Charts are SVG with their texts in them. `finding` is a chart's alternative text: what there is to see. `kind` is a class of the report's
// style sheet. Labels are plain text, made safe here.

struct ChartPoint {
    double x = 0.0;
    double y = 0.0;
};

struct ChartLine {
    std::string kind;   ///< "ground", "spill", "pond", "curve"
    std::vector<ChartPoint> points = {};
};

/// A stretch of the x axis that is marked below the chart.
struct ChartStretch {
    double from = 0.0;
    double to = 0.0;
    std::string colour;   ///< of its bar; none where the label stands in it instead, as far as there is room
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

/// Stretches side by side, in a bar of their own.
using ChartStrip = std::vector<ChartStretch>;

/// A chart with axes in round numbers, strips under it.
[[nodiscard]] std::string line_chart(const std::string& finding, const ChartAxes& axes, const std::vector<ChartLine>& lines,
                                     const std::vector<ChartStrip>& strips = {});

/// One of several quantities over the same x axis; its own axis begins at 0.
struct ChartPanel {
    std::string title;
    std::vector<ChartPoint> points = {};   ///< joined by a line, each with a dot
};

/// A place of the x axis that is marked through all panels.
struct ChartMark {
    double x = 0.0;
    std::string label;
};

/// Panels one above the other. Marks are at most two.
[[nodiscard]] std::string panel_chart(const std::string& finding, const std::string& x_title, const std::vector<ChartPanel>& panels,
                                      const std::vector<ChartMark>& marks);

/// A piece of a row: from one value to another, or at one.
struct ChartPart {
    double from = 0.0;
    double to = 0.0;
    std::string kind;          ///< "bar", "open", "faint", "reach" (a thin line), "tick" and "dot" (both at `to`)
    std::size_t lane = 0;      ///< bars of different lanes lie one below the other
};

/// A row with its name, a note at its end, and what is drawn below these.
struct ChartRow {
    std::string label;
    std::string note = {};
    std::vector<ChartPart> parts = {};
};

/// The scale of rows.
struct RowScale {
    std::string title;
    std::optional<double> mark = {};   ///< a dashed line there
    bool begins_at_zero = true;        ///< else a little below the least value: for ranges, whose lengths still compare
};

/// Rows on one scale.
[[nodiscard]] std::string row_chart(const std::string& finding, const RowScale& scale, const std::vector<ChartRow>& rows);

/// A kind of part, or "mark", and in plain words what it stands for.
struct ChartKey {
    std::string kind;
    std::string words;
};

/// What kinds of parts look like, to stand in a caption.
[[nodiscard]] std::string chart_keys(const std::vector<ChartKey>& keys);

/// A step of 1, 2 or 5 times a power of ten of which about `wanted` make the span.
[[nodiscard]] double round_step(double span, double wanted);

}  // namespace rillclock
