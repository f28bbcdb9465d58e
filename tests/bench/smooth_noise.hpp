#pragma once

#include <cstdint>
#include <span>
#include <vector>

namespace rillclock::bench {

/// A number without pattern for each place of an endless plane: the same arguments give the same number on every
/// machine. The finaliser of MurmurHash3 (A. Appleby, 2011), fed with the coordinates one after the other.
[[nodiscard]] constexpr std::uint32_t scrambled(std::uint32_t salt, std::uint32_t row, std::uint32_t column) {
    std::uint32_t h = salt + row * 0x9e3779b1U;
    h = (h ^ (h >> 16U)) * 0x85ebca6bU + column * 0xc2b2ae3dU;
    h = (h ^ (h >> 13U)) * 0xc2b2ae35U;
    return h ^ (h >> 16U);
}

/// Noise with one length of wave: uniform random numbers in ±1 on a square lattice, joined by cubic B-splines.
///
/// A cell's value is a function of the seed, its row and its column alone, so any part can be made by itself.
class NoiseOctave {
public:
    /// Knots lie 2^`log2_spacing` cells apart; `log2_spacing` from 2 to 16.
    NoiseOctave(std::uint32_t salt, unsigned log2_spacing, float amplitude)
        : salt_(salt), log2_spacing_(log2_spacing), amplitude_(amplitude) {}

    /// Adds the noise to cells of one row, `column` being that of the first. Row and column are not negative.
    void add_to(std::int64_t row, std::int64_t column, std::span<float> values) const;

private:
    [[nodiscard]] float knot(std::int64_t row, std::int64_t column) const;
    [[nodiscard]] std::vector<float> knots_along(std::int64_t row, std::int64_t first, std::int64_t last) const;

    std::uint32_t salt_;
    unsigned log2_spacing_;
    float amplitude_;
};

/// Octaves one on the other, each with knots twice as far apart as the one before: a fractal surface.
class FractalNoise {
public:
    struct Shape {
        unsigned finest = 2;     ///< log₂ of the spacing of the finest octave's knots
        unsigned coarsest = 12;  ///< and of the coarsest
        float relief = 1.0F;     ///< amplitude of the coarsest
        float roughness = 0.5F;  ///< amplitude of an octave over that of the next coarser one
    };
    FractalNoise(std::uint32_t seed, const Shape& shape);

    /// Writes cells of one row, `column` being that of the first.
    void fill(std::int64_t row, std::int64_t column, std::span<float> values) const;

private:
    std::vector<NoiseOctave> octaves_;
};

}  // namespace rillclock::bench
