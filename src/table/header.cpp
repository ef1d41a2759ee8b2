#include "table/header.hpp"

#include <unordered_map>
#include <utility>

#include <fmt/format.h>

#include "base/text.hpp"
#include "table/records.hpp"

namespace gramproof::table {
namespace {

constexpr std::size_t most_columns = 100'000;

struct Name {
  std::string text;
  const char* at = nullptr;
};

Result<std::vector<Name>> cut_header(const std::string& file, std::string_view record,
                                     char separator) {
  std::vector<Name> names;
  CellWalker walker(record, separator);
  RawCell cell;
  std::string scratch;
  for (bool last = false; !last;) {
    const FormatFault fault = walker.next(cell, last);
    if (fault != FormatFault::none) {
      return fault_error({fault, cell.at, names.size(), 0}, file, record, 1, {});
    }
    if (names.size() == most_columns) {
      return Error{ErrorKind::limit, place(file, line_column(record, cell.at, 1)),
                   fmt::format("the header has more than {} columns", grouped(most_columns)),
                   "--separator sets the separator"};
    }
    names.push_back({std::string(without_blanks(cell_text(cell, scratch))), cell.at});
  }
  return names;
}

Result<void> check_names(const std::string& file, std::string_view record,
                         const std::vector<Name>& names) {
  std::unordered_map<std::string_view, std::size_t> seen;
  for (std::size_t i = 0; i < names.size(); ++i) {
    const auto where = [&] { return place(file, line_column(record, names[i].at, 1)); };
    if (names[i].text.empty() && i > 0) {
      const std::string hint =
          i + 1 == names.size() ? "name it in the header, or remove the separator at the line's end"
                                : "name it in the header; only the first column may be unnamed";
      return Error{ErrorKind::data, where(), fmt::format("column {} has no name", i + 1), hint};
    }
    const auto [earlier, added] = seen.emplace(names[i].text, i);
    if (!added) {
      return Error{ErrorKind::data, where(),
                   fmt::format("columns {} and {} are both called \"{}\"", earlier->second + 1,
                               i + 1, names[i].text),
                   "give each column a name of its own"};
    }
  }
  return {};
}

Error header_mismatch(const std::string& file, const std::string& what,
                      const std::string& first_file) {
  return {ErrorKind::data, place(file, {}), what,
          fmt::format("files of one data set have the columns of {}, in any order", first_file)};
}

}  // namespace

Result<std::vector<std::string>> read_header(const std::string& file, std::string_view record,
                                             char separator) {
  if (record.empty()) {
    return Error{ErrorKind::data, file, "the file is empty",
                 "the first line must name the columns"};
  }
  const std::size_t bad = first_bad_byte(record);
  if (bad < record.size()) return bad_byte_error(file, record, bad, 1);
  auto names = cut_header(file, record, separator);
  if (!names) return names.error();
  if (names.value().size() == 1 && names.value().front().text.empty()) {
    return Error{ErrorKind::data, place(file, {}), "the first line is blank",
                 "the first line must name the columns"};
  }
  if (auto checked = check_names(file, record, names.value()); !checked) return checked.error();
  std::vector<std::string> texts;
  for (Name& name : names.value()) texts.push_back(std::move(name.text));
  return texts;
}

Result<std::vector<std::size_t>> match_header(const std::string& file,
                                              const std::vector<std::string>& names,
                                              const std::string& first_file,
                                              const std::vector<std::string>& wanted) {
  std::unordered_map<std::string_view, std::size_t> index;
  for (std::size_t i = 0; i < wanted.size(); ++i) index.emplace(wanted[i], i);
  std::vector<std::size_t> columns;
  for (const std::string& name : names) {
    const auto found = index.find(name);
    if (found == index.end()) {
      return header_mismatch(
          file, fmt::format("column \"{}\" is not in the header of {}", name, first_file),
          first_file);
    }
    columns.push_back(found->second);
    index.erase(found);  // names are unique here: what stays behind is missing in this file
  }
  for (const std::string& name : wanted) {
    if (index.contains(name)) {
      return header_mismatch(file, fmt::format("the header has no column \"{}\"", name),
                             first_file);
    }
  }
  return columns;
}

}  // namespace gramproof::table
