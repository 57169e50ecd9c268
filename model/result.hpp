// SPDX-License-Identifier: GPL-3.0-or-later
// Expected failure as a value. `Result<T>` has the member names of std::expected, so that a later
// language standard can replace it by an alias. Exceptions are left for bugs and exhausted memory.
#pragma once

#include <stdexcept>
#include <string>
#include <utility>
#include <variant>
#include <vector>

namespace tw::model {

/// What the reader of a fault can do about it; also the exit status of the command line.
enum class FaultKind {
  Input = 1,    ///< mend the file or the value
  Usage = 2,    ///< mend the command
  Machine = 3,  ///< mend the disk, the port, the network
};

/// One thing that went wrong. `code` is stable and travels on the wire; sentences for people are made
/// from code, subject and detail at the edge (command line, desk).
struct Fault {
  std::string code;     ///< snake_case, e.g. "missing_channel", "ionic_strength_out_of_range"
  std::string subject;  ///< what it is about: a component, channel, row or file key
  std::string detail;   ///< one English sentence: the value found, the reason, what was expected
  std::string where;    ///< "FILE:LINE" or "FILE", empty when no file is involved
  FaultKind kind = FaultKind::Input;
};

/// All faults of one document: a checker lists every fault, not just the first.
using Faults = std::vector<Fault>;

/// Wraps an error for the implicit conversion into a Result.
template <class E>
struct Unexpected {
  E error;
};

/// Shorthand for `return fail({...});`.
inline Unexpected<Fault> fail(Fault fault) { return {std::move(fault)}; }
inline Unexpected<Faults> fail(Faults faults) { return {std::move(faults)}; }

/// A value of type T or an error of type E. value() on an error throws std::logic_error: asking
/// without looking is a bug.
template <class T, class E = Fault>
class [[nodiscard]] Result {
 public:
  Result(T value) : m_state(std::in_place_index<0>, std::move(value)) {}  // NOLINT: implicit by design
  Result(Unexpected<E> error) : m_state(std::in_place_index<1>, std::move(error.error)) {}  // NOLINT

  [[nodiscard]] bool has_value() const noexcept { return m_state.index() == 0; }
  explicit operator bool() const noexcept { return has_value(); }

  [[nodiscard]] T& value() & { return require(); }
  [[nodiscard]] const T& value() const& { return const_cast<Result*>(this)->require(); }
  [[nodiscard]] T&& value() && { return std::move(require()); }
  T& operator*() & { return require(); }
  const T& operator*() const& { return const_cast<Result*>(this)->require(); }
  T&& operator*() && { return std::move(require()); }
  T* operator->() { return &require(); }
  const T* operator->() const { return &const_cast<Result*>(this)->require(); }

  [[nodiscard]] E& error() & { return std::get<1>(m_state); }
  [[nodiscard]] const E& error() const& { return std::get<1>(m_state); }
  [[nodiscard]] E&& error() && { return std::get<1>(std::move(m_state)); }

 private:
  T& require() {
    if (!has_value()) throw std::logic_error("Result::value() on an error");
    return std::get<0>(m_state);
  }
  std::variant<T, E> m_state;
};

/// Nothing, for `Result<Done>`: an action that can fail and returns no value.
struct Done {};

}  // namespace tw::model
