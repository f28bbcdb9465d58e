// Writes an invented terrain and its land cover as two GeoTIFFs on one grid: dem.tif and cover.tif.

#include <algorithm>
#include <filesystem>

#include "bench/bench_program.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/io/raster_output.hpp"

namespace rillclock::bench {
namespace {

constexpr std::int64_t strip_rows = 512;

/// A projected place with room around it, so that rasters of 100 km lie well within the zone.
constexpr const char* system_name = "EPSG:32633";
constexpr double left_m = 450'000.0;
constexpr double top_m = 5'400'000.0;

/// Makes a raster strip by strip; only one strip is ever in memory.
template <class T, class Generator>
void write_generated(const std::filesystem::path& path, const Grid& grid, const RasterDescription& description,
                     const Generator& generator, const Executor& executor) {
    auto sink = create_raster<T>(path, grid, ReferenceSystem::from_text(system_name), description);
    std::vector<T> values;
    for (std::int64_t row = 0; row < grid.rows; row += strip_rows) {
        const Window strip{.row = row, .rows = std::min(strip_rows, grid.rows - row), .columns = grid.columns};
        values.resize(static_cast<std::size_t>(strip.size()));
        fill_on_threads(generator, strip, std::span<T>(values), executor);
        sink->write(strip, values);
    }
    sink->close();
}

RasterDescription elevation_description(TerrainKind kind) {
    return {.stored = kind == TerrainKind::integers ? StoredType::int16 : StoredType::float32,
            .description = "elevation, invented",
            .unit = "metre",
            .nodata = -9999.0};
}

RasterDescription cover_description() {
    return {.stored = StoredType::uint8,
            .description = "land cover, invented",
            .nodata = 0.0,
            .overviews = OverviewKind::nearest};
}

void generate(const Words& words) {
    const TerrainKind kind = words.kind(0);
    const Grid grid{.rows = words.number(1), .columns = words.number(2), .left = left_m, .top = top_m};
    const std::filesystem::path folder = words.text(3);
    const auto seed = static_cast<std::uint32_t>(words.number(4, 1));
    const GdalSession session;
    const Executor executor;
    std::filesystem::create_directories(folder);
    tell("dem_seconds", seconds_of([&] {
             write_generated<float>(folder / "dem.tif", grid, elevation_description(kind), TerrainGenerator(kind, seed),
                                    executor);
         }));
    tell("cover_seconds", seconds_of([&] {
             write_generated<std::uint8_t>(folder / "cover.tif", grid, cover_description(), CoverGenerator(seed),
                                           executor);
         }));
}

}  // namespace
}  // namespace rillclock::bench

int main(int count, char** words) {
    using namespace rillclock::bench;
    return guarded([&] {
        generate(Words(count, words, "generate_terrain fractal|quantised|integers ROWS COLUMNS FOLDER [SEED]"));
    });
}
