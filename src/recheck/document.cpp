#include "recheck/document.hpp"

#include <algorithm>

#include "base/text.hpp"
#include "recheck/numbers.hpp"

namespace gramproof::recheck {
namespace {

constexpr std::size_t largest_document = 256 * 1024 * 1024;
constexpr std::size_t deepest = 50'000;
constexpr std::size_t most_columns = 100'000;
constexpr std::size_t most_relations = 1'000;

/// Thrown inside this file alone, where every second line can meet a key that is absent;
/// read_document() turns it into an Error.
struct Refusal {
  std::string what;
  std::string hint = "is it a verdict, as `gramproof check --json` writes it?";
};

const Json& child(const Json& object, const char* key) {
  if (!object.is_object() || !object.contains(key))
    throw Refusal{"no key \"" + std::string(key) + "\""};
  return object[key];
}

std::string text_at(const Json& object, const char* key) {
  const Json& value = child(object, key);
  if (!value.is_string()) throw Refusal{"\"" + std::string(key) + "\" is no text"};
  return value.get<std::string>();
}

std::uint64_t count_at(const Json& object, const char* key) {
  const Json& value = child(object, key);
  if (!value.is_number_unsigned()) throw Refusal{"\"" + std::string(key) + "\" is no count"};
  return value.get<std::uint64_t>();
}

const Json& list_at(const Json& object, const char* key) {
  const Json& value = child(object, key);
  if (!value.is_array()) throw Refusal{"\"" + std::string(key) + "\" is no list"};
  return value;
}

std::vector<std::string> texts_at(const Json& object, const char* key) {
  std::vector<std::string> texts;
  for (const Json& item : list_at(object, key)) {
    if (!item.is_string()) throw Refusal{"\"" + std::string(key) + "\" holds more than texts"};
    texts.push_back(item.get<std::string>());
  }
  return texts;
}

mpz_class integer_at(const Json& object, const char* key) {
  const std::optional<mpz_class> number = read_integer(text_at(object, key));
  if (!number) throw Refusal{"\"" + std::string(key) + "\" is no integer"};
  return *number;
}

mpq_class exact_at(const Json& object, const char* key) {
  const std::optional<mpq_class> number = read_exact(text_at(object, key));
  if (!number) throw Refusal{"\"" + std::string(key) + "\" is no exact number"};
  return *number;
}

char character_at(const Json& object, const char* key) {
  const std::string text = text_at(object, key);
  if (text.size() != 1 || text == "\"" || text == "\n" || text == "\r")
    throw Refusal{"\"" + std::string(key) + "\" is not one character"};
  return text[0];
}

Formula formula_at(const Json& object, const char* key, CellPlaces& places) {
  Result<Formula> formula = Formula::compile(child(object, key), places);
  if (!formula) throw Refusal{formula.error().what};
  return std::move(formula.value());
}

void read_source(const Json& document, Statement& stated) {
  const Json& source = child(document, "source");
  for (const Json& file : list_at(source, "files"))
    stated.files.push_back({text_at(file, "name"), count_at(file, "rows")});
  stated.separator = character_at(source, "separator");
  stated.decimal_mark = character_at(source, "decimal_mark");
  stated.missing = texts_at(source, "missing");
  for (const std::string& column : texts_at(source, "must_be_present"))
    stated.places.place_of(column);
  stated.present_columns = stated.places.columns().size();
  stated.filter_is_known = source.contains("filter");
  if (stated.filter_is_known && !source["filter"].is_null())
    stated.filter = formula_at(source, "filter", stated.places);
  stated.rows_read = count_at(source, "rows_read");
  stated.rows_used = count_at(source, "rows_used");
  for (const Json& part : list_at(source, "rows_excluded")) {
    const bool named = !child(part, "column").is_null();
    const Reason reason{text_at(part, "reason"), named ? text_at(part, "column") : ""};
    stated.excluded[reason] += count_at(part, "rows");
  }
}

void read_design(const Json& document, Statement& stated) {
  const Json& design = child(document, "design");
  stated.design_rows = count_at(design, "rows");
  if (!child(design, "weight").is_null()) stated.weight = text_at(design, "weight");
  if (stated.weight) stated.weight_place = stated.places.place_of(*stated.weight);
  for (const Json& part : list_at(design, "columns")) {
    StatedColumn column;
    column.name = text_at(part, "name");
    if (part.contains("definition")) column.formula = formula_at(part, "definition", stated.places);
    if (part.contains("nonzero_rows")) column.nonzero_rows = count_at(part, "nonzero_rows");
    stated.columns.push_back(std::move(column));
  }
  if (stated.columns.empty() || stated.columns.size() > most_columns)
    throw Refusal{"a design of " + counted(stated.columns.size(), "column", "columns")};
}

/// Design columns by name.
class ColumnNames {
 public:
  explicit ColumnNames(const std::vector<StatedColumn>& columns) {
    for (std::size_t i = 0; i < columns.size(); ++i) {
      if (!places_.emplace(columns[i].name, i).second)
        throw Refusal{"two columns of the design are both called \"" + columns[i].name + "\""};
    }
  }
  [[nodiscard]] std::size_t place(const std::string& name) const {
    const auto found = places_.find(name);
    if (found == places_.end()) throw Refusal{"the design has no column \"" + name + "\""};
    return found->second;
  }

 private:
  std::map<std::string, std::size_t> places_;
};

StatedViolation violation_of(const Json& part) {
  StatedViolation violation;
  violation.file = text_at(part, "file");
  violation.line = count_at(part, "line");
  violation.row = count_at(part, "row");
  violation.residual = exact_at(part, "residual");
  const Json& cells = child(part, "cells");
  if (!cells.is_object()) throw Refusal{"\"cells\" is no object"};
  for (const auto& cell : cells.items())
    violation.cells.emplace(cell.key(), text_at(cells, cell.key().c_str()));
  return violation;
}

StatedRelation relation_of(const Json& part, const ColumnNames& names) {
  StatedRelation relation;
  for (const Json& term : list_at(part, "terms"))
    relation.terms.emplace_back(names.place(text_at(term, "column")),
                                integer_at(term, "coefficient"));
  relation.rows_holding = count_at(part, "rows_holding");
  relation.rows_violating = count_at(part, "rows_violating");
  for (const Json& violation : list_at(part, "violations"))
    relation.violations.push_back(violation_of(violation));
  relation.largest_residual = exact_at(part, "largest_residual");
  return relation;
}

void read_relations(const Json& document, const ColumnNames& names, Statement& stated) {
  std::size_t number = 0;
  for (const Json& part : list_at(document, "relations")) {
    ++number;
    const std::string standing = text_at(part, "standing");
    if (standing != "exact" && standing != "exact_except") {
      ++stated.other_relations[standing];
      continue;
    }
    if (stated.relations.size() == most_relations)
      throw Refusal{"more than " + grouped(most_relations) + " exact relations"};
    stated.relations.push_back(relation_of(part, names));
    stated.relations.back().except = standing == "exact_except";
    stated.relations.back().number = number;
  }
  stated.omitted = count_at(document, "relations_omitted");
}

void read_rank(const Json& document, const ColumnNames& names, Statement& stated) {
  const Json& rank = child(document, "rank");
  stated.rank = count_at(rank, "rank");
  stated.rank_columns = count_at(rank, "columns");
  stated.nullity = count_at(rank, "nullity");
  stated.numerical = rank.contains("numerical") ? count_at(rank, "numerical") : stated.rank;
  stated.rank_of_the_doubles = rank.contains("rank_of_the_doubles");
  if (!rank.contains("certificate")) return;
  const Json& part = rank["certificate"];
  StatedCertificate certificate;
  certificate.prime = integer_at(part, "prime");
  certificate.residue = integer_at(part, "residue");
  certificate.rows_tested = count_at(part, "rows_tested");
  for (const Json& row : list_at(part, "rows")) {
    if (!row.is_number_unsigned()) throw Refusal{"a row of the certificate is no number"};
    certificate.rows.push_back(row.get<std::uint64_t>());
  }
  for (const std::string& column : texts_at(part, "columns"))
    certificate.columns.push_back(names.place(column));
  stated.certificate = std::move(certificate);
}

void read_verdict(const Json& document, Statement& stated) {
  const Json& verdict = child(document, "verdict");
  stated.overall = text_at(verdict, "overall");
  stated.identified = text_at(child(child(verdict, "grounds"), "identified"), "grade");
  stated.lost = texts_at(verdict, "coefficients_lost");
  stated.kept = texts_at(document, "kept");
  stated.left_out = texts_at(document, "left_out");
}

/// Numbers in a part of the document; without recursion, since it may be deep.
std::size_t numbers_in(const Json& part) {
  std::size_t count = 0;
  std::vector<const Json*> open{&part};
  while (!open.empty()) {
    const Json* next = open.back();
    open.pop_back();
    count += next->is_number() ? 1 : 0;
    if (!next->is_structured()) continue;
    for (const Json& inside : *next) open.push_back(&inside);
  }
  return count;
}

std::size_t figures_of(const Json& document) {
  std::size_t count = 0;
  for (const char* key :
       {"conditioning", "inflation", "families_between", "recording", "contrasts"}) {
    if (document.contains(key)) count += numbers_in(document[key]);
  }
  for (const Json& column : document["design"]["columns"]) {
    for (const char* key : {"norm", "mean", "min", "max"}) {
      count += column.contains(key) && column[key].is_number() ? 1 : 0;
    }
  }
  return count;
}

/// How deep brackets are nested, without building anything.
std::size_t depth_of(const std::string& text) {
  std::size_t depth = 0, most = 0;
  bool quoted = false;
  for (std::size_t i = 0; i < text.size(); ++i) {
    const char c = text[i];
    if (quoted) {
      if (c == '\\') ++i;
      if (c == '"') quoted = false;
    } else if (c == '"') {
      quoted = true;
    } else if (c == '[' || c == '{') {
      most = std::max(most, ++depth);
    } else if ((c == ']' || c == '}') && depth > 0) {
      --depth;
    }
  }
  return most;
}

Statement statement_of(const std::string& text) {
  if (text.size() > largest_document) throw Refusal{"the document is over 256 MB", ""};
  if (depth_of(text) > deepest) throw Refusal{"the document is nested over 50,000 deep", ""};
  const Json document = Json::parse(text, nullptr, false);
  if (document.is_discarded()) throw Refusal{"this is no JSON"};
  if (text_at(document, "document") != "gramproof.verdict") throw Refusal{"this is no verdict"};
  if (count_at(document, "schema_version") != 1)
    throw Refusal{"a version of the document that this program does not know", ""};
  Statement stated;
  read_source(document, stated);
  read_design(document, stated);
  const ColumnNames names(stated.columns);
  read_rank(document, names, stated);
  read_relations(document, names, stated);
  read_verdict(document, stated);
  if (stated.places.columns().size() > stated.present_columns)
    throw Refusal{"\"must_be_present\" lacks the column \"" +
                  stated.places.columns()[stated.present_columns] + "\", which is read"};
  stated.figures = figures_of(document);
  return stated;
}

}  // namespace

Result<Statement> read_document(const std::string& text, const std::string& name) {
  try {
    return statement_of(text);
  } catch (const Refusal& refusal) {
    return Error{ErrorKind::data, name, refusal.what, refusal.hint};
  }
}

}  // namespace gramproof::recheck
