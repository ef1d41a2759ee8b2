#include <algorithm>

#include "base/text.hpp"
#include "design/bind.hpp"
#include "design/binder.hpp"
#include "design/lexer.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

/// The text with blanks and needless quotes out: two spellings of one label agree. The text itself
/// if it is no label.
std::string without_blanks(const std::string& text) {
  const Result<std::vector<Token>> tokens = tokens_of({text, ""});
  if (!tokens) return text;
  std::string joined;
  for (const Token& token : tokens.value()) {
    joined += token.kind == TokenKind::quoted ? quoted_if_needed(token.text) : token.text;
    joined += ' ';
  }
  return joined;
}

/// Design columns that a name stands for: the column of that label, or all columns of a term.
std::vector<int> columns_called(const Design& design, const std::string& name) {
  const std::string wanted = without_blanks(name);
  const auto same = [&](const std::string& text) {
    return text == name || without_blanks(text) == wanted;
  };
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    if (same(design.columns[j].label)) return {static_cast<int>(j)};
    // A column whose name needs quotes may be given without them: options hold names, not designs.
    if (design.columns[j].label == in_quotes(name)) return {static_cast<int>(j)};
  }
  for (const Term& term : design.terms) {
    if (same(term.text)) return term.columns;
  }
  return {};
}

Error unknown(const Design& design, const std::string& option, const std::string& name) {
  std::vector<std::string> names;
  for (const DesignColumn& column : design.columns) names.push_back(column.label);
  for (const Term& term : design.terms) names.push_back(term.text);
  const bool empty_term = std::any_of(
      design.terms.begin(), design.terms.end(),
      [&](const Term& term) { return without_blanks(term.text) == without_blanks(name); });
  if (empty_term)
    return {ErrorKind::design, option, "the term " + name + " gives no column on the rows used",
            ""};
  const std::string near = did_you_mean(name, names);
  return {ErrorKind::design, option, "no column or term of the design is called " + in_quotes(name),
          near.empty() ? "write it as the design or the report does" : near};
}

Result<void> assign(Design& design, const std::string& option,
                    const std::vector<std::string>& names, Role role) {
  for (const std::string& name : names) {
    const std::vector<int> columns = columns_called(design, name);
    if (columns.empty()) return unknown(design, option, name);
    for (const int j : columns) design.columns[static_cast<std::size_t>(j)].role = role;
  }
  return {};
}

}  // namespace

/// Who is both protected and in focus is protected: protection forbids, focus only looks.
Result<void> assign_roles(Design& design, const std::vector<std::string>& focus,
                          const std::vector<std::string>& protect) {
  if (Result<void> done = assign(design, "--focus", focus, Role::focus); !done) return done;
  return assign(design, "--protect", protect, Role::protect);
}

}  // namespace gramproof::design
