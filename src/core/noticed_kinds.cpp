#include "rillclock/core/noticed_kinds.hpp"

#include <algorithm>

namespace rillclock {
namespace {

constexpr std::size_t most_points_named = 4;

}  // namespace

std::vector<NoticedKind> noticed_kinds(const Notices& notices) {
    std::vector<NoticedKind> kinds;
    for (const Notice& notice : notices) {
        const auto known = std::find_if(kinds.begin(), kinds.end(), [&](const NoticedKind& kind) {
            return kind.first->code == notice.code && !kind.first->point.empty();
        });
        if (known == kinds.end() || notice.point.empty()) {
            kinds.push_back({.first = &notice, .other_points = {}});
        } else {
            known->other_points.push_back(notice.point);
        }
    }
    return kinds;
}

std::string likewise_words(const NoticedKind& kind) {
    const std::vector<std::string>& points = kind.other_points;
    if (points.empty()) return "";
    std::string text = "Likewise at " + std::to_string(points.size()) + " more: ";
    for (std::size_t i = 0; i < std::min(most_points_named, points.size()); ++i) text += (i == 0 ? "'" : ", '") + points[i] + "'";
    if (points.size() > most_points_named) text += " and " + std::to_string(points.size() - most_points_named) + " others";
    return text + ".";
}

}  // namespace rillclock
