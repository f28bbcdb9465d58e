#pragma once

#include <memory>
#include <mutex>
#include <utility>
#include <vector>

namespace rillclock {

/// Memory that work on tiles needs, handed from tile to tile: fresh memory is dear, so no more is made than there are threads.
template <class Workspace>
class Workspaces {
public:
    /// A workspace for as long as this lives; its content is what the last user left.
    class Lease {
    public:
        explicit Lease(Workspaces& pool) : pool_(pool), workspace_(pool.take()) {}
        ~Lease() { pool_.give_back(std::move(workspace_)); }
        Lease(const Lease&) = delete;
        Lease& operator=(const Lease&) = delete;
        Workspace& operator*() const { return *workspace_; }
        Workspace* operator->() const { return workspace_.get(); }

    private:
        Workspaces& pool_;
        std::unique_ptr<Workspace> workspace_;
    };

    [[nodiscard]] Lease lease() { return Lease(*this); }

private:
    std::unique_ptr<Workspace> take() {
        const std::lock_guard lock(mutex_);
        if (idle_.empty()) return std::make_unique<Workspace>();
        auto workspace = std::move(idle_.back());
        idle_.pop_back();
        return workspace;
    }
    void give_back(std::unique_ptr<Workspace> workspace) {
        const std::lock_guard lock(mutex_);
        idle_.push_back(std::move(workspace));
    }

    std::mutex mutex_;
    std::vector<std::unique_ptr<Workspace>> idle_;
};

}  // namespace rillclock
