#include "rillclock/io/gdal_session.hpp"

#include <cpl_conv.h>
#include <cpl_error.h>
#include <gdal.h>
#include <ogr_srs_api.h>

#include <algorithm>
#include <array>
#include <deque>
#include <mutex>
#include <optional>
#include <utility>

#include "rillclock/io/library_versions.hpp"

namespace rillclock {
namespace {

constexpr std::size_t kept_messages = 100;

/// Messages of one severity: all are counted, the last hundred are kept.
struct MessageLog {
    std::size_t count = 0;
    std::deque<std::string> last;

    void add(const char* text) {
        ++count;
        last.emplace_back(text);
        if (last.size() > kept_messages) last.pop_front();
    }
    [[nodiscard]] std::vector<std::string> since(std::size_t mark) const {
        const std::size_t wanted = std::min(count - std::min(mark, count), last.size());
        return {last.end() - static_cast<std::ptrdiff_t>(wanted), last.end()};
    }
};

using Setting = std::pair<const char*, const char*>;
constexpr std::array<Setting, 3> settings = {{{"GDAL_VRT_ENABLE_PYTHON", "NO"},
                                              {"CPL_VSIL_CURL_ALLOWED_FILENAME", "/nonexistent"},
                                              {"GML_DOWNLOAD_WFS_SCHEMA", "NO"}}};

/// What all sessions of the process share.
struct Shared {
    std::mutex mutex;
    int sessions = 0;
    MessageLog failures;
    MessageLog warnings;
    CPLErrorHandler former_handler = nullptr;
    void* former_handler_data = nullptr;
    std::array<std::optional<std::string>, settings.size()> former_settings;
    int former_network = 0;
};

Shared& shared() {
    static Shared instance;
    return instance;
}

void CPL_STDCALL collect(CPLErr severity, CPLErrorNum, const char* text) {
    const std::scoped_lock lock(shared().mutex);
    if (severity == CE_Failure || severity == CE_Fatal) shared().failures.add(text);
    if (severity == CE_Warning) shared().warnings.add(text);
}

void apply_settings(Shared& state) {
    for (std::size_t i = 0; i < settings.size(); ++i) {
        const char* former = CPLGetConfigOption(settings[i].first, nullptr);
        state.former_settings[i] = former ? std::optional<std::string>(former) : std::nullopt;
        CPLSetConfigOption(settings[i].first, settings[i].second);
    }
    state.former_network = OSRGetPROJEnableNetwork();
    OSRSetPROJEnableNetwork(0);
}

void restore_settings(const Shared& state) {
    for (std::size_t i = 0; i < settings.size(); ++i)
        CPLSetConfigOption(settings[i].first, state.former_settings[i] ? state.former_settings[i]->c_str() : nullptr);
    OSRSetPROJEnableNetwork(state.former_network);
}

void begin(Shared& state) {
    GDALAllRegister();
    state.former_handler_data = CPLGetErrorHandlerUserData();
    state.former_handler = CPLSetErrorHandlerEx(collect, nullptr);
    apply_settings(state);
}

void end(const Shared& state) {
    restore_settings(state);
    CPLSetErrorHandlerEx(state.former_handler, state.former_handler_data);
}

void leave() {
    Shared& state = shared();
    std::unique_lock lock(state.mutex);
    const bool was_last = --state.sessions == 0;
    lock.unlock();
    if (was_last) end(state);
}

}  // namespace

GdalSession::GdalSession() {
    Shared& state = shared();
    std::unique_lock lock(state.mutex);
    const bool is_first = state.sessions++ == 0;
    lock.unlock();  // GDAL may report while it is set up, and reporting takes the lock
    if (!is_first) return;
    begin(state);
    if (proj_database_opens()) return;
    leave();
    throw machine_error(
        "PROJ's database (proj.db) cannot be opened, so no reference system is known; install the package proj-data, "
        "or "
        "let the environment variable PROJ_LIB name the folder that holds it.");
}

GdalSession::~GdalSession() {
    leave();
}

GdalMark GdalSession::mark() const {
    const std::scoped_lock lock(shared().mutex);
    return {.failures = shared().failures.count, .warnings = shared().warnings.count};
}

std::string GdalSession::failure_since(const GdalMark& since) const {
    const std::scoped_lock lock(shared().mutex);
    if (shared().failures.count <= since.failures) return {};
    return shared().failures.since(since.failures).front();
}

void GdalSession::throw_if_failed(const GdalMark& since, Fault fault, const std::string& what) const {
    const std::string first = failure_since(since);
    if (!first.empty() || mark().failures > since.failures) throw Error(fault, what + ": " + first);
}

std::vector<std::string> GdalSession::warnings_since(const GdalMark& since) const {
    const std::scoped_lock lock(shared().mutex);
    std::vector<std::string> texts = shared().warnings.since(since.warnings);
    std::sort(texts.begin(), texts.end());
    texts.erase(std::unique(texts.begin(), texts.end()), texts.end());
    return texts;
}

}  // namespace rillclock
