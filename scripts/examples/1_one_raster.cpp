// One raster in memory to travel times: no files, no points, no reference system.
#include <algorithm>
#include <cmath>
#include <cstdint>
#include <iostream>

#include "rillclock/core/error.hpp"
#include "rillclock/raster/raster_source.hpp"
#include "rillclock/run/travel_times.hpp"

using namespace rillclock;

int main() {
    try {
        // A valley of 120 rows × 80 columns, cells of 2 m: its sides fall to the middle column, its floor to the south.
        Raster<double> elevations(120, 80);
        for (std::int64_t row = 0; row < 120; ++row)
            for (std::int64_t column = 0; column < 80; ++column)
                elevations(row, column) = 100.0 - 0.02 * static_cast<double>(row) + 0.1 * std::abs(static_cast<double>(column) - 40.0);
        const Raster<std::int32_t> cover(120, 80, 71);   // grassland, in the codes of the built-in book
        RasterSource elevation_source(elevations);
        RasterSource cover_source(cover);

        Study study;                                     // all that is not stated has the defaults of README
        study.surface.book = "nlcd";
        study.rain.two_year_24_hour = inches(3.6);
        const TravelTimes times = travel_times({.elevations = elevation_source, .cover = cover_source,
                                                .cell_width = metres(2), .cell_height = metres(2)}, study);

        const auto minutes = times.minutes.values();
        const auto last = std::max_element(minutes.begin(), minutes.end());
        const auto cell = static_cast<Cell>(last - minutes.begin());
        std::cout << "the slowest water takes " << *last << " min, from row " << cell / 80 << ", column " << cell % 80 << '\n';
        for (const Notice& notice : times.notices) std::cout << notice.text << '\n';
        return 0;
    } catch (const Error& error) {
        std::cerr << error.what() << '\n';
        return 1;
    }
}
