#pragma once

#include <chrono>
#include <cstdint>
#include <cstdlib>
#include <exception>
#include <iostream>
#include <limits>
#include <span>
#include <stdexcept>
#include <string>

#include "bench/terrain_generator.hpp"

namespace rillclock::bench {

/// What the programs of this folder share: words of the command line in, lines "name TAB number" out.
class Words {
public:
    Words(int count, char** words, const char* usage) : words_(words, static_cast<std::size_t>(count)), usage_(usage) {}

    [[nodiscard]] std::size_t count() const { return words_.size() - 1; }
    [[nodiscard]] std::string text(std::size_t position) const {
        if (position + 1 >= words_.size()) throw std::invalid_argument(usage());
        return words_[position + 1];
    }
    /// A number from 1 on.
    [[nodiscard]] std::int64_t number(std::size_t position) const {
        const std::int64_t value = std::atoll(text(position).c_str());
        if (value < 1) throw std::invalid_argument(usage());
        return value;
    }
    [[nodiscard]] std::int64_t number(std::size_t position, std::int64_t otherwise) const {
        return position < count() ? number(position) : otherwise;
    }
    [[nodiscard]] TerrainKind kind(std::size_t position) const {
        const auto kind = terrain_kind(text(position));
        if (!kind) throw std::invalid_argument(usage());
        return *kind;
    }

private:
    [[nodiscard]] std::string usage() const { return std::string("usage: ") + usage_; }
    std::span<char*> words_;
    const char* usage_;
};

/// Seconds that `work` takes.
template <class Work>
[[nodiscard]] double seconds_of(const Work& work) {
    const auto begun = std::chrono::steady_clock::now();
    work();
    return std::chrono::duration<double>(std::chrono::steady_clock::now() - begun).count();
}

/// The least of several times: what disturbs a measurement only ever lengthens it.
template <class Work>
[[nodiscard]] double least_seconds_of(std::int64_t repeats, const Work& work) {
    double least = std::numeric_limits<double>::infinity();
    for (std::int64_t i = 0; i < repeats; ++i) least = std::min(least, seconds_of(work));
    return least;
}

inline void tell(const std::string& name, double value) {
    std::cout << name << '\t' << value << std::endl;
}

/// Runs a program's own main function; what it throws is said on stderr and becomes exit status 1.
template <class Main>
[[nodiscard]] int guarded(const Main& main) {
    try {
        main();
        return 0;
    } catch (const std::exception& error) {
        std::cerr << error.what() << '\n';
        return 1;
    }
}

}  // namespace rillclock::bench
