// src/exact/structural.cpp
#include "exact/structural.hpp"

#include <algorithm>
#include <map>
#include <optional>
#include <set>
#include <string>
#include <tuple>
#include <unordered_map>
#include <utility>

#include "exact/modular.hpp"
#include "exact/small_fraction.hpp"

namespace gramproof::exact {
namespace {

using Group = std::vector<std::size_t>;
using Terms = std::vector<std::pair<std::size_t, Integer>>;

/// Beyond these many involved columns the searches over pairs and over runs are left to the
/// lattice.
constexpr std::size_t most_for_pairs = 600;
constexpr std::size_t most_for_runs = 2000;

/// Looks forms up by fingerprint and keeps those that are relations.
class Search {
 public:
  Search(const design::Design& design, const NullSpace& space)
      : design_(design), space_(space), field_(prime), prints_(space.fingerprints(field_)) {
    for (const std::size_t j : space.involved()) {
      if (j < design.columns.size() && design.columns[j].constant) constant_ = j;
      column_of_.emplace(prints_[j][0], j);
    }
  }

  void zeros_and_multiples();
  void affine_copies();
  void level_sets();
  void runs_and_prefixes();
  void triples();
  [[nodiscard]] std::vector<NullVector> take() {
    return {std::make_move_iterator(found_.begin()), std::make_move_iterator(found_.end())};
  }

 private:
  [[nodiscard]] std::uint64_t sum_of(const Group& group) const {
    std::uint64_t sum = 0;
    for (const std::size_t j : group) sum = field_.add(sum, prints_[j][0]);
    return sum;
  }
  [[nodiscard]] bool is_constant(std::size_t j) const { return constant_ && *constant_ == j; }
  [[nodiscard]] std::optional<mpq_class> fraction(std::uint64_t residue) const {
    return small_fraction(residue, field_);
  }
  [[nodiscard]] std::uint64_t ratio(std::uint64_t a, std::uint64_t b) const {
    return b == 0 ? 0 : field_.multiply(a, field_.inverse(b));
  }
  void keep(const Terms& terms);
  void group_and_total(const Group& group);
  void pair(std::size_t a, std::size_t b, std::uint64_t factor);

  const design::Design& design_;
  const NullSpace& space_;
  Modulus field_;
  std::vector<std::array<std::uint64_t, 3>> prints_;
  std::optional<std::size_t> constant_;
  std::unordered_map<std::uint64_t, std::size_t> column_of_;
  std::set<NullVector> found_;
};

void Search::keep(const Terms& terms) {
  NullVector vector(design_.columns.size() + 1, 0);
  for (const auto& [column, coefficient] : terms) vector[column] += coefficient;
  make_primitive(vector);
  const bool zero =
      std::all_of(vector.begin(), vector.end(), [](const Integer& v) { return v == 0; });
  if (!zero && space_.contains(vector)) found_.insert(std::move(vector));
}

/// sum of the group = a column, or a multiple of the constant.
void Search::group_and_total(const Group& group) {
  const std::uint64_t sum = sum_of(group);
  Terms terms;
  for (const std::size_t j : group) terms.emplace_back(j, 1);
  if (const auto total = column_of_.find(sum); total != column_of_.end()) {
    terms.emplace_back(total->second, -1);
    keep(terms);
    terms.pop_back();
  }
  if (!constant_) return;
  const auto multiple = fraction(ratio(sum, prints_[*constant_][0]));
  // A fixed sum is a figure that somebody chose: 1, 100, 0.5. Most fractions are chance.
  if (!multiple || abs(multiple->get_num()) > 1'000'000 || multiple->get_den() > 1000) return;
  for (auto& term : terms) term.second = multiple->get_den();
  terms.emplace_back(*constant_, -multiple->get_num());
  keep(terms);
}

void Search::pair(std::size_t a, std::size_t b, std::uint64_t factor) {
  // print(a) = factor * print(b), up to a multiple of the constant
  const auto multiple = fraction(factor);
  if (!multiple) return;
  Terms terms = {{a, multiple->get_den()}, {b, -multiple->get_num()}};
  if (constant_) {
    const std::uint64_t rest =
        field_.subtract(field_.multiply(field_.of(terms[0].second), prints_[a][0]),
                        field_.multiply(field_.of(multiple->get_num()), prints_[b][0]));
    const auto offset = fraction(ratio(rest, prints_[*constant_][0]));
    if (!offset) return;
    for (auto& term : terms) term.second *= offset->get_den();
    terms.emplace_back(*constant_, -offset->get_num());
  }
  keep(terms);
}

void Search::zeros_and_multiples() {
  std::unordered_map<std::uint64_t, std::size_t> first;
  for (const std::size_t j : space_.involved()) {
    if (prints_[j][0] == 0) {
      keep({{j, 1}});
      continue;
    }
    const auto [place, is_new] = first.emplace(ratio(prints_[j][0], prints_[j][1]), j);
    if (is_new) continue;
    const auto multiple = fraction(ratio(prints_[j][0], prints_[place->second][0]));
    if (multiple) {
      keep({{j, multiple->get_den()}, {place->second, -multiple->get_num()}});
    }
  }
}

void Search::affine_copies() {
  if (!constant_) return;
  // Two combinations of the prints that vanish on the constant: their ratio is shared by columns
  // that differ by a factor and an offset.
  const auto& unit = prints_[*constant_];
  std::unordered_map<std::uint64_t, std::size_t> first;
  for (const std::size_t j : space_.involved()) {
    if (is_constant(j)) continue;
    const auto& print = prints_[j];
    const auto free_of_constant = [&](std::size_t t) {
      return field_.subtract(field_.multiply(print[0], unit[t]),
                             field_.multiply(print[t], unit[0]));
    };
    const std::uint64_t p = free_of_constant(1), q = free_of_constant(2);
    if (p == 0) continue;  // a multiple of the constant
    const auto [place, is_new] = first.emplace(ratio(q, p), j);
    if (is_new) continue;
    const auto& other = prints_[place->second];
    const std::uint64_t other_p =
        field_.subtract(field_.multiply(other[0], unit[1]), field_.multiply(other[1], unit[0]));
    pair(j, place->second, ratio(p, other_p));
  }
}

void Search::level_sets() {
  // Columns of one term that differ in the level of one set only.
  std::map<std::tuple<int, int, std::vector<std::pair<int, int>>>, Group> groups;
  for (std::size_t j = 0; j < design_.columns.size(); ++j) {
    const auto& levels = design_.columns[j].levels;
    for (std::size_t u = 0; u < levels.size(); ++u) {
      std::vector<std::pair<int, int>> others;
      for (std::size_t v = 0; v < levels.size(); ++v) {
        if (v != u) others.emplace_back(levels[v].set, levels[v].level);
      }
      groups[{design_.columns[j].term, levels[u].set, others}].push_back(j);
    }
  }
  std::unordered_map<std::uint64_t, const Group*> first;
  for (const auto& [key, group] : groups) {
    if (group.size() < 2) continue;
    group_and_total(group);
    const auto [place, is_new] = first.emplace(sum_of(group), &group);
    if (is_new) continue;
    Terms terms;
    for (const std::size_t j : group) terms.emplace_back(j, 1);
    for (const std::size_t j : *place->second) terms.emplace_back(j, -1);
    keep(terms);
  }
}

void Search::runs_and_prefixes() {
  const auto& involved = space_.involved();
  if (involved.size() > most_for_runs) return;
  std::map<std::string, Group> with_prefix;
  for (const std::size_t j : involved) {
    if (is_constant(j) || j >= design_.columns.size()) continue;
    const std::string& label = design_.columns[j].label;
    const std::size_t mark = label.find_last_of("_.- ");
    if (mark != std::string::npos && mark > 0) with_prefix[label.substr(0, mark)].push_back(j);
  }
  for (const auto& [prefix, group] : with_prefix) {
    if (group.size() >= 2) group_and_total(group);
  }
  // Look up sums of runs first: building a group for each of involved^2 runs would be slow.
  const auto constant_print = constant_ ? prints_[*constant_][0] : 0;
  std::set<std::uint64_t> fixed;
  for (std::uint64_t m = 1, sum = 0; constant_ && m <= 100; ++m) {
    sum = field_.add(sum, constant_print);
    fixed.insert(sum);
  }
  for (std::size_t a = 0; a < involved.size(); ++a) {
    std::uint64_t sum = 0;
    for (std::size_t b = a; b < involved.size(); ++b) {
      const std::size_t j = involved[b];
      if (is_constant(j)) break;
      sum = field_.add(sum, prints_[j][0]);
      if (b == a || (column_of_.count(sum) == 0 && fixed.count(sum) == 0)) continue;
      group_and_total(Group(involved.begin() + static_cast<std::ptrdiff_t>(a),
                            involved.begin() + static_cast<std::ptrdiff_t>(b) + 1));
    }
  }
}

void Search::triples() {
  const auto& involved = space_.involved();
  if (involved.size() > most_for_pairs) return;
  for (std::size_t a = 0; a < involved.size(); ++a) {
    for (std::size_t b = a + 1; b < involved.size(); ++b) {
      const std::size_t i = involved[a], j = involved[b];
      const auto sum = column_of_.find(field_.add(prints_[i][0], prints_[j][0]));
      if (sum != column_of_.end()) keep({{i, 1}, {j, 1}, {sum->second, -1}});
      const auto difference = column_of_.find(field_.subtract(prints_[i][0], prints_[j][0]));
      if (difference != column_of_.end()) keep({{i, 1}, {j, -1}, {difference->second, -1}});
    }
  }
}

}  // namespace

std::vector<NullVector> structural_relations(const design::Design& design, const NullSpace& space) {
  Search search(design, space);
  search.zeros_and_multiples();
  search.affine_copies();
  search.level_sets();
  search.runs_and_prefixes();
  search.triples();
  return search.take();
}

}  // namespace gramproof::exact
