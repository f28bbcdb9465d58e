#pragma once

#include <optional>
#include <span>
#include <vector>

#include "rillclock/core/notice.hpp"
#include "rillclock/study/catchment_runoff.hpp"
#include "rillclock/study/edited_network.hpp"
#include "rillclock/study/study.hpp"
#include "rillclock/study/study_rain.hpp"

namespace rillclock {

/// What the files of a study state of its network.
struct StatedEdits {
    std::vector<StatedPipe> pipes;
    std::vector<PointOverride> overrides;

    [[nodiscard]] bool are_there() const { return !pipes.empty() || !overrides.empty(); }
};

/// A pipe as it was timed.
struct PipeRun {
    const StatedPipe* pipe = nullptr;
    PointNumber inlet = 0;
    Discharge capacity;                        ///< just full
    std::optional<Discharge> design_flow = {};  ///< whole-area peak of all that comes to its inlet, by which it is timed; where that was asked for
    Speed velocity;
    Duration time;
};

/// The network of a study, with all that is stated of it.
struct StudyNetwork {
    DrainageNetwork network;
    std::vector<PointEdit> edits;              ///< by number − 1
    std::vector<PointNetwork> points;          ///< of each outlet
    std::vector<PipeRun> pipes;                ///< in the order of their file
    bool is_edited = false;
    Notices notices = {};
};

/// The time of concentration that counts for a point under the storm of a return period, by its place among them, or under the one storm
/// where there are none; in s. With pipes or overrides anywhere in the study it is that of the network, which counts all water; else that
/// along the governing path.
[[nodiscard]] double time_used_s(const StudyNetwork& network, const Outlet& outlet, std::size_t period);

/// Whether what is stated acts on the time, the area or the peak of a point: something of it in the subareas or on the ways above, a time or
/// coefficient of its own subarea, or a pipe that leads water to it or away from it.
[[nodiscard]] bool is_stated_felt(const StudyNetwork& network, const Outlet& outlet);

/// What the network of a study is made from.
struct NetworkInputs {
    const Study& study;
    const StudyRain& rain;
    const CoverBook& book;
    std::span<const Outlet> outlets;
    const StatedEdits& stated;                 ///< must outlive the network
};

/// Works out the network. With pipes or overrides each point's storm is solved once more on what then arrives, and pipes are timed from the
/// divides down, so that the design flow of each is that of all that comes to it. Throws an input error for names of points that are not
/// there, circles, storms that do not settle, and design flows of land without runoff coefficients.
[[nodiscard]] StudyNetwork study_network(const NetworkInputs& in);

}  // namespace rillclock
