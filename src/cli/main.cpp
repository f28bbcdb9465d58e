#include <poll.h>
#include <spdlog/sinks/stdout_sinks.h>
#include <spdlog/spdlog.h>
#include <unistd.h>

#include <algorithm>
#include <cstdlib>
#include <exception>
#include <iostream>
#include <memory>
#include <new>
#include <string>
#include <vector>

#include "options.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/noticed_kinds.hpp"
#include "rillclock/run/check.hpp"
#include "rillclock/run/compare.hpp"
#include "rillclock/run/demo.hpp"
#include "rillclock/run/explain.hpp"
#include "rillclock/run/reference_text.hpp"
#include "rillclock/run/run_study.hpp"
#include "stage_log.hpp"
#include "stop_signal.hpp"

namespace rillclock {
namespace {

constexpr int status_inputs = 1;
constexpr int status_command_line = 2;
constexpr int status_machine = 3;
constexpr int status_worse = 4;
constexpr int status_signal = 128;
constexpr std::size_t most_kinds_shown = 8;

int status_of(Fault fault) {
    switch (fault) {
        case Fault::inputs: return status_inputs;
        case Fault::command_line: return status_command_line;
        case Fault::machine:
        case Fault::bug: return status_machine;
    }
    return status_machine;
}

/// One of each kind, so that none is hidden behind many of another; of the first few kinds.
void show_kinds(const Notices& notices, const std::string& where) {
    const std::vector<NoticedKind> kinds = noticed_kinds(notices);
    for (std::size_t i = 0; i < std::min(most_kinds_shown, kinds.size()); ++i) {
        const std::string likewise = likewise_words(kinds[i]);
        spdlog::warn("notice: {}{}{}", kinds[i].first->text, likewise.empty() ? "" : " ", likewise);
    }
    if (kinds.size() > most_kinds_shown) spdlog::warn("and {} more kinds of notices{}", kinds.size() - most_kinds_shown, where);
}

void show_all(const Notices& notices) {
    for (const Notice& notice : notices) spdlog::warn("notice: {}", notice.text);
}

void show_facts(const std::vector<std::string>& facts) {
    for (const std::string& fact : facts) spdlog::info("{}", fact);
}

void show_scenarios(const RunOutcome& outcome) {
    for (const ScenarioOutcome& scenario : outcome.scenarios) {
        std::cout << "\nScenario '" << scenario.name << "' beside the study:\n" << scenario.comparison << "Its result is in "
                  << scenario.folder.string() << ", the comparison in " << scenario.comparison_folder.string() << ".\n";
    }
}

void show_outcome(const RunOutcome& outcome) {
    std::cout << '\n' << outcome.overview << '\n';
    for (const std::string& headline : outcome.headlines) std::cout << "  * " << headline << '\n';
    show_scenarios(outcome);
    std::cout << "\nThe result is in " << outcome.folder.string() << ": open report.html in a browser; tables/outlets.csv has the figures, "
              << "tables/review.csv lists what needs a person's eye.\n\n";
    for (const std::string& caution : caution_lines()) std::cout << caution << '\n';
}

int run_command(const CommandLine& line) {
    StageLog log(line.quiet);
    const Progress progress([&](const StageProgress& report) { return log.report(report); });
    const RunOutcome outcome = run(study_of(line), {.replace = line.replace, .threads = line.threads}, progress);
    if (!line.quiet) show_facts(outcome.facts);
    for (const ScenarioOutcome& scenario : outcome.scenarios) {
        if (!line.quiet) show_facts(scenario.facts);
    }
    if (line.verbose && !line.quiet) {
        show_all(outcome.notices);
    } else if (!line.quiet) {
        show_kinds(outcome.notices, " in tables/review.csv; -v says every notice");
    }
    if (line.json) {
        std::cout << json_of(outcome);
    } else if (line.quiet) {
        std::cout << outcome.folder.string() << '\n';
    } else {
        show_outcome(outcome);
    }
    return 0;
}

int check_command(const CommandLine& line) {
    if (line.keys) {
        std::cout << keys_text();
        return 0;
    }
    const CheckReport report = check(study_of(line));
    for (const std::string& fact : report.facts) std::cout << fact << '\n';
    show_all(report.notices);
    for (const std::string& problem : report.problems) spdlog::error("would stop the run: {}", problem);
    for (const std::string& lack : report.lacking) spdlog::error("would stop the run here: {}", lack);
    if (!report.problems.empty()) return status_inputs;
    if (!report.lacking.empty()) return status_machine;
    std::cout << "Nothing was found that would stop the run.\n";
    return 0;
}

int demo_command(const CommandLine& line) {
    const std::vector<std::string> names = write_demo(line.demo_folder);
    std::cout << "The demo study is in " << line.demo_folder << " (";
    for (std::size_t i = 0; i < names.size(); ++i) std::cout << (i == 0 ? "" : ", ") << names[i];
    std::cout << "). Next: rillclock run " << line.demo_folder << "/study.toml\n";
    return 0;
}

int compare_command(const CommandLine& line) {
    StageLog log(line.json);
    const Progress progress([&](const StageProgress& report) { return log.report(report); });
    CompareOptions options{.tolerance = tolerance_from_text(line.tolerance), .folder = {}, .replace = line.replace};
    if (!line.compare_folder.empty()) options.folder = line.compare_folder;
    const CompareOutcome outcome = compare(line.result_folder, line.after_folder, options, progress);
    std::cout << (line.json ? outcome.json : outcome.text);
    if (outcome.folder && !line.json) std::cout << "\nThe comparison is in " << outcome.folder->string() << ".\n";
    return outcome.worse > 0 ? status_worse : 0;
}

int do_command(const CommandLine& line) {
    switch (line.command) {
        case CommandLine::Command::run: return run_command(line);
        case CommandLine::Command::check: return check_command(line);
        case CommandLine::Command::demo: return demo_command(line);
        case CommandLine::Command::explain: std::cout << explanation(line.result_folder, line.point); return 0;
        case CommandLine::Command::compare: return compare_command(line);
        case CommandLine::Command::methods: std::cout << methods_text(); return 0;
    }
    return 0;
}

/// What was printed has to arrive, unless the reader has gone away (as `head` does), which is no fault.
void finish_printing() {
    if (std::cout.flush()) return;
    pollfd out{.fd = STDOUT_FILENO, .events = POLLOUT, .revents = 0};
    const bool reader_is_gone = poll(&out, 1, 0) == 1 && (out.revents & POLLERR) != 0;
    if (reader_is_gone) return;
    throw machine_error("standard output cannot be written; look at the space on the disk it goes to");
}

int guarded_main(int count, const char* const* words) {
    try {
        const ParsedWords parsed = parse_words(count, words);
        const int status = parsed.finished ? 0 : do_command(parsed.line);
        finish_printing();
        return status;
    } catch (const Error& error) {
        spdlog::error("rillclock: {}", error.what());
        return status_of(error.fault());
    } catch (const Cancelled&) {
        spdlog::error("rillclock: stopped on request; nothing was written");
        return status_signal + stop_signal();
    } catch (const std::bad_alloc&) {
        spdlog::error("rillclock: out of memory; rillclock check says how much a study needs");
        return status_machine;
    } catch (const std::exception& unforeseen) {
        spdlog::error("rillclock: {} (this is a fault of rillclock itself; please report it)", unforeseen.what());
        return status_machine;
    }
}

}  // namespace
}  // namespace rillclock

int main(int count, char** words) {
    spdlog::set_default_logger(std::make_shared<spdlog::logger>("", std::make_shared<spdlog::sinks::stderr_sink_mt>()));
    spdlog::set_pattern("%v");
    rillclock::listen_for_signals();
    // GDAL would keep a twentieth of the machine's memory of blocks that this program reads and writes once. Whoever wants it may say so.
    setenv("GDAL_CACHEMAX", "64", 0);
    return rillclock::guarded_main(count, words);
}
