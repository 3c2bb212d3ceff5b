// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QFutureWatcher>
#include <QObject>
#include <QThreadPool>
#include <atomic>
#include <memory>

#include "desk_data.h"

namespace soak::desk {

/// Answers one job after another in a worker; only the answer to the last question is given. Sweeps are kept, so that
/// another furnace for the same heat is quick.
class Judge : public QObject {
    Q_OBJECT

public:
    explicit Judge(QObject* parent = nullptr);
    ~Judge() override;
    void ask(std::shared_ptr<const DeskData> data, Job job);
    /// Whatever is under way is no longer wanted.
    void forget();

signals:
    void started();
    void answered(const soak::WindowAnswer& answer);
    void failed(const QString& reason);

private:
    using Answer = std::shared_ptr<Result<WindowAnswer>>;
    void deliver();

    QThreadPool pool_;  // one thread: the cache is its own
    std::shared_ptr<ReportCache> cache_ = std::make_shared<ReportCache>();
    std::shared_ptr<std::atomic<int>> latest_ = std::make_shared<std::atomic<int>>(0);
    int asked_ = 0;
    QFutureWatcher<Answer> watcher_;
};

}  // namespace soak::desk
