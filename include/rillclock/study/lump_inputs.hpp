#pragma once

#include <array>
#include <cstddef>
#include <optional>
#include <string>
#include <string_view>

namespace rillclock {

/// Numbers that methods which time a catchment as one lump need, and that no raster gives.
enum class LumpInput { kerby_n, izzard_c, impervious, undeveloped_coefficient, county_k, kirpich_factor };

inline constexpr std::array all_lump_inputs{LumpInput::kerby_n,    LumpInput::izzard_c,
                                            LumpInput::impervious, LumpInput::undeveloped_coefficient,
                                            LumpInput::county_k,   LumpInput::kirpich_factor};

/// One such number as the study states it: for all points, or by a field of the points' file.
struct LumpValue {
    std::optional<double> number = {};
    std::optional<std::string> field = {};

    [[nodiscard]] bool is_stated() const { return number || field; }
};

/// Values of all lump inputs, each asked for by its name.
template <class Value>
class ByLumpInput {
public:
    [[nodiscard]] Value& operator[](LumpInput input) { return values_[static_cast<std::size_t>(input)]; }
    [[nodiscard]] const Value& operator[](LumpInput input) const { return values_[static_cast<std::size_t>(input)]; }

private:
    std::array<Value, all_lump_inputs.size()> values_ = {};
};

/// What is stated for one point; none where it is not.
using PointLumpInputs = ByLumpInput<std::optional<double>>;

/// The least and the greatest value that an input may have.
struct LumpRange {
    double least = 0.0;
    double greatest = 0.0;
};
/// Between which numbers an input lies.
[[nodiscard]] LumpRange range_of(LumpInput input);

/// "kerby_n": as the study's key under [methods] and the cover book's column are called.
[[nodiscard]] std::string_view name_of(LumpInput input);

/// The value that a text stands for: a number within the range, or one of the surfaces or types of development that
/// the method's own table names ("pavement", "commercial"; for Kirpich "paved overland" or "concrete channel"). Throws an
/// input error, begun by `subject`, for anything else.
[[nodiscard]] double lump_input_from_text(LumpInput input, std::string_view text, const std::string& subject);

}  // namespace rillclock
