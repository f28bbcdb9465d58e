#include "rillclock/study/uncertainty.hpp"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <map>

#include "rillclock/core/error.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_rough_classes = 8;
constexpr int searching_draws = 12;
constexpr double nearly_last = 0.995;

/// Calls `work(i)` for all settings, on threads, and asks now and then whether to go on.
template <class Work>
void for_each_setting(const Executor& executor, std::size_t count, const Progress& progress, Work work) {
    constexpr std::size_t at_a_time = 32;
    for (std::size_t first = 0; first < count; first += at_a_time) {
        progress.tell({.stage = "uncertainty", .done = static_cast<std::int64_t>(first), .total = static_cast<std::int64_t>(count)});
        executor.for_each(std::min(at_a_time, count - first), [&](std::size_t i) { work(first + i); });
    }
}

/// A head as a setting times it, to the last point on its way.
struct TimedHead {
    WayTime time;
    PointNumber subarea = 0;
};

/// Heads of a catchment that no other exceeds in both parts.
class TimedFront {
public:
    void add(const TimedHead& head) {
        for (const TimedHead& kept : heads_) {
            const bool exceeds = kept.time.storm_s >= head.time.storm_s && kept.time.fixed_s >= head.time.fixed_s;
            const bool equal = kept.time.storm_s == head.time.storm_s && kept.time.fixed_s == head.time.fixed_s;
            if (exceeds && (!equal || kept.subarea <= head.subarea)) return;
        }
        std::erase_if(heads_, [&](const TimedHead& kept) {
            return head.time.storm_s >= kept.time.storm_s && head.time.fixed_s >= kept.time.fixed_s;
        });
        heads_.push_back(head);
    }
    void add(const TimedFront& other) {
        for (const TimedHead& head : other.heads_) add(head);
    }
    [[nodiscard]] const TimedHead& last(double storm_factor) const {
        if (heads_.empty()) throw bug("a catchment without kept heads was asked for its last arrival");
        return *std::max_element(heads_.begin(), heads_.end(), [&](const TimedHead& a, const TimedHead& b) {
            const double of_a = a.time.under(storm_factor);
            const double of_b = b.time.under(storm_factor);
            return of_a != of_b ? of_a < of_b : a.subarea > b.subarea;
        });
    }

private:
    std::vector<TimedHead> heads_;
};

/// The intensity of the setting's rain for a storm of some duration.
IntensityOfDuration rain_under(const DrawnStorms& storms, double factor) {
    return [&storms, factor](Duration duration) -> std::optional<Intensity> {
        std::optional<Intensity> read = storms.rain(duration);
        if (!read && storms.last && duration > *storms.last) read = storms.rain(*storms.last);
        if (!read) return std::nullopt;
        return *read * factor;
    };
}

/// Solves the storm of a point, or takes the one storm of all.
SettingTime settled(const TimedFront& front, const WayTime& at_point, const UncertaintyGround& ground, const TravelSetting& setting) {
    double factor = setting.rules.sheet.storm_factor;
    if (ground.storms) {
        const auto time = [&](Intensity intensity) {
            const double s = kinematic_storm_factor(intensity);
            WayTime way = front.last(s).time - at_point;
            if (ground.storms->duration == StormDuration::sheet_part) way.fixed_s = 0.0;
            return seconds(way.under(s));
        };
        const StormTime storm = solve_storm_time(time, rain_under(*ground.storms, setting.intensity_factor), ground.storms->search);
        if (storm.end != StormEnd::settled) {
            throw input_error("a storm does not settle for some of the draws that [uncertainty] asks for; look at the rain, whose intensity "
                              "must fall with duration and its depth must not, or narrow the ranges");
        }
        factor = kinematic_storm_factor(storm.intensity());
    }
    const TimedHead& last = front.last(factor);
    return {(last.time - at_point).under(factor), last.subarea};
}

std::vector<double> values_of(const std::vector<UncertainInput>& inputs, double (UncertainInput::*end)() const) {
    std::vector<double> values;
    for (const UncertainInput& input : inputs) values.push_back((input.*end)());
    return values;
}

std::vector<double> typical_values(const std::vector<UncertainInput>& inputs) {
    std::vector<double> values;
    for (const UncertainInput& input : inputs) values.push_back(input.typical);
    return values;
}

/// All inputs but those of the wanted kind fast, those slow; or the other way round.
std::vector<double> split_values(const std::vector<UncertainInput>& inputs, bool roughness_slow) {
    std::vector<double> values;
    for (const UncertainInput& input : inputs) values.push_back(input.is_roughness() == roughness_slow ? input.slow() : input.fast());
    return values;
}

/// The least time of which so many draws are no longer: nearest rank.
double percentile(const std::vector<double>& sorted, double share) {
    const auto rank = static_cast<std::size_t>(std::ceil(share * static_cast<double>(sorted.size())));
    return sorted[std::clamp<std::size_t>(rank, 1, sorted.size()) - 1];
}

std::vector<LastShare> shares_of(const std::map<PointNumber, int>& counts) {
    std::vector<LastShare> shares;
    for (const auto& [subarea, draws] : counts) shares.push_back({subarea, draws});
    std::stable_sort(shares.begin(), shares.end(), [](const LastShare& a, const LastShare& b) { return a.draws > b.draws; });
    return shares;
}

/// All settings that are to be evaluated, in the order of their answers: typical, fast, slow, each input low and high, the draws.
std::vector<std::vector<double>> all_values(const std::vector<UncertainInput>& inputs, const std::vector<std::vector<double>>& draws) {
    const std::vector<double> typical = typical_values(inputs);
    std::vector<std::vector<double>> all{typical, values_of(inputs, &UncertainInput::fast), values_of(inputs, &UncertainInput::slow)};
    for (std::size_t i = 0; i < inputs.size(); ++i) {
        for (const double end : {inputs[i].low, inputs[i].high}) {
            all.push_back(typical);
            all.back()[i] = end;
        }
    }
    all.insert(all.end(), draws.begin(), draws.end());
    return all;
}

/// What the answers say of one point.
PointUncertainty point_uncertainty(std::size_t point, std::size_t inputs, const std::vector<std::vector<SettingTime>>& answers) {
    PointUncertainty found;
    found.typical_s = answers[0][point].seconds;
    found.fast_s = answers[1][point].seconds;
    found.slow_s = answers[2][point].seconds;
    for (std::size_t i = 0; i < inputs; ++i) {
        found.effects.push_back({i, answers[3 + 2 * i][point].seconds, answers[4 + 2 * i][point].seconds});
    }
    std::stable_sort(found.effects.begin(), found.effects.end(), [&](const InputEffect& a, const InputEffect& b) {
        return a.swing_s(found.typical_s) > b.swing_s(found.typical_s);
    });
    std::vector<double> times;
    std::map<PointNumber, int> last;
    for (std::size_t draw = 3 + 2 * inputs; draw < answers.size(); ++draw) {
        times.push_back(answers[draw][point].seconds);
        ++last[answers[draw][point].last];
    }
    std::sort(times.begin(), times.end());
    for (std::size_t i = 0; i < told_percentiles.size(); ++i) found.percentile_s[i] = percentile(times, told_percentiles[i]);
    found.last = shares_of(last);
    return found;
}

}  // namespace

double InputEffect::swing_s(double typical_s) const {
    return std::max({low_s, high_s, typical_s}) - std::min({low_s, high_s, typical_s});
}

std::vector<SettingTime> times_under(const UncertaintyGround& ground, const TravelSetting& setting) {
    const PathTimes times = ground.paths.times(setting);
    std::vector<TimedFront> fronts(times.points.size());
    for (std::size_t i = 0; i < times.heads.size(); ++i) {
        const PointNumber owner = ground.paths.owners()[i];
        fronts[owner - 1].add({times.heads[i], owner});
    }
    std::vector<SettingTime> answers(times.points.size());
    for (const PointNumber number : ground.tree.upstream_first) {
        answers[number - 1] = settled(fronts[number - 1], times.points[number - 1], ground, setting);
        const PointNumber next = ground.tree.next_of(number);
        if (next != 0) fronts[next - 1].add(fronts[number - 1]);
    }
    return answers;
}

std::vector<TravelSetting> searching_settings(const std::vector<UncertainInput>& inputs, const TravelSetting& base, int seed) {
    std::vector<std::vector<double>> values{typical_values(inputs), values_of(inputs, &UncertainInput::fast),
                                            values_of(inputs, &UncertainInput::slow), split_values(inputs, true),
                                            split_values(inputs, false)};
    for (std::size_t i = 0; i < std::min(most_rough_classes, inputs.size()); ++i) {
        if (!inputs[i].is_roughness()) break;
        values.push_back(values_of(inputs, &UncertainInput::fast));
        values.back()[i] = inputs[i].slow();
    }
    const auto drawn = drawn_values(inputs, searching_draws, seed);
    values.insert(values.end(), drawn.begin(), drawn.end());
    std::vector<TravelSetting> settings;
    for (const auto& setting : values) settings.push_back(setting_of(inputs, setting, base));
    return settings;
}

std::vector<bool> heads_that_may_be_last(const HeadPaths& paths, const std::vector<TravelSetting>& settings, const Executor& executor,
                                         const Progress& progress) {
    std::vector<std::vector<bool>> near(settings.size());
    for_each_setting(executor, settings.size(), progress, [&](std::size_t i) {
        const double factor = settings[i].rules.sheet.storm_factor;
        const PathTimes times = paths.times(settings[i]);
        const auto own_time = [&](std::size_t head) {
            return (times.heads[head] - times.points[paths.owners()[head] - 1]).under(factor);
        };
        std::vector<double> last(times.points.size(), 0.0);
        for (std::size_t head = 0; head < times.heads.size(); ++head) {
            double& kept = last[paths.owners()[head] - 1];
            kept = std::max(kept, own_time(head));
        }
        near[i].resize(times.heads.size());
        for (std::size_t head = 0; head < times.heads.size(); ++head) {
            near[i][head] = own_time(head) >= nearly_last * last[paths.owners()[head] - 1];
        }
    });
    std::vector<bool> any(paths.heads().size(), false);
    for (const std::vector<bool>& setting : near) {
        for (std::size_t head = 0; head < any.size(); ++head) any[head] = any[head] || setting[head];
    }
    return any;
}

Uncertainty uncertainty_of(const UncertaintyGround& ground, std::vector<UncertainInput> inputs, int draws, int seed,
                           const Executor& executor, const Progress& progress) {
    Uncertainty found{.inputs = std::move(inputs), .seed = seed, .kept_heads = ground.paths.heads().size(),
                      .draws = {}, .draw_times_s = {}, .points = {}};
    found.draws = drawn_values(found.inputs, draws, seed);
    const std::vector<std::vector<double>> values = all_values(found.inputs, found.draws);
    std::vector<std::vector<SettingTime>> answers(values.size());
    for_each_setting(executor, values.size(), progress, [&](std::size_t i) {
        answers[i] = times_under(ground, setting_of(found.inputs, values[i], ground.base));
    });
    for (std::size_t point = 0; point < answers.front().size(); ++point) {
        found.points.push_back(point_uncertainty(point, found.inputs.size(), answers));
    }
    for (std::size_t i = values.size() - found.draws.size(); i < values.size(); ++i) {
        found.draw_times_s.emplace_back();
        for (const SettingTime& time : answers[i]) found.draw_times_s.back().push_back(time.seconds);
    }
    return found;
}

}  // namespace rillclock
