#pragma once

#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "rillclock/core/notice.hpp"
#include "rillclock/rainfall/rain_source.hpp"
#include "rillclock/study/study.hpp"

namespace rillclock {

/// The storms of one return period.
struct StudyStorm {
    double return_period = 0.0;  ///< years
    RainCurve rain;              ///< intensity by duration, never read below the study's least time
};

/// The rain of one zone.
struct ZoneRain {
    std::string file;  ///< as the zone's polygons name it
    RainSource source;
    std::optional<Length> two_year_24_hour = {};
    std::vector<StudyStorm> storms = {};
};

/// The text of a zone's rain file.
struct ZoneText {
    std::string file;
    std::string text;
};

/// The rain of a study, read.
struct StudyRain {
    std::optional<RainSource> source = {};        ///< where rain by duration was given
    std::optional<Length> two_year_24_hour = {};  ///< as stated, else what the source holds
    std::vector<StudyStorm> storms = {};          ///< by return period; none without a source
    std::size_t raster = 0;  ///< among the storms: the one that rasters, paths and segments are for
    Notices notices = {};
    std::vector<ZoneRain> zones = {};  ///< numbered from 1; none where one rain is everywhere
    bool is_everywhere = true;         ///< else there is rain in zones alone, and what stands above is that of the first

    /// The storms of a zone, by return period; those of the one rain, or outside of all zones, for 0.
    [[nodiscard]] const std::vector<StudyStorm>& storms_of(std::size_t zone) const {
        return zone == 0 ? storms : zones[zone - 1].storms;
    }
    /// The 2-year 24-hour depth of a zone, in the same way.
    [[nodiscard]] const std::optional<Length>& depth_of(std::size_t zone) const {
        return zone == 0 ? two_year_24_hour : zones[zone - 1].two_year_24_hour;
    }
    /// The rain file of a zone; what counts outside of all for 0.
    [[nodiscard]] std::string zone_name(std::size_t zone) const {
        return zone == 0 ? source->echo.source : zones[zone - 1].file;
    }
    [[nodiscard]] const StudyStorm& raster_storm() const { return storms[raster]; }
    /// The duration at which iterations begin and the reference storm is read: 5 min, or the rain's last where that is
    /// shorter.
    [[nodiscard]] Duration first_assumed() const;
};

/// No intensity is read below this duration where the study states no other.
inline constexpr Duration standard_least_time = minutes(5);
/// Return period where the study lists none, in years.
inline constexpr double standard_return_period = 10.0;

/// Reads the rain of a study: from `file_text`, the text of its rain file, or from its formulas. Throws an input error
/// for a text that is no rain (`rain_from_text`), for formulas that contradict one another, for return periods outside
/// the source, for a raster_return_period that is not listed, and where sheet flow needs a 2-year 24-hour depth and
/// neither study nor source has it. A stated depth counts before the source's; a notice says where the two differ by
/// more than 1 %. `zones` are the texts of the zones' rain files, by number − 1.
[[nodiscard]] StudyRain study_rain(const Study& study, std::string_view file_text,
                                   std::span<const ZoneText> zones = {});

}  // namespace rillclock
