#pragma once

#include <cstddef>
#include <optional>
#include <span>
#include <string>
#include <string_view>

namespace rillclock {

/// How many letters must be put in, taken out, changed or swapped with their neighbour to make one word of the other
/// (optimal string alignment); capital and small letters (ASCII) are the same. Cost: product of the lengths.
[[nodiscard]] std::size_t edit_distance(std::string_view a, std::string_view b);

/// The candidate that is nearest to the word, for "did you mean"; none where even the nearest differs in more than a
/// third of the word's letters (two may always differ) or in all of them. The first of equals.
[[nodiscard]] std::optional<std::string_view> nearest_word(std::string_view word,
                                                           std::span<const std::string_view> candidates);

/// "; did you mean X?", or nothing where no candidate is near.
[[nodiscard]] std::string did_you_mean(std::string_view word, std::span<const std::string_view> candidates);

/// The same for names of several words: those of the candidates that share most words with the name, five at most, the nearest first;
/// where none shares any, as above. Words are between spaces; capital and small letters are the same.
[[nodiscard]] std::string did_you_mean_any(std::string_view name, std::span<const std::string_view> candidates);

}  // namespace rillclock
