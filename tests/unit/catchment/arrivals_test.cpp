#include "rillclock/catchment/arrivals.hpp"

#include <catch2/catch.hpp>

#include <algorithm>
#include <map>
#include <random>
#include <utility>
#include <vector>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

Head head(Cell cell, double fixed_s, double storm_s = 0.0) {
    return {.cell = cell, .time = {.fixed = to_fixed(fixed_s), .storm = to_fixed(storm_s)}};
}

std::vector<Cell> cells_of(const Front& front) {
    std::vector<Cell> cells;
    for (const Head& kept : front.heads()) cells.push_back(kept.cell);
    std::sort(cells.begin(), cells.end());
    return cells;
}

TEST_CASE("of two cells that arrive together the smaller index counts as the later") {
    CHECK(arrives_later(head(3, 10), head(7, 10), 1.0));
    CHECK_FALSE(arrives_later(head(7, 10), head(3, 10), 1.0));
    CHECK(arrives_later(head(7, 11), head(3, 10), 1.0));
}

TEST_CASE("which of two cells arrives later can depend on the storm") {
    const Head overland = head(1, 0, 10);
    const Head channel = head(2, 8, 0);
    CHECK(arrives_later(overland, channel, 1.0));
    CHECK(arrives_later(channel, overland, 0.5));
}

TEST_CASE("the front drops what another cell exceeds in both parts, in whichever order they come") {
    Front front;
    for (const Head& h : {head(1, 5, 5), head(2, 4, 5), head(3, 6, 5), head(4, 1, 9), head(5, 0, 9)}) front.add(h);
    CHECK(cells_of(front) == std::vector<Cell>{3, 4});
}

TEST_CASE("of cells with one time the front keeps the smallest index") {
    Front front;
    for (const Cell cell : {9U, 4U, 6U}) front.add(head(cell, 5, 5));
    CHECK(cells_of(front) == std::vector<Cell>{4});
}

TEST_CASE("fronts put together are the front of all") {
    Front a;
    a.add(head(1, 9, 1));
    a.add(head(2, 1, 9));
    Front b;
    b.add(head(3, 5, 5));
    b.add(head(4, 1, 10));
    a.add(b);
    CHECK(cells_of(a) == std::vector<Cell>{1, 3, 4});
}

TEST_CASE("under any storm the front's last arrival is that of all cells") {
    for (unsigned seed = 0; seed < 40; ++seed) {
        std::mt19937 random(seed);
        std::uniform_real_distribution<double> part(0, 1000);
        std::vector<Head> all;
        Front front;
        for (Cell cell = 0; cell < 300; ++cell) {
            all.push_back(head(cell, part(random), part(random)));
            front.add(all.back());
        }
        INFO("seed " << seed);
        REQUIRE(front.heads().size() < 60);
        for (int storm = 0; storm < 50; ++storm) {
            const double s = 10.0 * part(random) / 1000.0;
            const Head last = *std::max_element(all.begin(), all.end(),
                                                [&](const Head& a, const Head& b) { return arrives_later(b, a, s); });
            REQUIRE(front.last_to_arrive(s).cell == last.cell);
        }
    }
}

TEST_CASE("a front without cells has no last arrival") {
    CHECK_THROWS_AS(Front().last_to_arrive(1.0), Error);
}

/// Four cells of 1 m² that arrive at 0.2, 0.7, 1.5 and 2.5 s.
ArrivalBins four_cells() {
    ArrivalBins bins;
    bins.add(head(1, 0.7), to_fixed_area(1), 1.0);
    bins.add(head(2, 0.2), to_fixed_area(1), 1.0);
    bins.add(head(3, 2.5), to_fixed_area(1), 1.0);
    bins.add(head(4, 1.5), to_fixed_area(1), 1.0);
    return bins;
}

TEST_CASE("a share of the area has arrived with the last cell of the second in which it is reached") {
    const ArrivalBins bins = four_cells();
    CHECK(bins.by_share(0.25).cell == 1);  // at 0.7 s: the first second holds two cells
    CHECK(bins.by_share(0.5).cell == 1);
    CHECK(bins.by_share(0.51).cell == 4);
    CHECK(bins.by_share(0.75).cell == 4);
    CHECK(bins.by_share(1.0).cell == 3);
}

TEST_CASE("a tail that may be left out is left out whole or not at all") {
    const ArrivalBins bins = four_cells();
    CHECK(bins.last_without(0.0).cell == 3);
    CHECK(bins.last_without(0.24).cell == 3);
    CHECK(bins.last_without(0.25).cell == 4);
    CHECK(bins.last_without(0.5).cell == 1);
}

TEST_CASE("leaving everything out still leaves the earliest second") {
    CHECK(four_cells().last_without(1.0).cell == 1);
}

TEST_CASE("bins put together are the bins of all cells, whichever takes the other") {
    for (const bool small_takes_large : {true, false}) {
        ArrivalBins large = four_cells();
        ArrivalBins small;
        small.add(head(5, 2.9), to_fixed_area(4), 1.0);
        ArrivalBins& into = small_takes_large ? small : large;
        into.take(std::move(small_takes_large ? large : small), 1.0);
        CHECK(into.area() == to_fixed_area(8));
        CHECK(into.by_share(0.5).cell == 5);
        CHECK(into.by_share(0.375).cell == 4);
    }
}

TEST_CASE("bins that come in any order, some seconds twice, are those of their cells") {
    ArrivalBins bins = four_cells();
    bins.add({{.second = 7, .area = to_fixed_area(2), .last = head(7, 7.5)},
              {.second = 2, .area = to_fixed_area(1), .last = head(6, 2.6)},
              {.second = 7, .area = to_fixed_area(1), .last = head(8, 7.9)},
              {.second = -3, .area = to_fixed_area(1), .last = head(9, -2.5)}},
             1.0);
    CHECK(bins.area() == to_fixed_area(9));
    const std::vector<double> shares = {0.1, 0.3, 0.4, 0.6, 1.0};
    std::vector<Cell> found;
    for (const Head& last : bins.by_shares(shares)) found.push_back(last.cell);
    CHECK(found == std::vector<Cell>{9, 1, 4, 6, 8});
    CHECK(bins.last_without(0.34).cell == 6);
}

TEST_CASE("bins are those of their cells whether they have settled or not, however many new seconds come at a time") {
    std::mt19937 random(1202);
    for (const int seconds_in_all : {20, 300, 20'000}) {
        std::uniform_int_distribution<int> second(0, seconds_in_all);
        ArrivalBins bins;
        std::map<int, std::pair<FixedArea, Head>> plain;
        for (Cell batch = 0; batch < 60; ++batch) {
            std::vector<ArrivalBins::Bin> some;
            for (Cell i = 0; i < 1 + batch % 7 * 40; ++i) {
                const Head cell = head(batch * 1000 + i, second(random));
                const int bin = static_cast<int>(in_seconds(cell.time.under(1.0)));
                some.push_back({.second = bin, .area = 10 + i, .last = cell});
                const auto [there, is_new] = plain.try_emplace(bin, 0, cell);
                there->second.first += 10 + i;
                if (arrives_later(cell, there->second.second, 1.0)) there->second.second = cell;
            }
            if (batch % 3 == 0) {
                ArrivalBins others;
                others.add(std::move(some), 1.0);
                bins.take(std::move(others), 1.0);
            } else {
                bins.add(std::move(some), 1.0);
            }
            if (batch % 11 == 0) bins.settle();
        }
        for (const double share : {0.01, 0.3, 0.5, 0.97, 1.0}) {
            FixedArea arrived = 0;
            auto bin = plain.begin();
            while (static_cast<double>(arrived += bin->second.first) < share * static_cast<double>(bins.area())) ++bin;
            CHECK(bins.by_share(share).cell == bin->second.second.cell);
        }
        ArrivalBins settled = bins;
        settled.settle();
        CHECK(settled.last_without(0.4).cell == bins.last_without(0.4).cell);
    }
}

TEST_CASE("a front is the same whatever the order in which its cells came") {
    std::vector<Head> given = {head(9, 1, 8), head(4, 8, 1), head(7, 5, 5), head(2, 5, 5), head(3, 1, 1)};
    std::sort(given.begin(), given.end(), [](const Head& a, const Head& b) { return a.cell < b.cell; });
    do {
        Front front;
        for (const Head& one : given) front.add(one);
        REQUIRE(front.heads().size() == 3);
        CHECK(front.heads()[0].cell == 2);  // of two that are equal the smaller
        CHECK(front.heads()[1].cell == 4);
        CHECK(front.heads()[2].cell == 9);
    } while (std::next_permutation(given.begin(), given.end(), [](const Head& a, const Head& b) { return a.cell < b.cell; }));
}

TEST_CASE("cells are put in bins by their time under the storm") {
    ArrivalBins bins;
    bins.add(head(1, 0, 10), to_fixed_area(1), 0.5);
    bins.add(head(2, 6, 0), to_fixed_area(1), 0.5);
    CHECK(bins.by_share(0.5).cell == 1);
    CHECK(bins.by_share(1.0).cell == 2);
}

}  // namespace
}  // namespace rillclock
