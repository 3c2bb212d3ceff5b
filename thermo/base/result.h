// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <cassert>
#include <string>
#include <utility>
#include <variant>
#include <vector>

namespace soak {

/// What kind of thing went wrong; decides the exit status of the command and the icon on the desk.
enum class Fault { input, data, range, noConvergence, store, cancelled };

/// A failure as a value. The innermost function says what, every caller adds where.
struct Error {
    Fault fault = Fault::input;
    std::string message;             ///< the offending value with its unit, the allowed range, what to do
    std::string repeat;              ///< a command line that repeats it, or empty
    std::vector<std::string> where;  ///< outermost first: "heat H-0417", "limit dissolved(M23C6)"

    Error within(std::string place) && {
        where.insert(where.begin(), std::move(place));
        return std::move(*this);
    }
    /// One line for a person: "heat D7731: N missing".
    std::string text() const {
        std::string line;
        for (const auto& place : where) line += place + ": ";
        return line + message;
    }
};

/// A value or the reason why there is none. An ordinary outcome, not an exception: it crosses threads and must not be
/// overlooked.
template <class T>
class [[nodiscard]] Result {
public:
    Result(T value) : held_(std::move(value)) {}
    Result(Error error) : held_(std::move(error)) {}
    explicit operator bool() const { return held_.index() == 0; }
    const T& value() const& {
        assert(*this);
        return *std::get_if<0>(&held_);
    }
    T& value() & {
        assert(*this);
        return *std::get_if<0>(&held_);
    }
    T value() && {
        assert(*this);
        return std::move(*std::get_if<0>(&held_));
    }
    const Error& error() const& {
        assert(!*this);
        return *std::get_if<1>(&held_);
    }
    Error error() && {
        assert(!*this);
        return std::move(*std::get_if<1>(&held_));
    }

private:
    std::variant<T, Error> held_;
};

/// For functions that only succeed or fail.
struct Done {};

}  // namespace soak
