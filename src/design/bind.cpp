#include "design/bind.hpp"

#include <algorithm>
#include <unordered_map>
#include <utility>

#include "base/text.hpp"
#include "design/binder.hpp"
#include "design/canonical.hpp"
#include "design/marginality.hpp"
#include "design/rest.hpp"
#include "design/sets.hpp"
#include "design/syntax.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

/// 0/1 by construction, or a numeric column that holds nothing but 0 and 1, or products of such.
bool holds_zero_one(const Expression& expression, const table::Schema& schema) {
  if (is_zero_one(expression)) return true;
  if (expression.operation == Operation::multiply) {
    return holds_zero_one(*expression.operands[0], schema) &&
           holds_zero_one(*expression.operands[1], schema);
  }
  if (expression.operation != Operation::cell) return false;
  const table::ColumnFacts& facts = schema.columns[static_cast<std::size_t>(expression.column)];
  return facts.present > 0 && facts.all_whole && facts.smallest >= 0 && facts.largest <= 1;
}

/// The text as asked, without remarks and with runs of blanks as one: it still pastes back.
std::string on_one_line(const std::string& text) {
  std::string line;
  bool quoted = false, remark = false;
  for (const char c : text) {
    if (c == '"') quoted = !quoted;
    if (c == '#' && !quoted) remark = true;
    if (c == '\n') remark = false;
    if (remark) continue;
    const bool blank = c == ' ' || c == '\t' || c == '\n' || c == '\r';
    if (blank && !quoted) {
      if (!line.empty() && line.back() != ' ') line += ' ';
    } else {
      line += c;
    }
  }
  while (!line.empty() && line.back() == ' ') line.pop_back();
  return line;
}

/// The work of one bind(): places of the analyst's names, then terms, then the condition.
class Build {
 public:
  Build(const Syntax& syntax, const Request& request, const table::Schema& schema,
        const std::string& data_name, std::size_t most_columns, const BytesNeeded& bytes_needed)
      : syntax_(syntax),
        request_(request),
        schema_(schema),
        binder_(schema, data_name, syntax.design, false),
        condition_(schema, data_name, syntax.rows, true),
        sets_(binder_, design_),
        most_columns_(most_columns),
        bytes_needed_(bytes_needed),
        has_part_(schema.columns.size(), false) {}

  Result<Design> run() {
    design_.text = on_one_line(request_.design);
    design_.undefined = request_.undefined;
    if (Result<void> named = named_columns(); !named) return named.error();
    if (Result<void> filter = bind_condition(); !filter) return filter.error();
    std::vector<SetOfColumns> made(syntax_.terms.size());
    make_terms(made);
    if (!binder_.failed()) make_rest(made);
    if (binder_.failed()) return binder_.error();
    for (std::size_t t = 0; t < made.size(); ++t) add_term(t, std::move(made[t]));
    if (binder_.failed()) return binder_.error();
    if (design_.columns.empty()) {
      return binder_.source().error(syntax_.terms[0].at, "the design gives no column");
    }
    note_absent_main_effects(design_, schema_);
    for (std::size_t c = 0; c < has_part_.size(); ++c) {
      if (has_part_[c]) design_.used_columns.push_back(static_cast<int>(c));
    }
    design_.read_columns = design_.used_columns;
    return std::move(design_);
  }

 private:
  Result<int> named(const std::string& option, const std::string& name) {
    Result<int> found = find_column(schema_, binder_.data_name(), option, name);
    if (found) use(found.value());
    return found;
  }

  void use(int column) { has_part_[static_cast<std::size_t>(column)] = true; }

  Result<void> named_columns() {
    if (!request_.response.empty()) {
      const Result<int> found = named("--response", request_.response);
      if (!found) return found.error();
      design_.response = found.value();
    }
    if (!request_.weight.empty()) {
      const Result<int> found = named("--weight", request_.weight);
      if (!found) return found.error();
      design_.weight = found.value();
      const table::ColumnFacts& facts = binder_.facts(design_.weight);
      if (facts.kind == table::ColumnKind::text) {
        const std::string first = facts.first_not_number
                                      ? ", first " + in_quotes(facts.first_not_number->text) +
                                            " at " + facts.first_not_number->where
                                      : "";
        return Error{ErrorKind::design, "--weight",
                     in_quotes(facts.name) + " holds cells that are no numbers" + first,
                     "--missing names the cells that count as missing"};
      }
    }
    for (const std::string& name : request_.complete) {
      const Result<int> found = named("--complete", name);
      if (!found) return found.error();
    }
    return {};
  }

  Result<void> bind_condition() {
    if (!syntax_.condition) return {};
    design_.filter = condition_.condition(*syntax_.condition);
    if (condition_.failed()) return condition_.error();
    design_.filter_text = text_of_condition(*design_.filter, schema_);
    for (const int column : columns_of(*design_.filter)) use(column);
    return {};
  }

  bool within_limit(std::uint64_t more, std::size_t at) {
    if (!__builtin_add_overflow(columns_, more, &columns_) && columns_ <= most_columns_)
      return true;
    const bool beyond = columns_ < more || more == ~std::uint64_t{0};
    binder_.fail({ErrorKind::limit, binder_.source().where(at),
                  "with this term the design has " +
                      (beyond ? "more than 2^64" : grouped(columns_)) +
                      " columns; the memory is enough for " + grouped(most_columns_),
                  memory_advice(beyond)});
    return false;
  }

  /// What --memory would have to be for the columns so far. Beyond a million columns (terabytes) no
  /// figure helps.
  std::string memory_advice(bool beyond) const {
    constexpr std::uint64_t most_said = std::uint64_t{1} << 20;
    if (beyond || !bytes_needed_ || columns_ > most_said)
      return "--memory sets how much may be used";
    const std::uint64_t megabytes = (bytes_needed_(columns_) >> 20) + 1;
    return "that many need --memory " + std::to_string(megabytes) + "MB";
  }

  void make_terms(std::vector<SetOfColumns>& made) {
    for (std::size_t t = 0; t < made.size(); ++t) {
      const Node& term = syntax_.terms[t];
      if (term.kind == NodeKind::rest) continue;
      const std::uint64_t count = sets_.count(term);
      if (binder_.failed() || !within_limit(count, term.at)) return;
      made[t] = sets_.make(term);
      if (binder_.failed()) return;
      for (const SetColumn& column : made[t].columns) {
        for (const int source : columns_of(*column.definition)) use(source);
      }
    }
  }

  void make_rest(std::vector<SetOfColumns>& made) {
    const Node* first = nullptr;
    for (std::size_t t = 0; t < made.size(); ++t) {
      const Node& term = syntax_.terms[t];
      if (term.kind != NodeKind::rest) continue;
      if (first != nullptr) {
        binder_.fail(term.at, "`rest` stands here for the second time",
                     "it takes all that is left at once");
        return;
      }
      first = &term;
      made[t].text = "rest";
      const std::vector<int> taken = columns_of_rest(binder_, has_part_, design_.notes);
      for (const int column : taken) {
        const std::uint64_t count = sets_.count_table_column(column, term.at);
        if (binder_.failed() || !within_limit(count, term.at)) return;
        sets_.add_table_column(column, term.at, made[t]);
        use(column);
      }
    }
  }

  void add_term(std::size_t t, SetOfColumns made) {
    const Node& node = syntax_.terms[t];
    Term term{std::move(made.text), {}};
    for (SetColumn& from : made.columns) {
      DesignColumn column;
      column.constant = node.kind == NodeKind::constant;
      column.label = column.constant ? "constant" : canonical_text(*from.definition, schema_);
      column.term = static_cast<int>(t);
      column.exact = is_exact(*from.definition);
      column.zero_one = holds_zero_one(*from.definition, schema_);
      column.sources = columns_of(*from.definition);
      column.definition = std::move(from.definition);
      column.levels = std::move(from.levels);
      const auto [known, fresh] = term_of_label_.emplace(column.label, t);
      if (!fresh) {
        binder_.fail(node.at,
                     "the column " + column.label + " is already made by the term at " +
                         binder_.source().where(syntax_.terms[known->second].at),
                     "leave one of them out");
        return;
      }
      term.columns.push_back(static_cast<int>(design_.columns.size()));
      design_.columns.push_back(std::move(column));
    }
    design_.terms.push_back(std::move(term));
  }

  const Syntax& syntax_;
  const Request& request_;
  const table::Schema& schema_;
  Design design_;
  Binder binder_;
  Binder condition_;
  SetMaker sets_;
  std::uint64_t columns_ = 0;
  std::uint64_t most_columns_;
  const BytesNeeded& bytes_needed_;
  std::vector<bool> has_part_;  ///< table columns that are used: `rest` does not take them, their
                                ///< cells must be present
  std::unordered_map<std::string, std::size_t> term_of_label_;
};

}  // namespace

Result<Design> bind(const Syntax& syntax, const Request& request, const table::Schema& schema,
                    const std::string& data_name, std::size_t most_columns,
                    const BytesNeeded& bytes_needed) {
  return Build(syntax, request, schema, data_name, most_columns, bytes_needed).run();
}

}  // namespace gramproof::design
