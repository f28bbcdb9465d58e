#include "network_words.hpp"

#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

constexpr std::size_t named_at_each_end = 4;

}  // namespace

std::string way_in_words(const StudyResult& result, const std::vector<PointNumber>& way) {
    std::string text;
    for (std::size_t i = 0; i < way.size(); ++i) {
        const bool is_long = way.size() > 2 * named_at_each_end;
        if (is_long && i == named_at_each_end) {
            const std::size_t between = way.size() - 2 * named_at_each_end;
            text += " > … " + std::to_string(between) + " more …";
            i += between;
        }
        text += (text.empty() ? "" : " > ") + point_name(result, way[i]);
    }
    return text;
}

std::string stated_in_words(const StudyResult& result, const std::vector<PointNumber>& points) {
    std::string text;
    for (std::size_t i = 0; i < points.size(); ++i) {
        if (i == 2 * named_at_each_end) return text + ", and " + std::to_string(points.size() - i) + " more";
        text += (text.empty() ? "" : ", ") + point_name(result, points[i]) + " (" + marks_of(result.network.edits[points[i] - 1]) + ")";
    }
    return text;
}

std::string makers_in_words(const StudyResult& result, const PointPeak& peak) {
    std::string text;
    for (const SubareaShare& share : peak.makers) {
        text += (text.empty() ? "" : ", ") + point_name(result, share.subarea) + " " + significant(100.0 * share.of_window, 3) + " %";
    }
    const std::size_t more = peak.subareas_in_window - peak.makers.size();
    return more == 0 ? text : text + ", and " + std::to_string(more) + " more";
}

}  // namespace rillclock
