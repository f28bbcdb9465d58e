#include "level_distances.hpp"

#include <algorithm>
#include <iterator>

namespace rillclock {
namespace {

/// The tile's own cells in the order of their distance, as far as arrivals and queue allow: each is looked at anew when
/// its distance is lowered again, so the order matters for speed alone.
template <class Z>
class Spread {
public:
    /// Begins with the cells in the desk's queue.
    explicit Spread(Desk<Z>& desk) : desk_(desk), shape_(desk.z.shape()) {}

    void run(std::span<const Arrival> arrivals) {
        std::size_t arrived = 0;
        for (std::size_t next = 0; next < desk_.queue.size() || arrived < arrivals.size();) {
            const bool arrival_is_nearer =
                arrived < arrivals.size() &&
                (next == desk_.queue.size() || arrivals[arrived].distance <= desk_.numbers[desk_.queue[next]]);
            if (arrival_is_nearer) {
                lower(shape_.position(arrivals[arrived].cell), arrivals[arrived].distance);
                ++arrived;
            } else {
                look_around(desk_.queue[next++]);
            }
        }
    }

private:
    void lower(Position p, std::uint32_t distance) {
        if (distance >= desk_.numbers[p]) return;
        desk_.numbers[p] = distance;
        desk_.queue.push_back(p);
    }
    /// The halo and what is not flat hold distance 0, which nothing lowers.
    void look_around(Position p) {
        const std::uint32_t distance = desk_.numbers[p] + 1;
        for (const Position step : shape_.steps()) {
            const Position beside = p + step;
            if (desk_.numbers[beside] > distance && desk_.z[beside] == desk_.z[p]) lower(beside, distance);
        }
    }

    Desk<Z>& desk_;
    PatchShape shape_;
};

/// The best that the changed cells of the rim can offer to each cell of the halo.
template <class Z>
std::vector<Arrival> offers(Desk<Z>& desk, std::span<const std::uint32_t> before) {
    const PatchShape& shape = desk.z.shape();
    shape.for_each_halo([&](Position p) { desk.numbers[p] = unreached; });
    std::vector<Position> offered;
    std::size_t place = 0;
    shape.for_each_rim([&](Position p) {
        const std::uint32_t known = before[place++];
        if (desk.numbers[p] >= known) return;
        for (const Position step : shape.steps()) {
            const Position beside = p + step;
            if (!is_flat(desk.codes[beside]) || desk.z[beside] != desk.z[p] || shape.is_in_tile(beside)) continue;
            if (desk.numbers[beside] == unreached) offered.push_back(beside);
            desk.numbers[beside] = std::min(desk.numbers[beside], desk.numbers[p] + 1);
        }
    });
    std::vector<Arrival> letters;
    letters.reserve(offered.size());
    for (const Position p : offered) letters.push_back({shape.cell(p), desk.numbers[p]});
    return letters;
}

std::vector<std::uint32_t> rim_of(const Patch<std::uint32_t>& distances) {
    std::vector<std::uint32_t> rim;
    distances.shape().for_each_rim([&](Position p) { rim.push_back(distances[p]); });
    return rim;
}

void queue_ones(const Patch<std::uint32_t>& distances, std::vector<Position>& queue) {
    const PatchShape& shape = distances.shape();
    queue.clear();
    for (std::int64_t row = 0; row < shape.rows(); ++row) {
        const Position last = shape.position(row, shape.columns());
        for (Position p = shape.position(row, 0); p < last; ++p) {
            if (distances[p] == 1) queue.push_back(p);
        }
    }
}

}  // namespace

std::vector<Arrival> nearer_arrivals(const CellNumbers& distances, std::span<const Arrival> letters) {
    std::vector<Arrival> nearer;
    std::copy_if(letters.begin(), letters.end(), std::back_inserter(nearer),
                 [&](const Arrival& letter) { return letter.distance < distances[letter.cell]; });
    return nearer;
}

template <class Z>
std::vector<Arrival> spread_from_ones(Desk<Z>& desk) {
    std::vector<std::uint32_t> before = rim_of(desk.numbers);
    for (std::uint32_t& distance : before) distance = distance == 0 ? 0 : unreached;
    queue_ones(desk.numbers, desk.queue);
    Spread<Z>(desk).run({});
    return offers(desk, before);
}

template <class Z>
std::vector<Arrival> spread(Desk<Z>& desk, std::vector<Arrival> arrivals) {
    const std::vector<std::uint32_t> before = rim_of(desk.numbers);
    std::sort(arrivals.begin(), arrivals.end(),
              [](const Arrival& a, const Arrival& b) { return a.distance < b.distance; });
    desk.queue.clear();
    Spread<Z>(desk).run(arrivals);
    return offers(desk, before);
}

template std::vector<Arrival> spread_from_ones(Desk<float>&);
template std::vector<Arrival> spread_from_ones(Desk<double>&);
template std::vector<Arrival> spread(Desk<float>&, std::vector<Arrival>);
template std::vector<Arrival> spread(Desk<double>&, std::vector<Arrival>);

}  // namespace rillclock
