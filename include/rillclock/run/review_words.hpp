#pragma once

#include <filesystem>
#include <string>
#include <vector>

#include "rillclock/core/notice.hpp"

namespace rillclock {

/// What a person wrote in the `reviewed` column of a review table, beside the notice it was written for.
struct ReviewWord {
    std::string point;    ///< empty for notices of the whole study
    std::string notice;   ///< its code
    std::string text;     ///< of the notice
    std::string word;
};

/// The words of `tables/review.csv` in a result folder, in the order of its rows; none where there is no such table.
///
/// Throws an input error, with the line, for a table that cannot be read: a run over it would lose the words.
[[nodiscard]] std::vector<ReviewWord> review_words(const std::filesystem::path& result_folder);

/// The words as they go on.
struct CarriedWords {
    std::vector<std::string> by_notice;   ///< one for each notice, most of them empty
    std::vector<ReviewWord> dropped;      ///< whose notice is not there any more
};

/// Gives each word to a notice of the same point and code: to one of the same text where there is one, else to the first that
/// has none yet.
[[nodiscard]] CarriedWords carry_over(const std::vector<ReviewWord>& words, const Notices& notices);

/// What became of the words, in sentences; none where there were none.
[[nodiscard]] std::vector<std::string> sentences_on(const CarriedWords& carried);

}  // namespace rillclock
