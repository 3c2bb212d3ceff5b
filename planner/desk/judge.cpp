// SPDX-License-Identifier: GPL-3.0-or-later
#include "judge.h"

#include <QtConcurrent>

namespace soak::desk {

Judge::Judge(QObject* parent) : QObject(parent) {
    pool_.setMaxThreadCount(1);
    connect(&watcher_, &QFutureWatcherBase::finished, this, &Judge::deliver);
}

Judge::~Judge() {
    forget();
    pool_.waitForDone();
}

void Judge::forget() { ++*latest_; }

void Judge::ask(std::shared_ptr<const DeskData> data, Job job) {
    const int question = asked_ = ++*latest_;
    emit started();
    const auto answer = [data = std::move(data), job = std::move(job), cache = cache_, latest = latest_,
                         question]() -> Answer {
        if (question != *latest) return nullptr;  // a newer question waits behind this one
        return std::make_shared<Result<WindowAnswer>>(judge(job, *data->shelf, *cache));
    };
    watcher_.setFuture(QtConcurrent::run(&pool_, answer));
}

void Judge::deliver() {
    if (asked_ != *latest_ || watcher_.future().resultCount() == 0) return;
    const Answer answer = watcher_.result();
    if (!answer) return;
    if (*answer)
        emit answered(answer->value());
    else
        emit failed(QString::fromStdString(answer->error().text()));
}

}  // namespace soak::desk
