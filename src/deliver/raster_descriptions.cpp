#include "raster_descriptions.hpp"

#include "palette.hpp"

namespace rillclock {

RasterDescription travel_time_description(const RasterStory& story) {
    return {.stored = StoredType::float32,
            .description = "travel time to the last design point on the way down, or to where water leaves the data",
            .unit = "min",
            .nodata = no_value,
            .metadata = {{"STORM", story.storm}, {"SHEET_FLOW", story.sheet_flow}}};
}

RasterDescription flow_azimuth_description() {
    return {.stored = StoredType::uint16,
            .description = "azimuth of flow, clockwise from grid north; 65534 water leaves the data here",
            .unit = "degree",
            .nodata = azimuth_void,
            .overviews = OverviewKind::nearest};
}

RasterDescription contributing_area_description() {
    return {.stored = StoredType::float64, .description = "contributing area, own cell included", .unit = "m2", .nodata = no_value};
}

RasterDescription catchment_description(const RasterStory& story) {
    RasterDescription description{.stored = StoredType::uint32,
                                  .description = "number of the nearest design point on the way down; 0 none",
                                  .nodata = static_cast<double>(no_number),
                                  .overviews = OverviewKind::nearest};
    description.categories.emplace_back(0, "none");
    // The files beside a raster number categories in 16 bits.
    if (story.points.size() > 65535) return description;
    for (std::size_t i = 0; i < story.points.size(); ++i) {
        description.categories.emplace_back(static_cast<int>(i + 1), story.points[i].name);
    }
    return description;
}

RasterDescription regime_description() {
    RasterDescription description{.stored = StoredType::uint8,
                                  .description = "how water moves through the cell",
                                  .nodata = 0.0,
                                  .overviews = OverviewKind::nearest};
    for (const Regime regime : {Regime::none, Regime::sheet, Regime::shallow, Regime::channel, Regime::water}) {
        description.categories.emplace_back(static_cast<int>(regime), name_of(regime));
        description.colours.emplace_back(static_cast<int>(regime), colour_of(regime));
    }
    return description;
}

RasterDescription spill_elevation_description(const RasterStory& story) {
    RasterDescription description{.stored = story.format.stored,
                                  .description = "lowest level at which the cell's water gets out",
                                  .unit = story.format.unit.name,
                                  .scale = story.format.scale,
                                  .offset = story.format.offset};
    if (story.format.nodata || story.has_voids) description.nodata = story.format.void_value();
    return description;
}

std::uint16_t azimuth_value(FlowCode code) {
    if (code == flow_void) return azimuth_void;
    return static_cast<std::uint16_t>(is_direction(code) ? azimuth_degrees(static_cast<Direction>(code)) : azimuth_leaves);
}

}  // namespace rillclock
