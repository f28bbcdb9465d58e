#pragma once

#include <string>

#include "html_text.hpp"

namespace rillclock {

// Pieces of the report's charts, in a picture 640 wide that is as high as it has to be. Letters are up to 18 high: on a narrow screen and on
// paper they are made larger within the same picture.

inline constexpr double chart_width = 640.0;
inline constexpr double chart_right = 20.0;   ///< left free beside the last number of an axis

inline std::string px(double value) { return fixed_decimals(value, 1); }

inline std::string text_at(double x, double y, const std::string& anchor, const std::string& text, const std::string& kind = "") {
    return "<text x=\"" + px(x) + "\" y=\"" + px(y) + "\" text-anchor=\"" + anchor + "\"" + (kind.empty() ? "" : " class=\"" + kind + "\"") + ">" +
           html_text(text) + "</text>";
}

inline std::string line_of(double x1, double y1, double x2, double y2, const std::string& kind) {
    return "<line class=\"" + kind + "\" x1=\"" + px(x1) + "\" y1=\"" + px(y1) + "\" x2=\"" + px(x2) + "\" y2=\"" + px(y2) + "\"/>";
}

inline std::string rect_of(double x, double y, double wide, double high, const std::string& kind) {
    return "<rect class=\"" + kind + "\" x=\"" + px(x) + "\" y=\"" + px(y) + "\" width=\"" + px(wide) + "\" height=\"" + px(high) + "\"/>";
}

inline std::string dot_at(double x, double y, double radius, const std::string& kind) {
    return "<circle class=\"" + kind + "\" cx=\"" + px(x) + "\" cy=\"" + px(y) + "\" r=\"" + px(radius) + "\"/>";
}

inline std::string chart_begun(const std::string& finding, double high) {
    return "<svg viewBox=\"0 0 " + px(chart_width) + " " + px(high) + "\" role=\"img\" aria-label=\"" + html_text(finding) + "\">";
}

/// At most so many letters of a text; what is cut is told by dots.
[[nodiscard]] std::string shortened(const std::string& text, std::size_t letters);

}  // namespace rillclock
