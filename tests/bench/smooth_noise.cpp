#include "bench/smooth_noise.hpp"

#include <algorithm>
#include <array>

namespace rillclock::bench {
namespace {

/// Weights of the four knots around a place that lies `t` of the way from the second to the third.
std::array<float, 4> spline_weights(float t) {
    const float u = 1.0F - t;
    return {u * u * u / 6.0F, (3.0F * t * t * t - 6.0F * t * t + 4.0F) / 6.0F,
            (3.0F * u * u * u - 6.0F * u * u + 4.0F) / 6.0F, t * t * t / 6.0F};
}

/// The same spline between two knots as a polynomial in t, which costs the same at every spacing.
struct Cubic {
    float a, b, c, d;
    explicit Cubic(const float* knots)
        : a((knots[3] - knots[0] + 3.0F * (knots[1] - knots[2])) / 6.0F),
          b((knots[0] + knots[2]) / 2.0F - knots[1]),
          c((knots[2] - knots[0]) / 2.0F),
          d((knots[0] + 4.0F * knots[1] + knots[2]) / 6.0F) {}
    [[nodiscard]] float at(float t) const { return ((a * t + b) * t + c) * t + d; }
};

}  // namespace

float NoiseOctave::knot(std::int64_t row, std::int64_t column) const {
    const std::uint32_t bits = scrambled(salt_, static_cast<std::uint32_t>(row), static_cast<std::uint32_t>(column));
    return amplitude_ * (static_cast<float>(static_cast<std::int32_t>(bits)) * 0x1p-31F);
}

/// Knots `first` to `last` of the lattice's columns, joined across its rows at a row of cells.
std::vector<float> NoiseOctave::knots_along(std::int64_t row, std::int64_t first, std::int64_t last) const {
    const std::int64_t above = row >> log2_spacing_;
    const std::int64_t beyond = row - (above << log2_spacing_);
    const auto spacing = static_cast<float>(std::int64_t{1} << log2_spacing_);
    const std::array<float, 4> weights = spline_weights(static_cast<float>(beyond) / spacing);
    std::vector<float> knots(static_cast<std::size_t>(last - first + 1));
    for (std::size_t v = 0; v < 4; ++v) {
        const std::int64_t lattice_row = above - 1 + static_cast<std::int64_t>(v);
        for (std::size_t i = 0; i < knots.size(); ++i) {
            knots[i] += weights[v] * knot(lattice_row, first + static_cast<std::int64_t>(i));
        }
    }
    return knots;
}

void NoiseOctave::add_to(std::int64_t row, std::int64_t column, std::span<float> values) const {
    const auto count = static_cast<std::int64_t>(values.size());
    const std::int64_t first = column >> log2_spacing_;
    const std::int64_t last = (column + count - 1) >> log2_spacing_;
    const std::vector<float> knots = knots_along(row, first - 1, last + 2);
    const float per_cell = 1.0F / static_cast<float>(std::int64_t{1} << log2_spacing_);
    for (std::int64_t j = first; j <= last; ++j) {
        const Cubic cubic(&knots[static_cast<std::size_t>(j - first)]);
        const std::int64_t start = (j << log2_spacing_) - column;
        const auto from = static_cast<int>(std::max<std::int64_t>(0, -start));
        const auto to = static_cast<int>(std::min(std::int64_t{1} << log2_spacing_, count - start));
        float* const out = values.data() + start;
        for (int i = from; i < to; ++i) out[i] += cubic.at(static_cast<float>(i) * per_cell);
    }
}

FractalNoise::FractalNoise(std::uint32_t seed, const Shape& shape) {
    float amplitude = shape.relief;
    for (unsigned log2_spacing = shape.coarsest + 1; log2_spacing-- > shape.finest;) {
        octaves_.emplace_back(scrambled(seed, log2_spacing, 0), log2_spacing, amplitude);
        amplitude *= shape.roughness;
    }
}

void FractalNoise::fill(std::int64_t row, std::int64_t column, std::span<float> values) const {
    std::fill(values.begin(), values.end(), 0.0F);
    for (const NoiseOctave& octave : octaves_) octave.add_to(row, column, values);
}

}  // namespace rillclock::bench
