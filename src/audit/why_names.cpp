#include "audit/why_names.hpp"

#include <algorithm>

#include "base/text.hpp"
#include "design/words.hpp"

namespace gramproof::audit {
namespace {

constexpr const char* where = "COLUMN";

/// Columns that a label or a term names, by the rules of --focus; spelling apart.
std::vector<int> called(const std::string& asked, const design::Design& design) {
  design::Design copy = design;
  for (design::DesignColumn& column : copy.columns) column.role = design::Role::other;
  if (!design::assign_roles(copy, {asked}, {})) return {};
  std::vector<int> found;
  for (std::size_t j = 0; j < copy.columns.size(); ++j) {
    if (copy.columns[j].role == design::Role::focus) found.push_back(static_cast<int>(j));
  }
  return found;
}

/// The column whose label the text is, written in another way: `age*age` for `age^2` is not, but
/// `[ "region" = north ]` is.
std::vector<int> written_otherwise(const std::string& asked, const design::Design& design,
                                   const table::Schema& schema) {
  const Result<std::vector<design::ContrastPart>> parts =
      design::parse_contrast(asked, design, schema);
  if (!parts || parts.value().size() != 1) return {};
  const design::ContrastPart& part = parts.value().front();
  return part.number.value == 1 ? std::vector<int>{part.column} : std::vector<int>{};
}

std::vector<int> made_of(const std::string& asked, const design::Design& design,
                         const table::Schema& schema) {
  const bool quoted = asked.size() > 2 && asked.front() == '"' && asked.back() == '"';
  const auto source = schema.find(quoted ? asked.substr(1, asked.size() - 2) : asked);
  if (!source) return {};
  std::vector<int> found;
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    const std::vector<int>& sources = design.columns[j].sources;
    if (std::find(sources.begin(), sources.end(), static_cast<int>(*source)) != sources.end())
      found.push_back(static_cast<int>(j));
  }
  return found;
}

/// The label that the design language gives to the text's only column; "" where it gives none.
std::string canonical_label(const std::string& text, const table::Schema& schema) {
  design::Request request;
  request.design = text;
  const auto syntax = design::parse(request);
  if (!syntax) return "";
  const Result<design::Design> bound =
      design::bind(*syntax.value(), request, schema, "the data", 2);
  return bound && bound.value().columns.size() == 1 ? bound.value().columns.front().label : "";
}

std::string bracket_of(const table::ColumnFacts& facts, int level) {
  const std::string& text = facts.levels[static_cast<std::size_t>(level)].text;
  const bool words = facts.kind == table::ColumnKind::text;
  return "[" + design::quoted_if_needed(facts.name) + " = " +
         (words ? design::quoted_if_needed(text) : text) + "]";
}

/// The label with the level that its set leaves out in place of its own, in every set it uses.
std::string with_level_left_out(const design::DesignColumn& column, const design::Design& design,
                                const table::Schema& schema,
                                const std::vector<int>& left_out_levels) {
  std::string label = column.label;
  bool replaced = false;
  for (const design::LevelUse& use : column.levels) {
    const auto set = static_cast<std::size_t>(use.set);
    if (left_out_levels[set] < 0) continue;
    const auto& facts = schema.columns[static_cast<std::size_t>(design.level_sets[set].column)];
    const std::string own = canonical_label(bracket_of(facts, use.level), schema);
    const std::size_t at = own.empty() ? std::string::npos : label.find(own);
    if (at == std::string::npos) continue;
    label.replace(at, own.size(), bracket_of(facts, left_out_levels[set]));
    replaced = true;
  }
  return replaced ? canonical_label(label, schema) : "";
}

std::optional<Meaning> level_left_out(const std::string& asked, const design::Design& design,
                                      const table::Schema& schema,
                                      const std::vector<int>& left_out_levels) {
  const std::string label = canonical_label(asked, schema);
  if (label.empty()) return std::nullopt;
  for (const design::DesignColumn& column : design.columns) {
    if (with_level_left_out(column, design, schema, left_out_levels) != label) continue;
    const std::vector<int>& siblings = design.terms[static_cast<std::size_t>(column.term)].columns;
    return Meaning{AskedFor::level_left_out, {}, label, siblings.back()};
  }
  return std::nullopt;
}

Error unknown(const std::string& asked, const design::Design& design, const table::Schema& schema) {
  std::vector<std::string> names;
  for (const design::DesignColumn& column : design.columns) names.push_back(column.label);
  for (const design::Term& term : design.terms) names.push_back(term.text);
  for (const table::ColumnFacts& facts : schema.columns) names.push_back(facts.name);
  if (schema.find(asked)) {
    return {ErrorKind::design, where,
            "no column of the design is made of " + design::in_quotes(asked),
            "add it to --design to ask about it"};
  }
  const std::optional<std::string> near = nearest_name(asked, names);
  return {ErrorKind::design, where,
          "no column or term of the design is called " + design::in_quotes(asked),
          near ? "did you mean " + design::in_quotes(*near) + "?"
               : "write it as the design or the report does"};
}

}  // namespace

Result<Meaning> meaning_of(const std::string& asked, const design::Design& design,
                           const table::Schema& schema, const std::vector<int>& left_out_levels) {
  std::vector<int> columns = called(asked, design);
  if (columns.empty()) columns = written_otherwise(asked, design, schema);
  if (!columns.empty())
    return Meaning{columns.size() == 1 ? AskedFor::column : AskedFor::term, columns, "", -1};
  columns = made_of(asked, design, schema);
  if (!columns.empty())
    return Meaning{columns.size() == 1 ? AskedFor::column : AskedFor::source, columns, "", -1};
  if (const auto level = level_left_out(asked, design, schema, left_out_levels)) return *level;
  return unknown(asked, design, schema);
}

}  // namespace gramproof::audit
