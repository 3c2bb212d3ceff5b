// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QString>
#include <catch2/catch.hpp>
#include <string>

#include "base/result.h"

namespace Catch {
template <>
struct StringMaker<QString> {
    static std::string convert(const QString& text) { return '"' + text.toStdString() + '"'; }
};
}  // namespace Catch

/// The value, or a failed test that shows the error.
template <class T>
T must(soak::Result<T> result) {
    if (!result) FAIL(result.error().text());
    return std::move(result).value();
}

/// The words of an expected error; a success fails the test.
template <class T>
std::string refusal(const soak::Result<T>& result) {
    if (result) FAIL("succeeded where a refusal was expected");
    return result.error().text();
}
