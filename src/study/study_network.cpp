#include "rillclock/study/study_network.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

std::vector<bool> stated_points(std::span<const PointEdit> edits) {
    std::vector<bool> stated;
    for (const PointEdit& edit : edits) stated.push_back(edit.is_any());
    return stated;
}

/// Works out what pipes and overrides make of a network.
class NetworkWork {
public:
    explicit NetworkWork(const NetworkInputs& in)
        : in_(in),
          edits_(point_edits(in.stated.pipes, in.stated.overrides, in.outlets)),
          stated_(stated_coefficients(edits_, in.book)),
          velocities_(in.outlets.size()) {
        for (std::size_t i = 0; i < edits_.size(); ++i) {
            if (edits_[i].pipe != nullptr) velocities_[i] = pipe_velocity(*edits_[i].pipe, std::nullopt);
        }
    }

    [[nodiscard]] StudyNetwork work() {
        if (in_.study.timing.pipe_flow == PipeFlow::design_flow) take_design_flows();
        if (in_.study.timing.channel.design_storm && in_.rain.storms.size() > 1) tell_one_channel_flow();
        StudyNetwork made{.network = network(), .edits = edits_, .points = {}, .pipes = runs(), .is_edited = in_.stated.are_there(), .notices = std::move(notices_)};
        const std::vector<std::vector<double>> factors = made.is_edited ? solved_factors(made.network) : storm_factors_of(in_.outlets);
        made.points = point_networks(made.network, in_.outlets, {.storm_factors = factors, .raster = in_.rain.raster,
                                                                 .listed = in_.study.output.subareas, .stated = stated_points(edits_)});
        return made;
    }

private:
    [[nodiscard]] DrainageNetwork network() const { return edited_network(in_.outlets, edits_, velocities_); }

    /// The factor of the storm of a point, solved on all that arrives there.
    [[nodiscard]] double solved_factor(const DrainageNetwork& network, const Outlet& outlet, std::size_t period) const {
        if (!in_.study.timing.is_kinematic()) return outlet.storm_factor;
        const auto time = [&](Intensity i) {
            return seconds(from_fixed(network.arrivals_at(outlet.number, kinematic_storm_factor(i)).time));
        };
        const StormTime solved = solve_storm_time(time, rain_of(outlet, period), {.start = in_.rain.first_assumed()});
        if (solved.end == StormEnd::settled) return kinematic_storm_factor(solved.intensity());
        throw input_error("with its pipes and overrides the storm of " + significant(in_.rain.storms[period].return_period, 6) +
                          " years at the point '" + outlet.point.name + "' does not settle: " + std::string(words(solved.end)) +
                          "; give rain for longer durations, or look at what is stated");
    }

    [[nodiscard]] std::vector<std::vector<double>> solved_factors(const DrainageNetwork& network) const {
        std::vector<std::vector<double>> factors;
        for (const Outlet& outlet : in_.outlets) {
            factors.emplace_back();
            for (std::size_t period = 0; period < outlet.storms.size(); ++period) factors.back().push_back(solved_factor(network, outlet, period));
            if (factors.back().empty()) factors.back().push_back(outlet.storm_factor);
        }
        return factors;
    }

    /// The rain of the point's zone.
    [[nodiscard]] IntensityOfDuration rain_of(const Outlet& outlet, std::size_t period) const {
        return [&curve = in_.rain.storms_of(outlet.rain_zone.number)[period].rain](Duration duration) { return curve.within(duration); };
    }

    /// Pipes that lie higher come first, so that what they do to times is known further down.
    void take_design_flows() {
        Coefficients coefficients(in_.book, in_.study.peaks, {in_.rain.raster_storm().return_period}, stated_);
        std::vector<PointNumber> next;
        const DrainageNetwork full = network();
        for (const Outlet& outlet : in_.outlets) next.push_back(full.next_of(outlet.number));
        for (const PointNumber number : point_tree(std::move(next)).upstream_first) {
            const PointEdit& edit = edits_[number - 1];
            if (edit.pipe == nullptr) continue;
            const Discharge flow = design_flow(network(), number, coefficients);
            velocities_[number - 1] = pipe_velocity(*edit.pipe, flow);
            flows_.emplace_back(number, flow);
        }
    }

    [[nodiscard]] Discharge design_flow(const DrainageNetwork& network, PointNumber number, Coefficients& coefficients) const {
        FixedArea runoff = 0;
        for (const PointNumber above : network.above(number)) {
            LandAreas land;
            for (const LandShare& share : in_.outlets[above - 1].own_land.shares()) land[share.kind] += share.area;
            land = with_stated_coefficient(std::move(land), edits_[above - 1], in_.book, stated_);
            const std::string lacking = lacking_coefficient(land, coefficients, 0);
            if (!lacking.empty()) throw input_error(edits_[number - 1].pipe->place + " has no design flow: " + lacking);
            runoff += composite_of(land, coefficients, 0).runoff;
        }
        const double factor = solved_factor(network, in_.outlets[number - 1], in_.rain.raster);
        const Duration time = seconds(from_fixed(network.arrivals_at(number, factor).time));
        const RationalConversion conversion = in_.study.peaks.conversion.value_or(RationalConversion::exact);
        return rational_peak(square_metres(from_fixed_area(runoff)), in_.rain.storms_of(in_.outlets[number - 1].rain_zone.number)[in_.rain.raster].rain.at(time), conversion);
    }

    void tell_one_channel_flow() {
        notices_.push_back({.code = "network-of-one-storm",
                            .text = "own times, ways and arrivals in the network, and with them partial areas, are those of channels under the flow of " +
                                    significant(in_.rain.raster_storm().return_period, 6) +
                                    " years for all return periods; run the study for one return period at a time to have those of another",
                            .return_period = in_.rain.raster_storm().return_period});
    }

    [[nodiscard]] std::vector<PipeRun> runs() const {
        std::vector<PipeRun> made;
        for (const StatedPipe& pipe : in_.stated.pipes) {
            const auto at = std::find_if(edits_.begin(), edits_.end(), [&](const PointEdit& e) { return e.pipe == &pipe; });
            const auto number = static_cast<PointNumber>(at - edits_.begin() + 1);
            const auto flow = std::find_if(flows_.begin(), flows_.end(), [&](const auto& f) { return f.first == number; });
            const Speed velocity = velocities_[number - 1];
            made.push_back({.pipe = &pipe, .inlet = number, .capacity = full_bore_capacity(pipe.pipe, pipe.bed),
                            .design_flow = flow == flows_.end() ? std::nullopt : std::optional(flow->second),
                            .velocity = velocity, .time = pipe.length / velocity});
        }
        return made;
    }

    const NetworkInputs& in_;
    std::vector<PointEdit> edits_;
    std::vector<double> stated_;
    std::vector<Speed> velocities_;
    std::vector<std::pair<PointNumber, Discharge>> flows_;
    Notices notices_;
};

}  // namespace

double time_used_s(const StudyNetwork& network, const Outlet& outlet, std::size_t period) {
    if (network.is_edited) return from_fixed(network.points[outlet.number - 1].storms[period].time);
    return outlet.storms.empty() ? outlet.time_of_concentration_s() : outlet.storms[period].seconds();
}

bool is_stated_felt(const StudyNetwork& network, const Outlet& outlet) {
    if (!network.is_edited) return false;
    const PointNetwork& point = network.points[outlet.number - 1];
    // The network counts all water, so its time is held against the greatest one; a millisecond is far above what rounding makes.
    const bool has_other_time = std::abs(from_fixed(point.raster_storm().time) - outlet.greatest_s) > 1e-3;
    if (point.area != outlet.area || has_other_time) return true;
    return std::any_of(point.stated_above.begin(), point.stated_above.end(), [&](PointNumber number) {
        const PointOverride* stated = network.edits[number - 1].stated;
        // What is stated of its own way or pipe acts further down alone.
        return number != outlet.number || (stated != nullptr && (stated->time || stated->restated || stated->coefficient));
    });
}

StudyNetwork study_network(const NetworkInputs& in) { return NetworkWork(in).work(); }

}  // namespace rillclock
