#include "bench/terrain_generator.hpp"

#include <algorithm>
#include <array>
#include <cmath>

namespace rillclock::bench {
namespace {

constexpr std::array kinds = {TerrainKind::fractal, TerrainKind::quantised, TerrainKind::integers};
constexpr float base_m = 500.0F;

FractalNoise::Shape shape_of(TerrainKind kind) {
    switch (kind) {
        case TerrainKind::fractal:
            return {.finest = 2, .coarsest = 12, .relief = 250.0F, .roughness = 0.48F};
        case TerrainKind::quantised:
            return {.finest = 3, .coarsest = 12, .relief = 300.0F, .roughness = 0.48F};
        case TerrainKind::integers:
            return {.finest = 3, .coarsest = 12, .relief = 350.0F, .roughness = 0.5F};
    }
    return {};
}

/// Error of a lidar's elevation, ±6 cm at most, small errors being likelier.
float lidar_noise(std::uint32_t bits) {
    constexpr float unit = 0.03F / 65536.0F;
    const auto low = static_cast<std::int32_t>(bits & 0xffffU);
    const auto high = static_cast<std::int32_t>(bits >> 16U);
    return 2.0F * unit * static_cast<float>(low + high - 65535);
}

float rounded(float value) {
    return std::floor(value + 0.5F);
}

/// Position of a value among classes of equal width from -1 to 1.
std::size_t class_of(float value, std::size_t classes) {
    const float scaled = (value + 1.0F) * 0.5F * static_cast<float>(classes);
    return static_cast<std::size_t>(std::clamp(scaled, 0.0F, static_cast<float>(classes) - 1.0F));
}

/// From wet to dry (rows), from wild to built (columns).
constexpr std::array<std::array<std::uint8_t, 6>, 6> codes_by_place = {{{11, 11, 95, 90, 11, 11},
                                                                        {95, 90, 90, 71, 81, 21},
                                                                        {41, 43, 71, 81, 82, 22},
                                                                        {41, 42, 52, 82, 21, 23},
                                                                        {42, 52, 82, 81, 22, 24},
                                                                        {42, 52, 31, 71, 23, 24}}};

template <class T, class Row>
void for_each_row(const Window& window, std::span<T> values, const Row& row) {
    const auto columns = static_cast<std::size_t>(window.columns);
    for (std::int64_t r = 0; r < window.rows; ++r) {
        row(window.row + r, values.subspan(static_cast<std::size_t>(r) * columns, columns));
    }
}

}  // namespace

std::string_view name_of(TerrainKind kind) {
    switch (kind) {
        case TerrainKind::fractal:
            return "fractal";
        case TerrainKind::quantised:
            return "quantised";
        case TerrainKind::integers:
            return "integers";
    }
    return "";
}

std::optional<TerrainKind> terrain_kind(std::string_view name) {
    const auto found =
        std::find_if(kinds.begin(), kinds.end(), [&](TerrainKind kind) { return name_of(kind) == name; });
    return found == kinds.end() ? std::nullopt : std::optional(*found);
}

TerrainGenerator::TerrainGenerator(TerrainKind kind, std::uint32_t seed)
    : kind_(kind), seed_(seed), hills_(seed, shape_of(kind)) {}

void TerrainGenerator::fill(const Window& window, std::span<float> elevations) const {
    for_each_row(window, elevations, [&](std::int64_t row, std::span<float> values) {
        hills_.fill(row, window.column, values);
        finish_row(row, window.column, values);
    });
}

void TerrainGenerator::finish_row(std::int64_t row, std::int64_t column, std::span<float> elevations) const {
    const auto count = static_cast<std::uint32_t>(elevations.size());
    const auto first = static_cast<std::uint32_t>(column);
    switch (kind_) {
        case TerrainKind::fractal:
            for (std::uint32_t i = 0; i < count; ++i) {
                const std::uint32_t bits = scrambled(seed_, static_cast<std::uint32_t>(row), first + i);
                elevations[i] += base_m + lidar_noise(bits);
            }
            return;
        case TerrainKind::quantised:
            for (float& z : elevations) z = rounded((z + base_m) * 10.0F) / 10.0F;
            return;
        case TerrainKind::integers:
            for (float& z : elevations) z = rounded(z + base_m);
            return;
    }
}

CoverGenerator::CoverGenerator(std::uint32_t seed)
    : wetness_(scrambled(seed, 1, 1), {.finest = 5, .coarsest = 9, .relief = 1.0F, .roughness = 0.6F}),
      use_(scrambled(seed, 2, 2), {.finest = 5, .coarsest = 9, .relief = 1.0F, .roughness = 0.6F}) {}

void CoverGenerator::fill(const Window& window, std::span<std::uint8_t> codes) const {
    std::vector<float> wetness(static_cast<std::size_t>(window.columns));
    std::vector<float> use(wetness.size());
    for_each_row(window, codes, [&](std::int64_t row, std::span<std::uint8_t> values) {
        wetness_.fill(row, window.column, wetness);
        use_.fill(row, window.column, use);
        for (std::size_t i = 0; i < values.size(); ++i) {
            const auto& by_use = codes_by_place[class_of(wetness[i], codes_by_place.size())];
            values[i] = by_use[class_of(use[i], by_use.size())];
        }
    });
}

Raster<float> terrain_raster(const TerrainGenerator& generator, std::int64_t rows, std::int64_t columns,
                             const Executor& executor) {
    Raster<float> elevations(rows, columns);
    fill_on_threads(generator, Window{.rows = rows, .columns = columns}, elevations.values(), executor);
    return elevations;
}

}  // namespace rillclock::bench
