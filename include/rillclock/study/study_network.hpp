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
    Discharge capacity;                        ///< just full
    std::optional<Discharge> design_flow = {};  ///< of all that comes to its inlet; where it was asked for
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
