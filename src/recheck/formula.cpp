#include "recheck/formula.hpp"

#include <algorithm>
#include <cstdlib>
#include <utility>

#include "recheck/numbers.hpp"

namespace gramproof::recheck {
namespace {

using State = Value::State;

Value rational(mpq_class number) {
  return {State::rational, std::move(number)};
}

Value truth(bool holds) {
  return rational(mpq_class(holds ? 1 : 0));
}

Value without_number(State state) {
  return {state, {}};
}

/// What the operands leave open, the worst first: one that is undefined makes the whole undefined.
State worst(const Value* operands, std::size_t count) {
  State state = State::rational;
  const auto any = [&](State wanted) {
    return std::any_of(operands, operands + count,
                       [&](const Value& value) { return value.state == wanted; });
  };
  for (const State worse : {State::irrational, State::unsettled, State::undefined,
                            State::not_number, State::too_large}) {
    if (any(worse)) state = worse;
  }
  return state;
}

bool holds(const std::string& comparison, int order) {
  if (comparison == "=") return order == 0;
  if (comparison == "!=") return order != 0;
  if (comparison == "<") return order < 0;
  if (comparison == "<=") return order <= 0;
  if (comparison == ">") return order > 0;
  return order >= 0;
}

bool is_comparison(const std::string& word) {
  return word == "=" || word == "!=" || word == "<" || word == "<=" || word == ">" || word == ">=";
}

Value power_of(const Value& base, long exponent) {
  if (base.state == State::irrational && exponent < 0) return without_number(State::unsettled);
  if (base.state != State::rational) return base;
  if (exponent < 0 && base.number == 0) return without_number(State::undefined);
  const auto times = static_cast<unsigned long>(std::labs(exponent));
  constexpr std::size_t most_bits = 10'000'000;
  const std::size_t bits = std::max(mpz_sizeinbase(base.number.get_num_mpz_t(), 2),
                                    mpz_sizeinbase(base.number.get_den_mpz_t(), 2));
  if (bits * times > most_bits) return without_number(State::too_large);
  mpz_class above, below;
  mpz_pow_ui(above.get_mpz_t(), base.number.get_num_mpz_t(), times);
  mpz_pow_ui(below.get_mpz_t(), base.number.get_den_mpz_t(), times);
  if (exponent < 0) std::swap(above, below);
  mpq_class value(above, below);
  value.canonicalize();
  return rational(std::move(value));
}

/// log and sqrt have a domain; `at_zero`: whether it includes 0.
Value with_domain(const Value& operand, bool at_zero) {
  if (operand.state == State::irrational) return without_number(State::unsettled);
  if (operand.state != State::rational) return operand;
  const bool inside = at_zero ? operand.number >= 0 : operand.number > 0;
  return without_number(inside ? State::irrational : State::undefined);
}

const Value& cell_value(std::size_t place, const RowCells& cells) {
  std::optional<Value>& known = (*cells.numbers)[place];
  if (!known) {
    std::optional<mpq_class> number = read_decimal((*cells.texts)[place], cells.decimal_mark);
    known = number ? rational(std::move(*number)) : without_number(State::not_number);
  }
  return *known;
}

Value quotient(const Value& above, const Value& below) {
  if (below.state == State::rational && below.number == 0) return without_number(State::undefined);
  for (const Value* value : {&above, &below}) {
    const bool fault = value->state == State::not_number || value->state == State::too_large;
    if (fault || value->state == State::undefined) return *value;
  }
  if (below.state == State::irrational) return without_number(State::unsettled);
  if (below.state != State::rational) return below;
  if (above.state != State::rational) return above;
  return rational(mpq_class(above.number / below.number));
}

Error bad_node(const std::string& what) {
  return {ErrorKind::data, "", "a definition of the document cannot be read: " + what, ""};
}

}  // namespace

std::size_t CellPlaces::place_of(const std::string& column) {
  const auto [found, added] = places_.emplace(column, columns_.size());
  if (added) columns_.push_back(column);
  return found->second;
}

struct Formula::Compiler {
  Formula& formula;
  CellPlaces& places;
  struct Pending {
    const Json* tree;  ///< null: `node` is complete
    Node node;
  };
  std::vector<Pending> stack{};

  std::size_t read(const std::string& column) {
    const std::size_t place = places.place_of(column);
    formula.reads_.push_back(place);
    return place;
  }

  /// Schedules an operation: first its operands, from left to right, then itself.
  Result<void> schedule(Node node, const Json& operands, std::size_t least, std::size_t most) {
    if (!operands.is_array() || operands.size() < least || operands.size() > most) {
      return bad_node("a node with the wrong number of operands");
    }
    node.operands = operands.size();
    stack.push_back({nullptr, std::move(node)});
    for (auto operand = operands.rbegin(); operand != operands.rend(); ++operand) {
      stack.push_back({&*operand, {}});
    }
    return {};
  }

  Result<void> leaf(const Json& tree, const std::string& key) {
    Node node;
    const Json& inside = tree.at(key);
    if (key == "cell" && inside.is_string()) {
      node.kind = Kind::cell;
      node.place = read(inside.get<std::string>());
    } else if (key == "number" && inside.is_string()) {
      const std::optional<mpq_class> number = read_decimal(inside.get<std::string>(), '.');
      if (!number) return bad_node("a number that is none");
      node.number = *number;
    } else if (key == "row" && inside == Json(true)) {
      node.kind = Kind::row;
    } else if (key == "level" && inside.is_object() && inside.contains("column") &&
               inside.contains("is") && inside["column"].is_string() && inside["is"].is_string()) {
      node.kind = Kind::level;
      node.place = read(inside["column"].get<std::string>());
      node.text = inside["is"].get<std::string>();
    } else if (key == "same_text" && inside.is_array() && inside.size() == 2 &&
               inside[0].is_string() && inside[1].is_string()) {
      node.kind = Kind::same_text;
      node.place = read(inside[0].get<std::string>());
      node.other_place = read(inside[1].get<std::string>());
    } else {
      return bad_node("the node \"" + key + "\"");
    }
    formula.nodes_.push_back(std::move(node));
    return {};
  }

  Result<void> special(const Json& tree, const std::string& key) {
    Node node;
    if (key == "power") {
      const bool whole = tree.contains("exponent") && tree["exponent"].is_number_integer() &&
                         std::abs(tree["exponent"].get<long>()) <= 64;
      if (!whole) return bad_node("a power whose exponent is no whole number from -64 to 64");
      node.kind = Kind::power;
      node.exponent = tree["exponent"].get<long>();
      return schedule(std::move(node), tree["power"], 1, 1);
    }
    if (!tree["compare"].is_string() || !is_comparison(tree["compare"].get<std::string>()) ||
        !tree.contains("of")) {
      return bad_node("a comparison");
    }
    node.kind = Kind::compare;
    node.text = tree["compare"].get<std::string>();
    return schedule(std::move(node), tree["of"], 2, 2);
  }

  Result<void> open(const Json& tree) {
    struct Operation {
      const char* key;
      Kind kind;
      std::size_t least, most;
    };
    constexpr std::size_t many = 1'000'000;
    static constexpr Operation operations[] = {
        {"add", Kind::add, 2, many},
        {"subtract", Kind::subtract, 2, 2},
        {"multiply", Kind::multiply, 2, many},
        {"divide", Kind::divide, 2, 2},
        {"log", Kind::log, 1, 1},
        {"sqrt", Kind::sqrt, 1, 1},
        {"exp", Kind::irrational_everywhere, 1, 1},
        {"asinh", Kind::irrational_everywhere, 1, 1},
        {"and", Kind::both, 2, many},
        {"or", Kind::either, 2, many},
    };
    if (!tree.is_object() || tree.empty()) return bad_node("a node that is no object");
    if (tree.contains("power")) return special(tree, "power");
    if (tree.contains("compare")) return special(tree, "compare");
    if (tree.contains("not")) {
      stack.push_back({nullptr, Node{Kind::negation, 1, 0, 0, 0, {}, {}}});
      stack.push_back({&tree["not"], {}});
      return {};
    }
    for (const Operation& operation : operations) {
      if (!tree.contains(operation.key)) continue;
      const bool irrational = operation.kind == Kind::log || operation.kind == Kind::sqrt ||
                              operation.kind == Kind::irrational_everywhere;
      if (irrational) formula.rational_ = false;
      return schedule(Node{operation.kind, 0, 0, 0, 0, {}, {}}, tree[operation.key],
                      operation.least, operation.most);
    }
    return leaf(tree, tree.begin().key());
  }
};

Result<Formula> Formula::compile(const Json& tree, CellPlaces& places) {
  Formula formula;
  Compiler compiler{formula, places};
  compiler.stack.push_back({&tree, {}});
  while (!compiler.stack.empty()) {
    Compiler::Pending pending = std::move(compiler.stack.back());
    compiler.stack.pop_back();
    if (pending.tree == nullptr) {
      formula.nodes_.push_back(std::move(pending.node));
    } else if (Result<void> done = compiler.open(*pending.tree); !done) {
      return done.error();
    }
  }
  std::sort(formula.reads_.begin(), formula.reads_.end());
  formula.reads_.erase(std::unique(formula.reads_.begin(), formula.reads_.end()),
                       formula.reads_.end());
  return formula;
}

Value Formula::apply(const Node& node, const Value* operands) {
  switch (node.kind) {
    case Kind::power:
      return power_of(operands[0], node.exponent);
    case Kind::divide:
      return quotient(operands[0], operands[1]);
    case Kind::log:
      return with_domain(operands[0], false);
    case Kind::sqrt:
      return with_domain(operands[0], true);
    default:
      break;
  }
  const State state = worst(operands, node.operands);
  if (state != State::rational) return without_number(state);
  if (node.kind == Kind::irrational_everywhere) return without_number(State::irrational);
  if (node.kind == Kind::compare) {
    return truth(holds(node.text, cmp(operands[0].number, operands[1].number)));
  }
  if (node.kind == Kind::negation) return truth(operands[0].number == 0);
  mpq_class sum = operands[0].number;
  bool all = sum != 0, any = sum != 0;
  for (std::size_t i = 1; i < node.operands; ++i) {
    const mpq_class& next = operands[i].number;
    if (node.kind == Kind::add) sum += next;
    if (node.kind == Kind::subtract) sum -= next;
    if (node.kind == Kind::multiply) sum *= next;
    all = all && next != 0;
    any = any || next != 0;
  }
  if (node.kind == Kind::both) return truth(all);
  if (node.kind == Kind::either) return truth(any);
  return rational(std::move(sum));
}

Value Formula::evaluate(const RowCells& cells) const {
  if (nodes_.size() == 1 && nodes_.front().kind == Kind::cell)
    return cell_value(nodes_.front().place, cells);
  std::vector<Value> stack;
  for (const Node& node : nodes_) {
    switch (node.kind) {
      case Kind::cell:
        stack.push_back(cell_value(node.place, cells));
        break;
      case Kind::number:
        stack.push_back(rational(node.number));
        break;
      case Kind::row:
        stack.push_back(rational(mpq_class(cells.row)));
        break;
      case Kind::level:
        stack.push_back(truth((*cells.texts)[node.place] == node.text));
        break;
      case Kind::same_text:
        stack.push_back(truth((*cells.texts)[node.place] == (*cells.texts)[node.other_place]));
        break;
      default: {
        Value value = apply(node, stack.data() + (stack.size() - node.operands));
        stack.resize(stack.size() - node.operands);
        stack.push_back(std::move(value));
      }
    }
  }
  return stack.back();
}

}  // namespace gramproof::recheck
