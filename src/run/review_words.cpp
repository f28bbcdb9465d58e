#include "rillclock/run/review_words.hpp"

#include <algorithm>

#include "rillclock/core/csv_text.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/io/text_file.hpp"

namespace rillclock {
namespace {

std::size_t column_of(const CsvTable& table, std::string_view name, const std::string& file) {
    const auto place = table.column(name);
    if (place) return *place;
    throw input_error(file + " has no column " + std::string(name) +
                      ", so the words of its reviewed column would be lost; put the column back, or remove the file");
}

CsvTable table_of(const std::string& file) {
    try {
        return parse_csv(read_text(file), file);
    } catch (const Error& error) {
        if (error.fault() != Fault::inputs) throw;
        throw input_error(std::string(error.what()) + " (the words of its reviewed column would be lost; mend the file, or remove it)");
    }
}

bool is_about(const ReviewWord& word, const Notice& notice) { return word.point == notice.point && word.notice == notice.code; }

/// The first notice that the word may go to; notices.size() where there is none.
template <class Fits>
std::size_t place_for(const std::vector<std::string>& taken, const Notices& notices, Fits fits) {
    std::size_t i = 0;
    while (i < notices.size() && !(taken[i].empty() && fits(notices[i]))) ++i;
    return i;
}

}  // namespace

std::vector<ReviewWord> review_words(const std::filesystem::path& result_folder) {
    const std::filesystem::path path = result_folder / "tables/review.csv";
    if (!std::filesystem::is_regular_file(path)) return {};
    const std::string file = path.string();
    const CsvTable table = table_of(file);
    const std::size_t point = column_of(table, "point", file);
    const std::size_t notice = column_of(table, "notice", file);
    const std::size_t text = column_of(table, "text", file);
    const std::size_t reviewed = column_of(table, "reviewed", file);
    std::vector<ReviewWord> words;
    for (const CsvRow& row : table.rows) {
        if (!row.fields[reviewed].empty()) words.push_back({row.fields[point], row.fields[notice], row.fields[text], row.fields[reviewed]});
    }
    return words;
}

CarriedWords carry_over(const std::vector<ReviewWord>& words, const Notices& notices) {
    CarriedWords carried{.by_notice = std::vector<std::string>(notices.size()), .dropped = {}};
    std::vector<const ReviewWord*> changed;
    for (const ReviewWord& word : words) {
        const std::size_t same = place_for(carried.by_notice, notices, [&](const Notice& notice) {
            return is_about(word, notice) && word.text == notice.text;
        });
        if (same < notices.size()) carried.by_notice[same] = word.word;
        else changed.push_back(&word);
    }
    for (const ReviewWord* word : changed) {
        const std::size_t like = place_for(carried.by_notice, notices, [&](const Notice& notice) { return is_about(*word, notice); });
        if (like < notices.size()) carried.by_notice[like] = word->word;
        else carried.dropped.push_back(*word);
    }
    return carried;
}

std::vector<std::string> sentences_on(const CarriedWords& carried) {
    std::vector<std::string> sentences;
    const auto kept = std::count_if(carried.by_notice.begin(), carried.by_notice.end(), [](const std::string& word) { return !word.empty(); });
    if (kept > 0) sentences.push_back("review: " + std::to_string(kept) + " reviewed notices of the former result keep their words");
    for (const ReviewWord& word : carried.dropped) {
        sentences.push_back("review: the notice " + word.notice + (word.point.empty() ? "" : " at '" + word.point + "'") +
                            " applies no longer; its word \"" + word.word + "\" was dropped");
    }
    return sentences;
}

}  // namespace rillclock
