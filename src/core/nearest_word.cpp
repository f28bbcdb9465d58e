#include "rillclock/core/nearest_word.hpp"

#include <algorithm>
#include <vector>

namespace rillclock {
namespace {

char small(char letter) {
    return letter >= 'A' && letter <= 'Z' ? static_cast<char>(letter - 'A' + 'a') : letter;
}

bool same(char a, char b) {
    return small(a) == small(b);
}

/// Rows of the table of distances between beginnings of the two words: this one and the two before it.
struct Rows {
    std::vector<std::size_t> earlier, before, now;
};

std::size_t cell_of(const Rows& rows, std::string_view a, std::string_view b, std::size_t i, std::size_t j) {
    const std::size_t change = rows.before[j - 1] + (same(a[i - 1], b[j - 1]) ? 0U : 1U);
    std::size_t least = std::min({rows.before[j] + 1, rows.now[j - 1] + 1, change});
    const bool swapped = i > 1 && j > 1 && same(a[i - 1], b[j - 2]) && same(a[i - 2], b[j - 1]);
    if (swapped) least = std::min(least, rows.earlier[j - 2] + 1);
    return least;
}

std::vector<std::string_view> words_of(std::string_view name) {
    std::vector<std::string_view> words;
    while (!name.empty()) {
        const std::size_t end = std::min(name.find(' '), name.size());
        if (end > 0) words.push_back(name.substr(0, end));
        name.remove_prefix(std::min(end + 1, name.size()));
    }
    return words;
}

std::ptrdiff_t shared_words(std::string_view name, std::string_view candidate) {
    const auto there = words_of(candidate);
    const auto here = words_of(name);
    return std::count_if(here.begin(), here.end(), [&](std::string_view word) {
        return std::any_of(there.begin(), there.end(), [&](std::string_view other) { return edit_distance(word, other) == 0; });
    });
}

/// "A, B or C".
std::string alternatives(std::span<const std::string_view> names) {
    std::string text(names.front());
    for (std::size_t i = 1; i < names.size(); ++i) text += (i + 1 == names.size() ? " or " : ", ") + std::string(names[i]);
    return text;
}

}  // namespace

std::size_t edit_distance(std::string_view a, std::string_view b) {
    Rows rows{.earlier = std::vector<std::size_t>(b.size() + 1),
              .before = std::vector<std::size_t>(b.size() + 1),
              .now = std::vector<std::size_t>(b.size() + 1)};
    for (std::size_t j = 0; j <= b.size(); ++j) rows.now[j] = j;
    for (std::size_t i = 1; i <= a.size(); ++i) {
        std::swap(rows.earlier, rows.before);
        std::swap(rows.before, rows.now);
        rows.now[0] = i;
        for (std::size_t j = 1; j <= b.size(); ++j) rows.now[j] = cell_of(rows, a, b, i, j);
    }
    return rows.now[b.size()];
}

std::optional<std::string_view> nearest_word(std::string_view word, std::span<const std::string_view> candidates) {
    const auto nearest = std::min_element(candidates.begin(), candidates.end(), [&](auto a, auto b) {
        return edit_distance(word, a) < edit_distance(word, b);
    });
    if (nearest == candidates.end()) return std::nullopt;
    const std::size_t allowed = std::max<std::size_t>(2, word.size() / 3);
    const std::size_t distance = edit_distance(word, *nearest);
    if (distance > allowed || distance >= word.size()) return std::nullopt;
    return *nearest;
}

std::string did_you_mean(std::string_view word, std::span<const std::string_view> candidates) {
    const auto nearest = nearest_word(word, candidates);
    return nearest ? "; did you mean " + std::string(*nearest) + "?" : std::string();
}

std::string did_you_mean_any(std::string_view name, std::span<const std::string_view> candidates) {
    constexpr std::size_t most_named = 5;
    std::ptrdiff_t most = 0;
    for (const std::string_view candidate : candidates) most = std::max(most, shared_words(name, candidate));
    if (most == 0) return did_you_mean(name, candidates);
    std::vector<std::string_view> near;
    for (const std::string_view candidate : candidates) {
        if (shared_words(name, candidate) == most) near.push_back(candidate);
    }
    std::stable_sort(near.begin(), near.end(), [&](auto a, auto b) { return edit_distance(name, a) < edit_distance(name, b); });
    near.resize(std::min(near.size(), most_named));
    return "; did you mean " + alternatives(near) + "?";
}

}  // namespace rillclock
