#include "sentences.hpp"

namespace rillclock {
namespace {

void make_sentence(std::string& text) {
    if (text.empty()) return;
    if (text.front() >= 'a' && text.front() <= 'z') text.front() = static_cast<char>(text.front() - 'a' + 'A');
    if (text.back() != '.') text += '.';
}

}  // namespace

Notices in_sentences(Notices notices) {
    for (Notice& notice : notices) make_sentence(notice.text);
    return notices;
}

}  // namespace rillclock
