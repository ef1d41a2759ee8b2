#include "design/syntax.hpp"

#include <algorithm>

namespace gramproof::design {
namespace {

std::size_t characters(std::string_view bytes) {
  return static_cast<std::size_t>(std::count_if(bytes.begin(), bytes.end(), [](char byte) {
    return (static_cast<unsigned char>(byte) & 0xC0) != 0x80;
  }));
}

}  // namespace

bool is_set(const Node& node) {
  switch (node.kind) {
    case NodeKind::rest:
    case NodeKind::columns:
    case NodeKind::levels:
    case NodeKind::all_levels:
    case NodeKind::steps:
      return true;
    case NodeKind::multiply:
      return std::any_of(node.operands.begin(), node.operands.end(), is_set);
    default:
      return false;
  }
}

std::string SourceText::where(std::size_t at) const {
  const std::string_view before = std::string_view(text).substr(0, at);
  if (name.rfind("--", 0) == 0) return name + ":" + std::to_string(characters(before) + 1);
  const auto line = std::count(before.begin(), before.end(), '\n') + 1;
  const std::size_t start = before.find_last_of('\n');
  const std::string_view in_line =
      start == std::string_view::npos ? before : before.substr(start + 1);
  return name + ":" + std::to_string(line) + ":" + std::to_string(characters(in_line) + 1);
}

Error SourceText::error(std::size_t at, std::string what, std::string hint) const {
  return {ErrorKind::design, where(at), std::move(what), std::move(hint)};
}

}  // namespace gramproof::design
