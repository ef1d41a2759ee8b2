// src/base/result.hpp - errors as values.
//
// Every function that can meet bad input returns Result<T>. An Error says where, what, and what to
// do; the library never prints and never exits. A finding about a design is not an error: it is
// part of the audit.
#pragma once

#include <optional>
#include <string>
#include <utility>
#include <variant>

namespace gramproof {

enum class ErrorKind {
  usage,     ///< the command line
  design,    ///< the design language, or a name in it
  data,      ///< the content of a file
  io,        ///< the file system
  limit,     ///< a stated limit of the program was met
  internal,  ///< a defect of gramproof; worth a report
};

struct Error {
  ErrorKind kind = ErrorKind::internal;
  std::string where;  ///< e.g. "harbour.csv:1042:17" (file:line:column, both from 1) or
                      ///< "--design:14"; may be empty
  std::string what;   ///< one clause, no final full stop; names the cell or word that is wrong
  std::string hint;   ///< what to do, one clause; may be empty
};

/// One line without the program's prefix: `where: what (hint)`. Control characters are made
/// visible.
[[nodiscard]] std::string to_line(const Error& error);

/// T or Error (C++20 has no std::expected).
template <class T>
class [[nodiscard]] Result {
 public:
  Result(T value) : content_(std::move(value)) {}      // NOLINT: implicit by intent
  Result(Error error) : content_(std::move(error)) {}  // NOLINT
  [[nodiscard]] explicit operator bool() const { return content_.index() == 0; }
  [[nodiscard]] T& value() { return std::get<0>(content_); }
  [[nodiscard]] const T& value() const { return std::get<0>(content_); }
  [[nodiscard]] const Error& error() const { return std::get<1>(content_); }
  [[nodiscard]] Error& error() { return std::get<1>(content_); }

 private:
  std::variant<T, Error> content_;
};

template <>
class [[nodiscard]] Result<void> {
 public:
  Result() = default;
  Result(Error error) : error_(std::move(error)) {}  // NOLINT
  [[nodiscard]] explicit operator bool() const { return !error_.has_value(); }
  [[nodiscard]] const Error& error() const { return *error_; }

 private:
  std::optional<Error> error_;
};

}  // namespace gramproof
