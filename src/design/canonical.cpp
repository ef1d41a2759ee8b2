// Canonical text: the fewest parentheses that parse back to the same tree.
#include "design/canonical.hpp"

#include <array>

#include "design/build.hpp"
#include "design/expression.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

/// How tightly a text holds together; a part looser than its place stands in parentheses.
enum Tightness { either, both, negation, comparison, sum, product, sign, power, atom };

struct Text {
  std::string text;
  Tightness tightness = atom;
};

std::string_view sign_of(Comparison comparison) {
  constexpr std::array<std::string_view, 6> signs = {"=", "!=", "<", "<=", ">", ">="};
  return signs[static_cast<std::size_t>(comparison)];
}

bool is_logical(const Expression& expression) {
  switch (expression.operation) {
    case Operation::compare:
    case Operation::is_level:
    case Operation::same_text:
    case Operation::both:
    case Operation::either:
    case Operation::negation:
      return true;
    default:
      return false;
  }
}

class Writer {
 public:
  explicit Writer(const table::Schema& schema) : schema_(schema) {}

  /// A number a row: conditions stand in brackets.
  Text number(const Expression& expression) const {
    if (is_logical(expression)) return {"[" + condition(expression).text + "]", atom};
    switch (expression.operation) {
      case Operation::cell:
        return {name(expression.column), atom};
      case Operation::number: {
        std::string text = table::plain_text(expression.number);
        const Tightness tightness = text[0] == '-' ? sign : atom;
        return {std::move(text), tightness};
      }
      case Operation::row_number:
        return {"row", atom};
      case Operation::add:
        return binary(expression, " + ", sum);
      case Operation::subtract:
        return binary(expression, " - ", sum);
      case Operation::multiply:
        return multiplied(expression);
      case Operation::divide:
        return binary(expression, " / ", product);
      case Operation::power:
        return {
            held(number(*expression.operands[0]), atom) + "^" + std::to_string(expression.exponent),
            power};
      default:
        return called(expression);
    }
  }

  Text condition(const Expression& expression) const {
    switch (expression.operation) {
      case Operation::either:
        return joined(expression, " or ", either);
      case Operation::both:
        return joined(expression, " and ", both);
      case Operation::negation: {
        const Expression& denied = *expression.operands[0];
        if (denied.operation == Operation::is_level) return {level(denied, " != "), comparison};
        if (denied.operation == Operation::same_text)
          return {same_text(denied, " != "), comparison};
        return {"not " + held(condition(denied), negation), negation};
      }
      case Operation::is_level:
        return {level(expression, " = "), comparison};
      case Operation::same_text:
        return {same_text(expression, " = "), comparison};
      case Operation::compare:
        return {held(number(*expression.operands[0]), sum) + " " +
                    std::string(sign_of(expression.comparison)) + " " +
                    held(number(*expression.operands[1]), sum),
                comparison};
      default:
        // A number where a condition stands (only trees built by hand): not zero.
        return {held(number(expression), sum) + " != 0", comparison};
    }
  }

  static std::string held(const Text& part, Tightness least) {
    return part.tightness >= least ? part.text : "(" + part.text + ")";
  }

 private:
  const table::ColumnFacts& facts(int column) const {
    return schema_.columns[static_cast<std::size_t>(column)];
  }
  std::string name(int column) const { return quoted_if_needed(facts(column).name); }

  Text binary(const Expression& expression, const char* mark, Tightness own) const {
    const auto looser_than_right = static_cast<Tightness>(own + 1);
    return {held(number(*expression.operands[0]), own) + mark +
                held(number(*expression.operands[1]), looser_than_right),
            own};
  }

  Text joined(const Expression& expression, const char* mark, Tightness own) const {
    const auto looser_than_right = static_cast<Tightness>(own + 1);
    return {held(condition(*expression.operands[0]), own) + mark +
                held(condition(*expression.operands[1]), looser_than_right),
            own};
  }

  /// -1 times a thing is the thing with a minus sign; -1 times a number stays as it is, or it would
  /// read as one number.
  Text multiplied(const Expression& expression) const {
    const Expression& right = *expression.operands[1];
    if (!is_number(*expression.operands[0], -1) || right.operation == Operation::number) {
      return binary(expression, " * ", product);
    }
    return {"-" + held(number(right), power), sign};
  }

  Text called(const Expression& expression) const {
    const auto& operands = expression.operands;
    const bool hinge = expression.operation == Operation::maximum && operands.size() == 2 &&
                       operands[0]->operation == Operation::subtract && is_number(*operands[1], 0);
    if (hinge) return {"hinge(" + listed(operands[0]->operands) + ")", atom};
    return {std::string(function_name(expression.operation)) + "(" + listed(operands) + ")", atom};
  }

  static std::string_view function_name(Operation operation) {
    switch (operation) {
      case Operation::absolute:
        return "abs";
      case Operation::minimum:
        return "min";
      case Operation::maximum:
        return "max";
      case Operation::log:
        return "log";
      case Operation::sqrt:
        return "sqrt";
      case Operation::exp:
        return "exp";
      default:
        return "asinh";
    }
  }

  std::string listed(const std::vector<ExpressionPtr>& operands) const {
    std::string text;
    for (const ExpressionPtr& operand : operands) {
      if (!text.empty()) text += ", ";
      text += number(*operand).text;
    }
    return text;
  }

  std::string level(const Expression& expression, const char* mark) const {
    const auto& levels = facts(expression.column).levels;
    const bool known =
        expression.level >= 0 && static_cast<std::size_t>(expression.level) < levels.size();
    const std::string text = known ? levels[static_cast<std::size_t>(expression.level)].text : "";
    return name(expression.column) + mark + quoted_if_needed(text);
  }

  std::string same_text(const Expression& expression, const char* mark) const {
    return name(expression.column) + mark + "column(" +
           in_quotes(facts(expression.other_column).name) + ")";
  }

  const table::Schema& schema_;
};

}  // namespace

std::string canonical_text(const Expression& expression, const table::Schema& schema) {
  return Writer(schema).number(expression).text;
}

std::string text_of_factor(const Expression& expression, const table::Schema& schema,
                           bool on_the_right) {
  return Writer::held(Writer(schema).number(expression), on_the_right ? sign : product);
}

std::string text_of_condition(const Expression& expression, const table::Schema& schema) {
  return Writer(schema).condition(expression).text;
}

}  // namespace gramproof::design
