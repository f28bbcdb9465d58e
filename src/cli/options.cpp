#include "options.hpp"

#include <CLI/CLI.hpp>
#include <algorithm>
#include <array>
#include <iostream>
#include <string_view>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/run/reference_text.hpp"
#include "rillclock/run/study_source.hpp"
#include "word_table.hpp"

namespace rillclock {
namespace {

/// An option that stands for a key of the study file.
struct KeyOption {
    const char* option;
    const char* key;
    const char* form;
    const char* help;
};

constexpr std::array key_options = {
    KeyOption{"--elevation", "terrain.elevation", "FILE", "elevation raster (DEM)"},
    KeyOption{"--cover", "surface.cover", "FILE", "land-cover raster"},
    KeyOption{"--book", "surface.book", "NAME|FILE", "what the cover codes mean: nlcd, worldcover, or a CSV file"},
    KeyOption{"--fallback-class", "surface.fallback_class", "CODE", "class for cells without cover and codes the book does not know"},
    KeyOption{"--points", "points.file", "FILE", "design points; without it they stand where water leaves the data"},
    KeyOption{"--rain", "rain.two_year_24_hour", "DEPTH", "2-year 24-hour rainfall depth, \"3.6 in\" or \"91 mm\""},
    KeyOption{"--rain-file", "rain.file", "FILE", "rain by duration and return period: an Atlas 14 point file or a table"},
    KeyOption{"--out", "output.folder", "FOLDER", "result folder (default: result)"},
};

constexpr const char* about =
    "Travel time of water over terrain: when it arrives at each design point, from where, along which path.\n"
    "Planning-level estimates; not for life-safety or flood-warning decisions; local criteria govern.";

void add_study_words(CLI::App& command, CommandLine& line, std::array<std::string, key_options.size()>& values) {
    command.add_option("STUDY", line.study_file, "study file (TOML); the options below may stand in for it");
    for (std::size_t i = 0; i < key_options.size(); ++i) {
        command.add_option(key_options[i].option, values[i], key_options[i].help)->type_name(key_options[i].form);
    }
}

void gather_stated(const CLI::App& command, const std::array<std::string, key_options.size()>& values, CommandLine& line) {
    for (std::size_t i = 0; i < key_options.size(); ++i) {
        if (command.count(key_options[i].option) == 0) continue;
        line.stated.push_back({key_options[i].option, key_options[i].key, values[i]});
    }
}

/// The commands' words, kept where CLI11 can fill them in.
class Words {
public:
    Words() : app_(about, "rillclock") {
        app_.set_version_flag("--version", [] { return version_line(); }, "print the versions and stop");
        app_.require_subcommand(1);
        run_ = app_.add_subcommand("run", "work out a study and write its result folder");
        add_study_words(*run_, line_, run_values_);
        run_->add_flag("--replace", line_.replace, "replace a result folder that is already there");
        run_->add_option("--threads", line_.threads, "threads (default: GDAL_NUM_THREADS, else all); no figure depends on it")
            ->type_name("NUMBER")
            ->check(CLI::Range(1, 1024));
        run_->add_flag("-q,--quiet", line_.quiet, "say nothing but errors, and where the result is");
        run_->add_flag("-v,--verbose", line_.verbose, "say every notice, not one of each kind alone");
        run_->add_flag("--json", line_.json, "print result.json on standard output, and nothing else there");
        check_ = app_.add_subcommand("check", "read headers, tables and points; say what would be wrong and what it will cost");
        add_study_words(*check_, line_, check_values_);
        check_->add_flag("--keys", line_.keys, "list every key of the study file and stop");
        explain_ = app_.add_subcommand("explain", "print the calculation sheet of one point of a result");
        explain_->add_option("RESULT", line_.result_folder, "result folder")->required();
        explain_->add_option("POINT", line_.point, "name of the point, as in tables/outlets.csv")->required();
        add_compare_words();
        methods_ = app_.add_subcommand("methods", "list every formula with its source, range and inputs");
        completion_ = app_.add_subcommand("completion", "print a script that completes these words in a shell");
        completion_->add_option("SHELL", shell_, "bash, zsh or fish")->required()->check(CLI::IsMember({"bash", "zsh", "fish"}));
        manual_ = app_.add_subcommand("manual", "print the manual page");
        demo_ = app_.add_subcommand("demo", "write the demo study, an invented town, ready to run");
        demo_->add_option("FOLDER", line_.demo_folder, "a new or empty folder")->required();
    }

    ParsedWords parse(int count, const char* const* words) {
        if (count < 2) throw Error(Fault::command_line, no_command);
        refuse_unknown_command(words[1]);
        try {
            app_.parse(count, words);
        } catch (const CLI::ExtrasError&) {
            throw Error(Fault::command_line, unexpected_word());
        } catch (const CLI::ParseError& stop) {
            if (stop.get_exit_code() != 0) throw Error(Fault::command_line, sentence_of(stop));
            app_.exit(stop, std::cout, std::cerr);
            return {.line = {}, .finished = true};
        }
        if (completion_->parsed() || manual_->parsed()) {
            std::cout << (manual_->parsed() ? manual_page(table()) : completion_script(table(), shell_));
            return {.line = {}, .finished = true};
        }
        if (run_->parsed()) gather_stated(*run_, run_values_, line_);
        if (check_->parsed()) gather_stated(*check_, check_values_, line_);
        line_.command = check_->parsed()     ? CommandLine::Command::check
                        : explain_->parsed() ? CommandLine::Command::explain
                        : compare_->parsed() ? CommandLine::Command::compare
                        : methods_->parsed() ? CommandLine::Command::methods
                        : demo_->parsed()    ? CommandLine::Command::demo
                                             : CommandLine::Command::run;
        return {.line = line_, .finished = false};
    }

private:
    static constexpr const char* no_command = "no command was given; begin with rillclock demo FOLDER, or rillclock --help";
    static constexpr const char* see_help = "; see rillclock --help, or rillclock COMMAND --help";

    void add_compare_words() {
        compare_ = app_.add_subcommand("compare", "compare two results of the same points; exit status 4 where one gets worse");
        compare_->add_option("BEFORE", line_.result_folder, "result folder")->required();
        compare_->add_option("AFTER", line_.after_folder, "result folder")->required();
        compare_->add_option("--tolerance", line_.tolerance, "how much worse a point may get: its time shorter, its peak greater (default: \"5 %\")")
            ->type_name("SHARE");
        compare_->add_option("--out", line_.compare_folder, "folder for tables and a raster of the change (default: none is written)")
            ->type_name("FOLDER");
        compare_->add_flag("--replace", line_.replace, "replace a folder that is already there");
        compare_->add_flag("--json", line_.json, "print the comparison as JSON on standard output, and nothing else there");
    }

    static std::string sentence_of(const CLI::ParseError& stop) { return std::string(stop.what()) + see_help; }

    static std::vector<std::string> names_of(const CLI::Option& option) {
        std::vector<std::string> names;
        for (const std::string& name : option.get_snames()) names.push_back("-" + name);
        for (const std::string& name : option.get_lnames()) names.push_back("--" + name);
        return names;
    }

    /// What a value is, without the bounds that are written behind it.
    static std::string value_of(const CLI::Option& option) {
        const std::string name = option.get_type_name();
        return name.substr(0, name.find(':'));
    }

    static std::vector<OptionWord> options_of(const CLI::App& command) {
        std::vector<OptionWord> options;
        for (const CLI::Option* option : command.get_options()) {
            const bool takes_value = option->get_expected_min() > 0;
            if (!option->get_positional()) options.push_back({names_of(*option), takes_value ? value_of(*option) : "", option->get_description()});
        }
        return options;
    }

    static CommandWord command_word(const CLI::App& command) {
        CommandWord word{.name = command.get_name(), .help = command.get_description(), .places = {}, .options = options_of(command)};
        for (const CLI::Option* option : command.get_options()) {
            if (option->get_positional()) word.places.push_back({option->get_name(), option->get_description(), option->get_required()});
        }
        return word;
    }

    /// The words as help shows them, for those who make something else of them.
    [[nodiscard]] WordTable table() const {
        WordTable table{.about = about, .options = options_of(app_), .commands = {}};
        for (const CLI::App* command : app_.get_subcommands(nullptr)) table.commands.push_back(command_word(*command));
        return table;
    }

    void refuse_unknown_command(const std::string& word) const {
        std::vector<std::string> names;
        for (const CLI::App* command : app_.get_subcommands(nullptr)) names.push_back(command->get_name());
        if (word.starts_with('-') || std::find(names.begin(), names.end(), word) != names.end()) return;
        throw Error(Fault::command_line, "there is no command '" + word + "'" +
                                             did_you_mean(word, std::vector<std::string_view>(names.begin(), names.end())) + see_help);
    }

    /// What to say of a word that belongs nowhere.
    [[nodiscard]] std::string unexpected_word() const {
        const std::string word = app_.remaining(true).front();
        const auto parsed = app_.get_subcommands();
        const CLI::App& command = parsed.empty() ? app_ : *parsed.front();
        const std::string name = parsed.empty() ? "rillclock" : "rillclock " + command.get_name();
        if (!word.starts_with('-')) return "'" + word + "' is one word too many for " + name + see_help;
        std::vector<std::string> options;
        for (const CLI::Option* option : command.get_options()) options.push_back(option->get_name());
        return name + " has no option " + word +
               did_you_mean(word, std::vector<std::string_view>(options.begin(), options.end())) + see_help;
    }

    CLI::App app_;
    CLI::App* run_ = nullptr;
    CLI::App* check_ = nullptr;
    CLI::App* explain_ = nullptr;
    CLI::App* compare_ = nullptr;
    CLI::App* methods_ = nullptr;
    CLI::App* completion_ = nullptr;
    CLI::App* manual_ = nullptr;
    CLI::App* demo_ = nullptr;
    std::string shell_;
    CommandLine line_;
    std::array<std::string, key_options.size()> run_values_;
    std::array<std::string, key_options.size()> check_values_;
};

}  // namespace

ParsedWords parse_words(int count, const char* const* words) {
    Words reader;
    return reader.parse(count, words);
}

Study study_of(const CommandLine& line) {
    if (line.study_file.empty() && line.stated.empty()) {
        throw Error(Fault::command_line, "no study was named; write rillclock run STUDY.toml, or rillclock run --elevation DEM "
                                         "--cover COVER --book nlcd --rain \"3.6 in\"");
    }
    Study study = line.study_file.empty() ? Study{} : read_study_file(line.study_file);
    for (const CommandLine::Stated& stated : line.stated) {
        state_in_study(study, stated.key, stated.value, stated.option);
    }
    return study;
}

}  // namespace rillclock
