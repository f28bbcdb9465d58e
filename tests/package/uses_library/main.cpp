// The smallest program that uses the library: runs a study and prints what came of it.
#include <iostream>

#include "rillclock/core/error.hpp"
#include "rillclock/run/run_study.hpp"
#include "rillclock/run/study_source.hpp"

int main(int count, char** words) {
    if (count != 2) return 2;
    try {
        const rillclock::RunOutcome outcome = rillclock::run(rillclock::read_study_file(words[1]), {.replace = true});
        for (const std::string& headline : outcome.headlines) std::cout << headline << '\n';
        return 0;
    } catch (const rillclock::Error& error) {
        std::cerr << error.what() << '\n';
        return 1;
    }
}
