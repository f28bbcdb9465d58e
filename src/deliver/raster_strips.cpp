#include "rillclock/deliver/raster_strips.hpp"

#include <algorithm>
#include <future>

#include "raster_descriptions.hpp"
#include "rillclock/io/raster_output.hpp"

namespace rillclock {

/// The cells of some rows, one array a raster.
struct RasterStrips::Strip {
    Strip(std::int64_t rows, std::int64_t columns)
        : travel_time(rows, columns), flow_azimuth(rows, columns), contributing_area(rows, columns), catchment(rows, columns),
          regime(rows, columns), spill(rows, columns) {}

    Raster<float> travel_time;
    Raster<std::uint16_t> flow_azimuth;
    Raster<double> contributing_area;
    Raster<std::uint32_t> catchment;
    Raster<std::uint8_t> regime;
    Raster<double> spill;
};

class RasterStrips::Files {
public:
    Files(const RasterStory& story, ResultFolder& folder)
        : travel_time_(make<float>(story, folder, "travel_time.tif", travel_time_description(story))),
          flow_azimuth_(make<std::uint16_t>(story, folder, "flow_azimuth.tif", flow_azimuth_description())),
          contributing_area_(make<double>(story, folder, "contributing_area.tif", contributing_area_description())),
          catchment_(make<std::uint32_t>(story, folder, "catchment.tif", catchment_description(story))),
          regime_(make<std::uint8_t>(story, folder, "regime.tif", regime_description())),
          spill_(make<double>(story, folder, "spill_elevation.tif", spill_elevation_description(story))), look_(story.look) {}

    void write_later(const Window& window, Strip& strip) {
        wait();
        strip_on_its_way_ = std::async(std::launch::async, [this, window, &strip] {
            const auto size = static_cast<std::size_t>(window.size());
            if (look_) look_({.window = window, .owners = strip.catchment.values().first(size), .minutes = strip.travel_time.values().first(size)});
            write(window, strip);
        });
    }
    void wait() {
        if (strip_on_its_way_.valid()) strip_on_its_way_.get();
    }
    void close() {
        wait();
        travel_time_->close();
        flow_azimuth_->close();
        contributing_area_->close();
        catchment_->close();
        regime_->close();
        spill_->close();
    }

private:
    template <class T>
    static std::unique_ptr<BlockSink<T>> make(const RasterStory& story, ResultFolder& folder, const char* name,
                                              RasterDescription description) {
        description.cloud_optimized = story.cloud_optimized;
        return create_raster<T>(folder.path(std::string("rasters/") + name), story.grid, story.system, description);
    }

    void write(const Window& window, const Strip& strip) {
        const auto size = static_cast<std::size_t>(window.size());
        travel_time_->write(window, strip.travel_time.values().first(size));
        flow_azimuth_->write(window, strip.flow_azimuth.values().first(size));
        contributing_area_->write(window, strip.contributing_area.values().first(size));
        catchment_->write(window, strip.catchment.values().first(size));
        regime_->write(window, strip.regime.values().first(size));
        spill_->write(window, strip.spill.values().first(size));
    }

    std::unique_ptr<BlockSink<float>> travel_time_;
    std::unique_ptr<BlockSink<std::uint16_t>> flow_azimuth_;
    std::unique_ptr<BlockSink<double>> contributing_area_;
    std::unique_ptr<BlockSink<std::uint32_t>> catchment_;
    std::unique_ptr<BlockSink<std::uint8_t>> regime_;
    std::unique_ptr<BlockSink<double>> spill_;
    std::function<void(const RegionStrip&)> look_;
    std::future<void> strip_on_its_way_;
};

RasterStrips::RasterStrips(RasterStory story, const TiledTravel& travel, ResultFolder& folder)
    : story_(std::move(story)), files_(std::make_unique<Files>(story_, folder)),
      filling_(std::make_unique<Strip>(std::min(travel.ground().forest.tiles().side(), story_.grid.rows), story_.grid.columns)),
      leaving_(std::make_unique<Strip>(std::min(travel.ground().forest.tiles().side(), story_.grid.rows), story_.grid.columns)) {
    for (std::size_t code = 0; code < azimuths_.size(); ++code) azimuths_[code] = azimuth_value(static_cast<FlowCode>(code));
}
RasterStrips::~RasterStrips() = default;

void RasterStrips::fill(const TileDesk& desk) {
    const Window& window = desk.flow.window();
    Local local = 0;
    for (std::int64_t r = 0; r < window.rows; ++r) {
        auto at = static_cast<Cell>(r * story_.grid.columns + window.column);
        for (std::int64_t c = 0; c < window.columns; ++c, ++local, ++at) fill_cell(desk, local, at);
    }
}

void RasterStrips::fill_cell(const TileDesk& desk, Local local, Cell at) {
    const FlowCode code = desk.flow.code(local);
    const bool is_void = code == flow_void;
    const std::uint32_t owner = desk.owner[local];
    const StepTime to_point = desk.time_to_root(local) - story_.last_point_times[owner];
    filling_->flow_azimuth[at] = azimuths_[code];
    filling_->spill[at] = desk.spill[local];
    filling_->contributing_area[at] = is_void ? no_value : from_fixed_area(desk.area[local]);
    filling_->catchment[at] = is_void ? no_number : owner;
    filling_->regime[at] = static_cast<std::uint8_t>(desk.regime[local]);
    filling_->travel_time[at] = static_cast<float>(is_void ? no_value : in_minutes(to_point.under(story_.last_point_factors[owner])));
}

void RasterStrips::write(std::int64_t row, std::int64_t rows) {
    files_->write_later({.row = row, .rows = rows, .columns = story_.grid.columns}, *filling_);
    std::swap(filling_, leaving_);
}

void RasterStrips::close() { files_->close(); }

}  // namespace rillclock
