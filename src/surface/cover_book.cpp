#include "rillclock/surface/cover_book.hpp"

#include <algorithm>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

std::unordered_map<int, std::size_t> places_of_codes(const std::string& name, std::span<const CoverClass> classes) {
    std::unordered_map<int, std::size_t> places;
    for (std::size_t place = 0; place < classes.size(); ++place)
        if (!places.emplace(classes[place].code, place).second)
            throw input_error("cover book " + name + " gives code " + std::to_string(classes[place].code) +
                              " twice; give each code one row");
    return places;
}

}  // namespace

CoverBook::CoverBook(std::string name, std::vector<CoverClass> classes)
    : name_(std::move(name)), classes_(std::move(classes)) {
    if (classes_.empty())
        throw input_error("cover book " + name_ + " has no class; add a row for each code of the cover raster");
    std::sort(classes_.begin(), classes_.end(),
              [](const CoverClass& a, const CoverClass& b) { return a.code < b.code; });
    place_of_code_ = places_of_codes(name_, classes_);
}

const CoverClass* CoverBook::find(int code) const {
    const auto place = place_of_code_.find(code);
    return place == place_of_code_.end() ? nullptr : &classes_[place->second];
}

}  // namespace rillclock
