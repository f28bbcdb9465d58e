// A whole study: its file, something stated in place of what the file says, progress that is told, and figures read from the result.
//   4_study_and_its_result STUDY.toml
#include <iostream>

#include "rillclock/core/error.hpp"
#include "rillclock/run/explain.hpp"
#include "rillclock/run/read_result.hpp"
#include "rillclock/run/run_study.hpp"
#include "rillclock/run/study_source.hpp"

using namespace rillclock;

int main(int count, char** words) {
    if (count != 2) return 2;
    try {
        Study study = read_study_file(words[1]);
        study.report_units = ReportUnits::us;
        const Progress progress([](const StageProgress& told) {
            if (told.finished) std::cerr << told.stage << " is done\n";
            return true;   // false would stop the run, which then leaves nothing behind
        });
        const RunOutcome outcome = run(study, {.replace = true}, progress);
        for (const std::string& headline : outcome.headlines) std::cout << headline << '\n';

        const CsvTable outlets = result_table(outcome.folder, "outlets");
        const std::size_t name = outlets.column("name").value();
        const std::size_t time = outlets.column("time_of_concentration_min").value();
        for (const CsvRow& row : outlets.rows) std::cout << row.fields[name] << ": " << row.fields[time] << " min\n";
        const Raster<double> minutes = result_raster(outcome.folder, "travel_time");   // NaN where void
        std::cout << minutes.rows() << " rows of " << minutes.columns() << " cells\n" << explanation(outcome.folder, outlets.rows.front().fields[name]);
        return 0;
    } catch (const Error& error) {
        std::cerr << error.what() << '\n';
        return error.fault() == Fault::machine ? 3 : 1;
    }
}
