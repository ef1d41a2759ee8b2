// What was read and what was made of it.
#include "report/definition_tree.hpp"
#include "report/document_parts.hpp"

namespace gramproof::report {
namespace {

using design::Exclusion;

const char* word_of(Exclusion::Reason reason) {
  switch (reason) {
    case Exclusion::Reason::filter:
      return "filter";
    case Exclusion::Reason::missing:
      return "missing";
    case Exclusion::Reason::undefined:
      return "undefined";
    case Exclusion::Reason::weight_zero:
      break;
  }
  return "weight_zero";
}

const char* word_of(design::Role role) {
  switch (role) {
    case design::Role::focus:
      return "focus";
    case design::Role::protect:
      return "protected";
    case design::Role::other:
      break;
  }
  return "other";
}

Json excluded(const audit::Audit& audit) {
  Json list = Json::array();
  for (const Exclusion& exclusion : audit.excluded) {
    Json column = nullptr;
    if (exclusion.reason == Exclusion::Reason::missing) {
      column = table_name_of(audit, exclusion.column);
    } else if (exclusion.reason == Exclusion::Reason::undefined) {
      column = label_of(audit, exclusion.column);
    } else if (exclusion.reason == Exclusion::Reason::weight_zero) {
      column = table_name_of(audit, audit.design.weight);
    }
    list.push_back(
        {{"reason", word_of(exclusion.reason)}, {"column", column}, {"rows", exclusion.rows}});
  }
  return list;
}

Json table_names(const audit::Audit& audit, const std::vector<int>& columns) {
  Json names = Json::array();
  for (const int column : columns) names.push_back(table_name_of(audit, column));
  return names;
}

Json column_part(const audit::Audit& audit, std::size_t place) {
  const design::DesignColumn& column = audit.design.columns[place];
  const design::Design& design = audit.design;
  Json part = Json::object();
  part["name"] = column.label;
  if (column.term >= 0) part["term"] = design.terms.at(static_cast<std::size_t>(column.term)).text;
  if (column.family >= 0) {
    part["family"] = design.families.at(static_cast<std::size_t>(column.family)).name;
  }
  part["role"] = word_of(column.role);
  if (column.definition) {
    if (auto tree = definition_tree(*column.definition, audit.schema)) {
      part["definition"] = std::move(*tree);
    }
    if (const auto decimals = decimals_of(*column.definition, audit.schema)) {
      part["decimals"] = *decimals;
    }
  }
  if (static_cast<Index>(place) < audit.column_norms.size()) {
    put_number(part, "norm", audit.column_norms[static_cast<Index>(place)]);
  }
  if (place < audit.column_records.size()) {
    const scan::ColumnRecord& record = audit.column_records[place];
    put_number(part, "mean", record.mean);
    part["min"] = finite_or_null(record.min);
    part["max"] = finite_or_null(record.max);
    part["nonzero_rows"] = record.nonzero_rows;
  }
  return part;
}

}  // namespace

Json source_part(const audit::Audit& audit) {
  Json part = Json::object();
  part["files"] = Json::array();
  for (const auto& [name, rows] : audit.source.files) {
    part["files"].push_back({{"name", name}, {"rows", rows}});
  }
  part["separator"] = std::string(1, audit.source.separator);
  part["decimal_mark"] = std::string(1, audit.source.decimal_mark);
  part["missing"] = audit.source.missing;
  part["filter"] = nullptr;
  if (audit.design.filter) {
    // A filter is written by hand: one too large to write out is absent, not null, which means
    // none.
    auto tree = definition_tree(*audit.design.filter, audit.schema);
    if (tree) {
      part["filter"] = std::move(*tree);
    } else {
      part.erase("filter");
    }
  }
  // What must be present in a row to be used, so that a checker can decide it without the design's
  // text: terms, response, --complete, weight, filter.
  part["must_be_present"] = table_names(audit, audit.design.used_columns);
  part["rows_read"] = audit.rows_read;
  part["rows_used"] = audit.rows_used;
  part["rows_excluded"] = excluded(audit);
  return part;
}

Json design_part(const audit::Audit& audit) {
  const design::Design& design = audit.design;
  Json part = Json::object();
  part["text"] = design.text;
  part["rows"] = audit.rows_used;
  part["weighted"] = design.weight >= 0;
  part["weight"] = table_name_of(audit, design.weight);
  part["residual_degrees_of_freedom"] = audit.residual_degrees_of_freedom;
  part["columns"] = Json::array();
  for (std::size_t i = 0; i < design.columns.size(); ++i) {
    part["columns"].push_back(column_part(audit, i));
  }
  part["terms"] = Json::array();
  for (const design::Term& term : design.terms) {
    part["terms"].push_back({{"name", term.text}, {"columns", labels_of(audit, term.columns)}});
  }
  part["families"] = Json::array();
  for (const design::Family& family : design.families) {
    part["families"].push_back({{"name", family.name},
                                {"sources", table_names(audit, family.sources)},
                                {"columns", labels_of(audit, family.columns)}});
  }
  return part;
}

}  // namespace gramproof::report
