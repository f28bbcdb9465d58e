#pragma once

#include <array>
#include <cstddef>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <unordered_map>
#include <vector>

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// Hydrologic soil groups: A lets the most water in, D the least.
enum class SoilGroup { a, b, c, d };

/// Shallow flow by conveyance: V = K·√S with K = (1.49/n)·R^(2/3), feet and seconds (`shallow_conveyance`).
struct ShallowConveyance {
    double n = 0.0;
    Length hydraulic_radius = {};
};

/// How water runs over one class of land cover.
struct CoverClass {
    int code = 0;  ///< the value in the cover raster
    std::string name = {};
    double n_low = 0.0;  ///< sheet-flow n; 0 < low ≤ typical ≤ high, all 0 for open water
    double n_typical = 0.0;
    double n_high = 0.0;
    Speed shallow_k = {};           ///< velocity of shallow concentrated flow at slope 1; 0 for open water
    std::string shallow_type = {};  ///< short name of one of `shallow_types()`; "stated" where the book gives k itself
    std::optional<ShallowConveyance> conveyance = {};  ///< what k was made from, where the book gives that
    std::string chart_line = {};                       ///< name of the class's line on a chart of velocity by slope
    bool paved = false;             ///< counts as paved where only paved and unpaved are told apart
    std::optional<Length> water_depth = {};  ///< mean depth; present for open water alone
    std::array<std::optional<double>, 4> curve_numbers =
        {};                                         ///< by soil group, above 0 to 100; where the book has them
    std::optional<double> runoff_coefficient = {};  ///< of any soil, 0 to 1; where the book has it
    std::array<std::optional<double>, 4> runoff_coefficients =
        {};                     ///< by soil group, 0 to 1, none below that before; where the book has them
    std::string land_use = {};           ///< one of `land_use_names()` (printed_coefficients.hpp); may be empty
    std::optional<double> kerby_n = {};    ///< Kerby's retardance, above 0 to 1; where the book has it
    std::optional<double> izzard_c = {};   ///< Izzard's retardance, above 0 to 1
    std::optional<double> impervious = {};  ///< share of the ground that is, 0 to 1; where the book has it
    std::optional<double> county_k = {};   ///< K of the initial subarea of Californian counties, above 0 to 2
    std::string source = {};               ///< where the values are from
    bool from_memory = false;                       ///< a default to check before use

    /// That of a soil group; none where the book has none.
    [[nodiscard]] std::optional<double> curve_number(SoilGroup group) const {
        return curve_numbers[static_cast<std::size_t>(group)];
    }
    /// That of the soil group where it is known and the book has one, else that of any soil.
    [[nodiscard]] std::optional<double> coefficient(std::optional<SoilGroup> group) const {
        const auto own = group ? runoff_coefficients[static_cast<std::size_t>(*group)] : std::nullopt;
        return own ? own : runoff_coefficient;
    }
    [[nodiscard]] bool is_open_water() const { return water_depth.has_value(); }
};

/// The classes of one legend, in ascending order of their codes.
class CoverBook {
public:
    /// Throws an input error where two classes have one code or there is no class.
    CoverBook(std::string name, std::vector<CoverClass> classes);

    [[nodiscard]] const std::string& name() const { return name_; }
    [[nodiscard]] std::span<const CoverClass> classes() const { return classes_; }
    /// The class of that code; null where the book has none.
    [[nodiscard]] const CoverClass* find(int code) const;

private:
    std::string name_;
    std::vector<CoverClass> classes_;
    std::unordered_map<int, std::size_t> place_of_code_;
};

/// Reads a cover book from CSV text with a header. Columns, in any order, units in their names:
///
/// - `code` (whole number), `name`;
/// - `n_typical`, and `n_low`, `n_high` (each may be absent or empty: then n_typical);
/// - `shallow_type` (a short name of `shallow_types()`), or `shallow_k_m_s` or `shallow_k_ft_s` (velocity at slope 1), or
///   `shallow_n` with `shallow_radius_m` or `shallow_radius_ft` (conveyance: k = (1.49/n)·R^(2/3) in feet and seconds);
/// - `chart_line` (name of the line on a chart of velocity by slope; may be absent or empty: then the class's name);
/// - `paved` (yes or no; may be absent: then yes for the type "pavement" alone);
/// - `water_depth_m` or `water_depth_ft`: a mean depth makes the class open water, whose n and shallow fields stay
/// empty;
/// - `cn_a`, `cn_b`, `cn_c`, `cn_d` (curve number by soil group), `c` (runoff coefficient of any soil) and `c_a` to `c_d`
///   (of each soil group; each may be absent or empty), for runoff and for methods that time a catchment as one lump;
/// - `land_use` (one of `land_use_names()`: a row of a printed table of runoff coefficients) and
///   `impervious_percent` (of the ground, 0 to 100; the column `impervious` is refused, since it does not say its unit), each may be
///   absent or empty;
/// - `kerby_n`, `izzard_c` (retardances) and `county_k` (each may be absent
///   or empty), for runoff and for methods that time a catchment as one lump;
/// - `source` (asked for in every row), `from_memory` (yes or no; may be absent: no).
///
/// `file` names the text in errors. Throws an input error with line and column for a column that is missing or unknown,
/// a field that is missing, negative, zero or not a number, codes given twice, and n out of order.
[[nodiscard]] CoverBook parse_cover_book(std::string_view text, std::string_view file);

/// The names of the built-in books.
[[nodiscard]] std::span<const std::string_view> built_in_book_names();
/// Whether a study's word for its book is the name of a built-in one, and so not of a file.
[[nodiscard]] bool is_built_in_book(std::string_view name);
/// A built-in book as CSV text, in the form `parse_cover_book` reads: what a user may copy and change.
/// Throws an input error for a name that is not built in.
[[nodiscard]] std::string_view built_in_book_text(std::string_view name);
/// A built-in book: "nlcd", the legend of the National Land Cover Database from 2001 on with Alaska's classes, or
/// "worldcover", that of ESA WorldCover, whose hydraulics are this program's own.
[[nodiscard]] CoverBook built_in_book(std::string_view name);

}  // namespace rillclock
