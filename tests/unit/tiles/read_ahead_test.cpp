#include "rillclock/tiles/read_ahead.hpp"

#include <catch2/catch.hpp>
#include <stdexcept>

using namespace rillclock;

namespace {

/// Each cell holds its row; a row can be one that cannot be read.
class Rows : public BlockSource<double> {
public:
    Rows(std::int64_t rows, std::int64_t columns, std::int64_t broken_row = -1)
        : grid_{.rows = rows, .columns = columns}, broken_row_(broken_row) {}
    [[nodiscard]] const Grid& grid() const override { return grid_; }
    void read(const Window& window, std::span<double> values) override {
        if (window.row <= broken_row_ && broken_row_ < window.row + window.rows) throw std::runtime_error("broken");
        for (std::int64_t i = 0; i < window.size(); ++i) values[static_cast<std::size_t>(i)] = static_cast<double>(window.row + i / window.columns);
    }

private:
    Grid grid_;
    std::int64_t broken_row_;
};

}  // namespace

TEST_CASE("every row comes once and in order, whatever the height of strips") {
    for (const std::int64_t height : {1, 3, 10, 11, 100}) {
        Rows source(11, 4);
        std::vector<double> seen;
        read_ahead(source, height, [&](const Window&, std::span<const double> values) { seen.insert(seen.end(), values.begin(), values.end()); });
        REQUIRE(seen.size() == 44);
        for (std::size_t i = 0; i < seen.size(); ++i) REQUIRE(seen[i] == static_cast<double>(i / 4));
    }
}

TEST_CASE("what cannot be read stops it after the strips before") {
    Rows source(100, 4, 57);
    std::int64_t rows = 0;
    CHECK_THROWS_WITH(read_ahead(source, 10, [&](const Window& window, std::span<const double>) { rows += window.rows; }), "broken");
    CHECK(rows == 50);
}

TEST_CASE("what the user of a strip throws is thrown on") {
    Rows source(100, 4);
    CHECK_THROWS_WITH(read_ahead(source, 10, [](const Window& window, std::span<const double>) {
                          if (window.row == 30) throw std::runtime_error("enough");
                      }), "enough");
}
