#include "report/document.hpp"

#include <cmath>

#include "report/document_parts.hpp"

namespace gramproof::report {
namespace {

const char* state_of(double value) {
  if (std::isfinite(value)) return "finite";
  return std::isnan(value) ? "undefined" : "infinite";
}

/// What was asked; an option that was given several times has an array.
Json options_part(const audit::OptionRecord& options) {
  Json object = Json::object();
  for (const auto& [name, value] : options) {
    if (!object.contains(name)) {
      object[name] = value;
      continue;
    }
    if (!object[name].is_array()) object[name] = Json::array({object[name]});
    object[name].push_back(value);
  }
  return object;
}

std::string plain(const Json& value) {
  return value.dump(-1, ' ', false, Json::error_handler_t::replace);
}

bool is_plain_array(const Json& value) {
  if (!value.is_array()) return false;
  for (const Json& item : value) {
    if (item.is_structured()) return false;
  }
  return true;
}

bool is_plain_object(const Json& value) {
  // Short records (a term, a step) are read more easily on one line.
  if (!value.is_object() || value.size() > 3) return false;
  for (const Json& item : value) {
    if (item.is_structured() ||
        (item.is_string() && item.get_ref<const std::string&>().size() > 40)) {
      return false;
    }
  }
  return true;
}

void write(const Json& value, std::size_t depth, std::string& out);

void write_members(const Json& value, std::size_t depth, std::string& out) {
  const std::string indent(2 * (depth + 1), ' ');
  bool first = true;
  for (const auto& member : value.items()) {
    out += first ? "\n" : ",\n";
    first = false;
    out += indent;
    if (value.is_object()) out += plain(Json(member.key())) + ": ";
    // A definition can be deep and is for programs: one line.
    const bool is_tree =
        value.is_object() && (member.key() == "definition" || member.key() == "filter");
    if (is_tree) {
      out += plain(member.value());
    } else {
      write(member.value(), depth + 1, out);
    }
  }
  out += "\n" + std::string(2 * depth, ' ');
}

void write(const Json& value, std::size_t depth, std::string& out) {
  if (!value.is_structured() || value.empty() || is_plain_array(value) || is_plain_object(value)) {
    out += plain(value);
    return;
  }
  out += value.is_object() ? '{' : '[';
  write_members(value, depth, out);
  out += value.is_object() ? '}' : ']';
}

}  // namespace

Json finite_or_null(double value) {
  return std::isfinite(value) ? Json(value) : Json(nullptr);
}

void put_number(Json& object, const std::string& key, double value) {
  object[key] = finite_or_null(value);
  object[key + "_state"] = state_of(value);
}

void put_number(Json& object, const std::string& key, const std::optional<double>& value) {
  put_number(object, key, value.value_or(std::nan("")));
}

void put_numbers(Json& object, const std::string& key, const Vector& values) {
  Json numbers = Json::array();
  Json states = Json::array();
  for (const double value : values) {
    numbers.push_back(finite_or_null(value));
    states.push_back(state_of(value));
  }
  object[key] = std::move(numbers);
  object[key + "_state"] = std::move(states);
}

Json label_of(const audit::Audit& audit, int column) {
  if (column < 0 || static_cast<std::size_t>(column) >= audit.design.columns.size()) return nullptr;
  return audit.design.columns[static_cast<std::size_t>(column)].label;
}

Json labels_of(const audit::Audit& audit, const std::vector<int>& columns) {
  Json labels = Json::array();
  for (const int column : columns) labels.push_back(label_of(audit, column));
  return labels;
}

Json table_name_of(const audit::Audit& audit, int column) {
  if (column < 0 || static_cast<std::size_t>(column) >= audit.schema.columns.size()) return nullptr;
  return audit.schema.columns[static_cast<std::size_t>(column)].name;
}

Json verdict_document(const audit::Audit& audit, std::string_view program_version) {
  Json document = Json::object();
  document["document"] = "gramproof.verdict";
  document["schema_version"] = 1;
  document["program_version"] = program_version;
  document["verdict"] = verdict_part(audit);
  document["options"] = options_part(audit.options);
  document["source"] = source_part(audit);
  document["design"] = design_part(audit);
  document["rank"] = rank_part(audit);
  document["relations"] = relations_part(audit);
  document["relations_omitted"] = audit.relations_omitted;
  document["rare_levels"] = rare_levels_part(audit);
  document["kept"] = labels_of(audit, audit.kept);
  document["left_out"] = labels_of(audit, audit.left_out);
  document["conditioning"] = conditioning_part(audit);
  document["inflation"] = inflation_part(audit);
  document["centred_by"] = audit::word_of(audit.centred_by);
  document["constant_from"] = audit.constant_from;
  document["families_between"] = between_part(audit);
  document["recording"] = recording_part(audit);
  document["contrasts"] = contrasts_part(audit);
  document["notes"] = notes_part(audit);
  return document;
}

std::string to_json_text(const Json& document) {
  std::string out;
  write(document, 0, out);
  out += '\n';
  return out;
}

}  // namespace gramproof::report
