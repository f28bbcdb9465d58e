#include "cover_areas.hpp"

#include <charconv>
#include <string>
#include <string_view>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/io/shape_file.hpp"
#include "claimed_cells.hpp"

namespace rillclock {
namespace {

/// The class of that code or name; null where there is none.
const CoverClass* find_class(const CoverBook& book, const std::string& text) {
    std::int32_t code = 0;
    const char* end = text.data() + text.size();
    const auto [last, failed] = std::from_chars(text.data(), end, code);
    if (failed == std::errc() && last == end) return book.find(code);
    for (const CoverClass& known : book.classes())
        if (known.name == text) return &known;
    return nullptr;
}

std::uint8_t class_position(const Study& study, const CoverBook& book, const std::string& text) {
    if (const CoverClass* found = find_class(book, text)) return static_cast<std::uint8_t>(found - book.classes().data());
    std::vector<std::string_view> names;
    std::string list;
    for (const CoverClass& known : book.classes()) {
        names.emplace_back(known.name);
        list += (list.empty() ? "" : ", ") + std::to_string(known.code) + " (" + known.name + ")";
    }
    const std::string given = text.empty() ? "no class" : "\"" + text + "\"";
    throw input_error("a polygon of '" + *study.surface.cover_areas.file + "' has " + given + " in its field \"" + study.surface.cover_field +
                      "\"; write the code or the name of a class of the book '" + book.name() + "': " + list + did_you_mean(text, names));
}

}  // namespace

CoverAreas read_cover_areas(const Study& study, const CoverBook& book, const ReferenceSystem& system) {
    const MappedLayer& stated = study.surface.cover_areas;
    if (!stated.file) return {};
    ShapeFile file = read_shapes(located(study, *stated.file),
                                 {.role = "cover areas", .kinds = ShapeKinds::polygons, .layer = stated.layer, .layer_key = "cover_areas_layer",
                                  .text_field = study.surface.cover_field},
                                 system);
    CoverAreas areas{.parts = {}, .notices = file.notices};
    for (std::size_t i = 0; i < file.polygons.size(); ++i) {
        areas.parts.push_back({class_position(study, book, file.polygon_texts[i]), std::move(file.polygons[i])});
    }
    return areas;
}

Notices lay_over(const Study& study, const CoverAreas& areas, const Grid& grid, Raster<std::uint8_t>& cells) {
    if (areas.parts.empty()) return areas.notices;
    const ClaimedCells claimed = claim_cells(areas.parts, grid, cells,
                                             [](const CoverAreas::Part& part) { return static_cast<std::uint8_t>(part.position + 1U); });
    const std::string& file = *study.surface.cover_areas.file;
    if (claimed.all == 0) throw input_error("none of the cover areas in '" + file + "' lies within the elevations; check their reference system");
    Notices notices = areas.notices;
    if (claimed.twice > 0) {
        notices.push_back({.code = "cover-areas-overlap",
                           .text = "polygons of '" + file + "' with different classes overlap at " + std::to_string(claimed.twice) +
                                   " cells, which were given to the polygon that comes first",
                           .value = static_cast<double>(claimed.twice)});
    }
    return notices;
}

}  // namespace rillclock
