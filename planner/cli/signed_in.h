// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QDate>

#include "arguments.h"
#include "db/people.h"
#include "db/store.h"

namespace soak::cli {

/// The day of the work: --date, else the demonstration's, else the clock's.
Result<QDate> workingDay(const Arguments& arguments, const Store& store);

/// The first line of a file ("-": standard input), without its end: a password is never an argument, where every
/// process of the machine could read it. Fault::input when it cannot be read.
Result<QString> firstLine(const QString& path);

/// Who acts (--by), why (--why) and when. Where the store's roles are on, the name's password is read from the first
/// line of --password-file ("-": standard input); Fault::input when it is missing or wrong.
Result<Act> actOf(const Arguments& arguments, const Store& store);

}  // namespace soak::cli
