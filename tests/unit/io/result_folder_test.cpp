#include "rillclock/io/result_folder.hpp"

#include <algorithm>

#include "io_files.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

namespace {

struct ResultPlace {
    TemporaryFolder folder;
    fs::path target = folder / "result";

    void make(const std::string& content, Existing existing = Existing::refuse) const {
        ResultFolder result(target, existing);
        result.write_text("result.json", content);
        result.commit();
    }
    [[nodiscard]] long entries() const {
        return std::distance(fs::directory_iterator(folder.path()), fs::directory_iterator());
    }
};

}  // namespace

TEST_CASE_METHOD(ResultPlace, "a committed folder appears whole and nothing else stays") {
    {
        ResultFolder result(target, Existing::refuse);
        result.write_text("result.json", "{}");
        result.write_text("tables/outlets.csv", "name\n");
        CHECK_FALSE(fs::exists(target));
        result.commit();
    }
    CHECK(bytes_of(target / "tables/outlets.csv") == "name\n");
    CHECK(entries() == 1);
}

TEST_CASE_METHOD(ResultPlace, "a folder that is not committed leaves nothing") {
    {
        ResultFolder result(target, Existing::refuse);
        result.write_text("result.json", "{}");
    }
    CHECK(entries() == 0);
}

TEST_CASE_METHOD(ResultPlace, "an existing result is refused and untouched") {
    make("old");
    CHECK_THAT(sentence_of([&] { make("new"); }), Contains("exists already") && Contains("--replace"));
    CHECK(bytes_of(target / "result.json") == "old");
    CHECK(entries() == 1);
}

TEST_CASE_METHOD(ResultPlace, "an existing result is replaced on request, files and all") {
    {
        ResultFolder result(target, Existing::refuse);
        result.write_text("result.json", "old");
        result.write_text("stale.csv", "old");
        result.commit();
    }
    make("new", Existing::replace);
    CHECK(bytes_of(target / "result.json") == "new");
    CHECK_FALSE(fs::exists(target / "stale.csv"));
    CHECK(entries() == 1);
}

TEST_CASE_METHOD(ResultPlace, "until it is replaced the old result stands") {
    make("old");
    {
        ResultFolder result(target, Existing::replace);
        result.write_text("result.json", "new");
        CHECK(bytes_of(target / "result.json") == "old");
    }
    CHECK(bytes_of(target / "result.json") == "old");
}

TEST_CASE_METHOD(ResultPlace, "a folder that is no result is not replaced") {
    fs::create_directory(target);
    write_file(target / "thesis.txt", "years of work");
    CHECK_THAT(sentence_of([&] { make("new", Existing::replace); }), Contains("not a result"));
    CHECK(bytes_of(target / "thesis.txt") == "years of work");
}

TEST_CASE_METHOD(ResultPlace, "a link at the target is refused") {
    fs::create_directory(folder / "elsewhere");
    fs::create_symlink(folder / "elsewhere", target);
    CHECK_THAT(sentence_of([&] { make("new", Existing::replace); }), Contains("a file or a link"));
}

TEST_CASE_METHOD(ResultPlace, "a second run at once is refused and told the first one's process") {
    const ResultFolder first(target, Existing::refuse);
    CHECK_THAT(sentence_of([&] { make("second"); }), Contains("process " + std::to_string(getpid())));
}

TEST_CASE_METHOD(ResultPlace, "leavings of a run that died are cleared away") {
    fs::create_directory(folder / ".result.making-99999999");
    write_file(folder / ".result.making-99999999/part.tif", "x");
    write_file(folder / ".result.lock", "99999999");
    make("new");
    CHECK(entries() == 1);
}

TEST_CASE_METHOD(ResultPlace, "a result that a dead run had set aside is put back") {
    make("old");
    fs::rename(target, folder / ".result.aside");
    { const ResultFolder next(target, Existing::replace); }
    CHECK(bytes_of(target / "result.json") == "old");
    CHECK(entries() == 1);
}

TEST_CASE_METHOD(ResultPlace, "a missing parent folder is said") {
    target = folder / "none/result";
    CHECK_THAT(sentence_of([&] { make("new"); }), Contains("does not exist; make it first"));
}

TEST_CASE_METHOD(ResultPlace, "a place outside the folder is refused") {
    ResultFolder result(target, Existing::refuse);
    CHECK_THAT(sentence_of([&] { (void)result.path("../x"); }, Fault::bug), Contains("no place within"));
}

TEST_CASE_METHOD(ResultPlace, "a file is not written twice") {
    ResultFolder result(target, Existing::refuse);
    result.write_text("a.csv", "1");
    CHECK_THAT(sentence_of([&] { result.write_text("a.csv", "2"); }, Fault::machine), Contains("a.csv"));
}

TEST_CASE("a place that cannot be written is the machine's fault at the start") {
    CHECK_THAT(sentence_of([] { const ResultFolder result("/proc/result", Existing::refuse); }, Fault::machine),
               Contains("Cannot make the lock file"));
}
