// Contrasts: sums of number * label.
#include <gmpxx.h>

#include <utility>

#include "design/bind.hpp"
#include "design/binder.hpp"
#include "design/build.hpp"
#include "design/syntax.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

/// mantissa * 10^-decimals of each, multiplied; the double comes from reading the product.
Result<table::Number> product_of(const table::Number& a, const table::Number& b) {
  const auto digits = [](const table::Number& number) {
    return mpz_class(number.wide.empty() ? std::to_string(number.mantissa) : number.wide);
  };
  const mpz_class mantissa = digits(a) * digits(b);
  const std::string text = mantissa.get_str() + "e" + std::to_string(-(a.decimals + b.decimals));
  table::Number number;
  if (table::parse_number(text, '.', number) == table::NumberStatus::number) return number;
  return Error{ErrorKind::limit, "--contrast", "a factor of the contrast is out of range",
               "numbers lie between 1e-305 and 1e305 in size"};
}

class Contrast {
 public:
  Contrast(const SourceText& source, const Design& design, const table::Schema& schema)
      : source_(source), design_(design), schema_(schema) {}

  Result<std::vector<ContrastPart>> run(const Node& sum) {
    add(sum, make_whole(1)->number);
    if (error_) return *error_;
    return std::move(parts_);
  }

 private:
  /// The design column whose label the part is, or -1.
  int column_of(const Node& node) const {
    std::string label = "constant";
    if (node.kind != NodeKind::constant) {
      Binder binder(schema_, "the data", source_, false);
      const ExpressionPtr definition = binder.number(node);
      if (!definition) return -1;
      label = canonical_text(*definition, schema_);
    }
    for (std::size_t j = 0; j < design_.columns.size(); ++j) {
      if (design_.columns[j].label == label) return static_cast<int>(j);
    }
    return -1;
  }

  void add(const Node& node, const table::Number& factor) {
    if (error_) return;
    if (const int column = column_of(node); column >= 0) return add_part(node, column, factor);
    switch (node.kind) {
      case NodeKind::add:
      case NodeKind::subtract:
        add(node.operands[0], factor);
        add(node.operands[1], node.kind == NodeKind::add ? factor : negated(factor));
        return;
      case NodeKind::negative:
        add(node.operands[0], negated(factor));
        return;
      case NodeKind::multiply:
        return add_multiple(node, factor);
      default:
        return unknown(node);
    }
  }

  /// The operands of a chain of products from left to right; a product in parentheses on the right
  /// is one of them.
  static std::vector<Node> chain_of(const Node& node) {
    std::vector<Node> chain;
    const Node* left = &node;
    for (; left->kind == NodeKind::multiply; left = &left->operands[0])
      chain.push_back(left->operands[1]);
    chain.push_back(*left);
    return {chain.rbegin(), chain.rend()};
  }

  /// Takes the numbers and minus signs out of the chain and adds what is left, as one product in
  /// the same order.
  void add_multiple(const Node& node, table::Number factor) {
    std::optional<Node> label;
    bool taken = false;
    for (Node& part : chain_of(node)) {
      if (part.kind == NodeKind::negative) {
        factor = negated(factor);
        Node inside = std::move(part.operands[0]);
        part = std::move(inside);
        taken = true;
      }
      if (part.kind == NodeKind::number) {
        Result<table::Number> product = product_of(part.number, factor);
        if (!product) {
          error_ = product.error();
          return;
        }
        factor = product.value();
        taken = true;
      } else {
        label = label ? multiplied(std::move(*label), std::move(part)) : std::move(part);
      }
    }
    if (!taken || !label) return unknown(node);
    add(*label, factor);
  }

  static Node multiplied(Node left, Node right) {
    Node product;
    product.kind = NodeKind::multiply;
    product.at = left.at;
    product.operands.push_back(std::move(left));
    product.operands.push_back(std::move(right));
    return product;
  }

  void add_part(const Node& node, int column, const table::Number& factor) {
    for (const ContrastPart& part : parts_) {
      if (part.column != column) continue;
      error_ = source_.error(
          node.at, design_.columns[static_cast<std::size_t>(column)].label + " stands here twice",
          "join its two numbers into one");
      return;
    }
    parts_.push_back({column, factor});
  }

  void unknown(const Node& node) {
    std::vector<std::string> labels;
    for (const DesignColumn& column : design_.columns) labels.push_back(column.label);
    std::string written = node.text;
    if (node.kind == NodeKind::number) {
      error_ = source_.error(node.at, "a number stands here without a column of the design",
                             "as in age + 80*age^2");
      return;
    }
    Binder binder(schema_, "the data", source_, false);
    if (node.kind != NodeKind::name) {
      const ExpressionPtr definition = binder.number(node);
      if (!definition && binder.failed()) {
        error_ = binder.error();
        return;
      }
      written = definition ? canonical_text(*definition, schema_) : "constant";
    }
    std::string hint = did_you_mean(written, labels);
    if (hint.empty()) hint = "write it as the design or the report does";
    if (node.kind == NodeKind::divide) hint = "a fraction is written as a factor, as in 0.5*age";
    error_ =
        source_.error(node.at, "no column of the design is called " + in_quotes(written), hint);
  }

  const SourceText& source_;
  const Design& design_;
  const table::Schema& schema_;
  std::vector<ContrastPart> parts_;
  std::optional<Error> error_;
};

}  // namespace

Result<std::vector<ContrastPart>> parse_contrast(const std::string& text, const Design& design,
                                                 const table::Schema& schema) {
  const SourceText source{text, "--contrast"};
  Result<Node> sum = parse_sum(source);
  if (!sum) return sum.error();
  return Contrast(source, design, schema).run(sum.value());
}

}  // namespace gramproof::design
