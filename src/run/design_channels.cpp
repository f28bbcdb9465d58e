#include "design_channels.hpp"

#include "rillclock/catchment/point_storms.hpp"
#include "study_storms.hpp"

namespace rillclock {
namespace {

/// Retimes the travel under the storms of one return period.
class Periods {
public:
    Periods(const LastPass& last, const DesignChannels& channels)
        : last_(last), channels_(channels), network_(channels.travel, channels.runoff), intensities_(intensities_of(last.rain.storms)) {}

    void time_under(std::size_t period) {
        const DesignSection section{.bottom_width = channels_.travel.rules().channel.width,
                                    .side_slope = last_.study.timing.channel.side_slope.value_or(0.0)};
        const DesignRain rain{.intensity = intensities_[period], .drives_sheet_flow = last_.study.timing.is_kinematic()};
        channels_.reaches = design_reaches(network_, channels_.sections, section, rain, channels_.travel.rules());
        channels_.travel.time_again(channels_.reaches);
    }

private:
    const LastPass& last_;
    const DesignChannels& channels_;
    ChannelNetwork network_;
    std::vector<IntensityOfDuration> intensities_;
};

}  // namespace

std::vector<PointHeads> heads_under_design_flow(const LastPass& last, const DesignChannels& channels) {
    Periods periods(last, channels);
    std::vector<std::vector<PointHeads>> others(last.rain.storms.size());
    for (std::size_t period = 0; period < others.size(); ++period) {
        if (period == last.rain.raster) continue;
        periods.time_under(period);
        others[period] = heads_alone(last);
    }
    periods.time_under(last.rain.raster);
    std::vector<PointHeads> heads = heads_and_rasters(last);
    for (std::size_t period = 0; period < others.size(); ++period) {
        if (period == last.rain.raster) continue;
        for (std::size_t i = 0; i < heads.size(); ++i) heads[i].storms[period] = others[period][i].storms[period];
    }
    return heads;
}

}  // namespace rillclock
