#pragma once

#include <optional>
#include <span>
#include <string>
#include <vector>

#include "rillclock/catchment/arrival_histogram.hpp"
#include "rillclock/core/notice.hpp"
#include "rillclock/study/partial_area.hpp"
#include "rillclock/study/runoff_land.hpp"
#include "rillclock/study/study.hpp"
#include "rillclock/study/study_network.hpp"
#include "rillclock/study/study_rain.hpp"

namespace rillclock {

/// What part of a subarea counts for the peak of a point below it.
struct SubareaShare {
    PointNumber subarea = 0;
    double of_runoff = 0.0;   ///< its share of the point's C·A
    double of_window = 0.0;   ///< its share of the C·A within the window that makes the peak
};

/// The two cases by which handbooks look for a partial area, from subareas as wholes.
struct HandbookCases {
    Discharge part_alone;          ///< greatest over the subareas' times t of i(t) times the C·A of those that have arrived
    Discharge part_and_share;      ///< the same with t / arrival of each later subarea beside
    Duration time_of_part;         ///< of the greater of the two
};

/// A row of the search, to be followed by hand.
struct TimeAreaRow {
    Duration duration;
    FixedArea in_band = 0;         ///< C·A that arrives after the row before
    FixedArea running = 0;         ///< and until then
    RainWindow window;             ///< in which most arrives within this duration
    Duration window_begins;        ///< after the first water
    Intensity intensity;
    Discharge flow;
    bool is_searched = false;      ///< no shorter than the least time
};

/// The peak of a point at one return period.
struct PointPeak {
    std::string why_not = {};      ///< why there is no peak; all else but the time is then nothing
    bool is_beyond_rain = false;   ///< whether that is because the rain's durations end before the time
    CompositeCoefficient coefficient;
    Duration whole_time;           ///< of concentration under this storm
    Intensity whole_intensity;     ///< read at the longest of that, the least time and the rain's first duration
    Intensity peak_intensity;
    Discharge whole;
    Discharge partial;
    Discharge partial_at_least;    ///< what times that are not binned would give, at least and at most
    Discharge partial_at_most;
    RainWindow window;             ///< that makes the partial-area peak
    double window_share = 0.0;     ///< of the area; what arrives within the window
    HandbookCases cases;
    std::vector<SubareaShare> shares;  ///< of the subareas that `NetworkStorm` lists, in its order
    std::vector<SubareaShare> makers;  ///< those with the greatest share of the window, that first; at most eight
    std::size_t subareas_in_window = 0;
    std::vector<TimeAreaRow> rows;

    [[nodiscard]] bool is_there() const { return why_not.empty(); }
};

/// Of each subarea what a table for handing over needs, by return period.
struct SubareaRunoff {
    std::vector<CompositeCoefficient> coefficients;  ///< empty where some of its land has no coefficient
};

/// The peaks of all points, or why there are none.
struct StudyPeaks {
    std::vector<std::vector<PointPeak>> points;   ///< by outlet and return period
    std::vector<SubareaRunoff> subareas;          ///< by outlet
    std::vector<std::vector<RunoffLand>> land = {};  ///< of each outlet's whole catchment; empty where some of it has no coefficient
    Notices notices;

    [[nodiscard]] bool are_there() const { return !points.empty(); }
};

/// What peaks are made from.
struct PeakInputs {
    const Study& study;
    const StudyRain& rain;
    const CoverBook& book;
    std::span<const Outlet> outlets;
    const StudyNetwork& network;
    HistogramRules binned;
};

/// Peak flows of every point by the rational method. `histograms`: of the subareas, by number − 1.
///
/// Whole area: Q = i(t)·Σ min(1, Cf·C)·A, t the time of concentration or the least time. Partial area: `partial_peak` over
/// the arrivals of the whole catchment, all times being those of the whole-area storm. Cf acts on no C that is printed by
/// return period. Cost: the histograms of a catchment for each point.
[[nodiscard]] StudyPeaks study_peaks(const PeakInputs& in, std::vector<ArrivalHistogram> histograms);

/// Whether a study has what peaks need: rain by duration, and a cover book with some runoff coefficient.
[[nodiscard]] bool gives_peaks(const Study& study, const StudyRain& rain, const CoverBook& book);

/// The code of the notice that a study with rain by duration has no peaks at all.
inline constexpr const char* no_peaks_code = "no-peaks";

/// In place of peaks where a study does not give any: a notice, if it has rain by duration.
[[nodiscard]] StudyPeaks no_peaks(const Study& study, const StudyRain& rain);

/// The rules by which times are binned for the peaks of a study.
[[nodiscard]] HistogramRules histogram_rules(const Study& study, const CoverBook& book, double storm_factor);

}  // namespace rillclock
