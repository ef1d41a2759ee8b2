#include "report/sample_parts.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "table/number.hpp"

namespace gramproof::sample {
namespace {

using audit::Audit;
using design::Expression;
using design::ExpressionPtr;
using design::Operation;

int add_table_column(Audit& audit, const std::string& name) {
  table::ColumnFacts facts;
  facts.name = name;
  facts.most_decimals = 2;
  audit.schema.columns.push_back(facts);
  return static_cast<int>(audit.schema.columns.size()) - 1;
}

int family_named(Audit& audit, const std::string& name, const std::vector<int>& sources) {
  for (std::size_t i = 0; i < audit.design.families.size(); ++i) {
    if (audit.design.families[i].name == name) return static_cast<int>(i);
  }
  audit.design.families.push_back({name, sources, {}, true});
  return static_cast<int>(audit.design.families.size()) - 1;
}

void add_column(Audit& audit, const std::string& label, const std::string& term,
                const std::string& family, ExpressionPtr definition, std::vector<int> sources) {
  design::Design& design = audit.design;
  const int place = static_cast<int>(design.columns.size());
  design::DesignColumn column;
  column.label = label;
  column.definition = std::move(definition);
  column.sources = sources;
  column.constant = label == "constant";
  column.family = family_named(audit, family, sources);
  design.families[static_cast<std::size_t>(column.family)].columns.push_back(place);
  if (design.terms.empty() || design.terms.back().text != term) design.terms.push_back({term, {}});
  design.terms.back().columns.push_back(place);
  column.term = static_cast<int>(design.terms.size()) - 1;
  design.columns.push_back(column);
  audit.column_records.push_back({1.5, 0, 3, audit.rows_used});
  audit.column_norms.conservativeResize(place + 1);
  audit.column_norms[place] = 1.5 * std::sqrt(static_cast<double>(audit.rows_used));
  audit.kept.push_back(place);
  audit.rank.columns = audit.rank.rank = audit.rank.numerical = audit.kept.size();
  audit.residual_degrees_of_freedom =
      static_cast<std::int64_t>(audit.rows_used) - static_cast<std::int64_t>(audit.kept.size());
}

}  // namespace

ExpressionPtr node(Operation operation, std::vector<ExpressionPtr> operands) {
  Expression expression;
  expression.operation = operation;
  expression.operands = std::move(operands);
  return std::make_shared<const Expression>(std::move(expression));
}

ExpressionPtr cell(int column) {
  Expression expression;
  expression.operation = Operation::cell;
  expression.column = column;
  return std::make_shared<const Expression>(std::move(expression));
}

ExpressionPtr number(const std::string& text) {
  Expression expression;
  (void)table::parse_number(text, '.', expression.number);
  return std::make_shared<const Expression>(std::move(expression));
}

Audit numeric_design(const std::vector<std::string>& names, std::uint64_t rows) {
  Audit audit;
  audit.rows_read = audit.rows_used = rows;
  audit.sum_of_weights = static_cast<double>(rows);
  audit.source.files = {{"survey.csv", rows}};
  audit.source.missing = {"", "NA", "NaN", "null"};
  audit.centred_by = audit::CentredBy::column;
  for (const std::string& name : names) {
    if (!audit.design.text.empty()) audit.design.text += ", ";
    audit.design.text += name;
    if (name == "constant") {
      add_column(audit, name, name, name, number("1"), {});
    } else {
      const int column = add_table_column(audit, name);
      add_column(audit, name, name, name, cell(column), {column});
    }
  }
  audit.options = {{"design", audit.design.text}, {"solver", "normal"}};
  audit.rank.certificate =
      audit::Certificate{4611686018427387847ULL, {1, 2}, {0}, 2305843009213693951ULL, rows};
  audit.verdict.summary = "Sound: X'X can be inverted reliably.";
  audit.verdict.grounds = {
      {audit::Grade::pass, "The columns are independent; proved on all rows."},
      {audit::Grade::pass,
       "The normal equations keep 13 digits; 6 are asked for (our own threshold)."},
      {audit::Grade::pass,
       "A singular X is 40 times as far away as the rounding of the data; less than 3 "
       "would be a caution (our own threshold)."},
      {audit::Grade::pass,
       "The largest index between families is 2.9; 10 would be a caution (Belsley, Kuh & "
       "Welsch 1980, ch. 3; using it between families is our choice)."}};
  return audit;
}

void add_levels(Audit& audit, const std::string& name, const std::vector<std::string>& levels) {
  const int column = add_table_column(audit, name);
  table::ColumnFacts& facts = audit.schema.columns.back();
  facts.kind = table::ColumnKind::text;
  for (std::size_t i = 0; i < levels.size(); ++i) {
    table::Level level;
    level.text = levels[i];
    facts.levels.push_back(level);
    Expression bracket;
    bracket.operation = Operation::is_level;
    bracket.column = column;
    bracket.level = static_cast<int>(i);
    add_column(audit, "[" + name + " = " + levels[i] + "]", "all_levels(" + name + ")", name,
               std::make_shared<const Expression>(std::move(bracket)), {column});
  }
}

void add_square(Audit& audit, int column) {
  const design::DesignColumn base = audit.design.columns[static_cast<std::size_t>(column)];
  Expression power;
  power.operation = Operation::power;
  power.operands = {base.definition};
  power.exponent = 2;
  audit.design.text += ", " + base.label + "^2";
  add_column(audit, base.label + "^2", base.label + "^2", base.label,
             std::make_shared<const Expression>(std::move(power)), base.sources);
}

void leave_out(Audit& audit, int column) {
  audit.kept.erase(std::remove(audit.kept.begin(), audit.kept.end(), column), audit.kept.end());
  audit.left_out.insert(audit.left_out.begin(), column);
  audit.rank.rank = audit.rank.numerical = audit.kept.size();
  audit.rank.nullity = audit.rank.columns - audit.rank.rank;
  audit.residual_degrees_of_freedom =
      static_cast<std::int64_t>(audit.rows_used) - static_cast<std::int64_t>(audit.kept.size());
}

void set_indices(Audit& audit, const std::vector<double>& indices) {
  audit::Conditioning& conditioning = audit.conditioning;
  const auto count = static_cast<Index>(indices.size());
  conditioning.condition_indices.resize(count);
  conditioning.singular_values.resize(count);
  conditioning.proportions = Matrix::Identity(count, count);
  conditioning.proportions_rows.clear();
  for (Index i = 0; i < count; ++i) {
    conditioning.condition_indices[i] = indices[static_cast<std::size_t>(i)];
    conditioning.singular_values[i] = 1.4 / indices[static_cast<std::size_t>(i)];
    conditioning.proportions_rows.push_back(static_cast<int>(i));
  }
  const double kappa = indices.back();
  const auto columns = static_cast<double>(count);
  conditioning.condition_number = kappa;
  conditioning.raw_singular_values = 1000 * conditioning.singular_values;
  conditioning.raw_condition_number = 38.5 * kappa;
  conditioning.log10_determinant = 6.2 * columns;
  conditioning.log10_determinant_correlation = -std::log10(kappa);
  conditioning.known_digits = -std::log10(64 * columns * unit_roundoff * kappa);
  conditioning.known_digits_raw = conditioning.known_digits - std::log10(38.5);
  conditioning.digits = {15.9 - std::log10(kappa), 15.9 - 2 * std::log10(kappa),
                         7.2 - std::log10(kappa), std::max(0.0, 7.2 - 2 * std::log10(kappa))};
}

void set_shares(Audit& audit, const std::vector<double>& shares) {
  audit.inflation.clear();
  for (std::size_t i = 0; i < shares.size(); ++i) {
    audit::Inflation inflation;
    inflation.column = audit.kept[i];
    if (shares[i] > 0) {
      inflation.own_share = shares[i];
      inflation.r_squared = 1 - shares[i];
      inflation.vif = 1 / shares[i];
    }
    inflation.vif_uncentred = shares[i] > 0 ? 1.3 / shares[i] : 21;
    inflation.standard_error_per_sigma = 0.0123456789 * static_cast<double>(i + 1);
    audit.inflation.push_back(inflation);
  }
}

void set_between(Audit& audit, const std::vector<std::pair<std::string, int>>& families,
                 const std::vector<double>& indices) {
  audit::BetweenFamilies& between = audit.between;
  between = {};
  for (const auto& [name, dimensions] : families) {
    const int family = family_named(audit, name, {});
    between.families.push_back(family);
    between.inflation.push_back({family, dimensions, 1.7321, std::pow(1.7321, 0.5 / dimensions)});
  }
  between.indices = Eigen::Map<const Vector>(indices.data(), static_cast<Index>(indices.size()));
  between.proportions =
      Matrix::Constant(between.indices.size(), static_cast<Index>(families.size()), 0.01);
}

}  // namespace gramproof::sample
