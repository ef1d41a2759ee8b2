// Families of columns over one source, and which family is under which.
//   Nelder, "A reformulation of linear models", JRSS A 140 (1977) 48-77 (marginality).
#include <algorithm>
#include <map>
#include <tuple>
#include <utility>

#include "design/bind.hpp"
#include "design/marginality.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

/// Level sets coded by hand: plain 0/1 columns of the table that never have two ones in a row.
/// `group_of[c]`: the table columns of the group that table column c belongs to, or c alone.
class HandCodedSets {
 public:
  HandCodedSets(const Design& design, std::size_t table_columns,
                const std::vector<std::vector<bool>>& never_together) {
    groups_of_.resize(table_columns);
    std::vector<std::vector<int>> groups;  // of design columns
    for (std::size_t j = 0; j < design.columns.size(); ++j) {
      if (!is_candidate(design.columns[j])) continue;
      const auto home =
          std::find_if(groups.begin(), groups.end(), [&](const std::vector<int>& group) {
            return std::all_of(group.begin(), group.end(), [&](int i) {
              return never_together[j][static_cast<std::size_t>(i)];
            });
          });
      if (home == groups.end()) {
        groups.push_back({static_cast<int>(j)});
      } else {
        home->push_back(static_cast<int>(j));
      }
    }
    for (std::size_t c = 0; c < table_columns; ++c) groups_of_[c] = {static_cast<int>(c)};
    for (const std::vector<int>& group : groups) {
      std::vector<int> sources;
      for (const int j : group)
        sources.push_back(design.columns[static_cast<std::size_t>(j)].sources[0]);
      for (const int source : sources) groups_of_[static_cast<std::size_t>(source)] = sources;
    }
  }

  /// The table columns coded together with this one, the first in design order first.
  [[nodiscard]] const std::vector<int>& group_of(int column) const {
    return groups_of_[static_cast<std::size_t>(column)];
  }

 private:
  static bool is_candidate(const DesignColumn& column) {
    return column.zero_one && column.definition->operation == Operation::cell;
  }

  std::vector<std::vector<int>> groups_of_;
};

/// True if the column is a product of factors over one table column each.
bool is_product_of_single_sources(const DesignColumn& column) {
  const auto factors = factors_of(*column.definition);
  return std::all_of(factors.begin(), factors.end(),
                     [](const Expression* factor) { return columns_of(*factor).size() <= 1; });
}

/// What decides the family: the first table column of each group that the column is made of, in
/// table order; a column that is no product has its own number besides.
struct Key {
  std::vector<int> sources;
  int alone = -1;
  bool operator<(const Key& other) const {
    return std::tie(sources, alone) < std::tie(other.sources, other.alone);
  }
};

/// Names of the sources in the order in which the factors of the column come.
std::string name_of_product(const DesignColumn& column, const HandCodedSets& sets,
                            const table::Schema& schema) {
  std::vector<int> seen;
  std::string name;
  for (const Expression* factor : factors_of(*column.definition)) {
    for (const int source : columns_of(*factor)) {
      const int first = sets.group_of(source).front();
      if (std::find(seen.begin(), seen.end(), first) != seen.end()) continue;
      seen.push_back(first);
      if (!name.empty()) name += " * ";
      name += quoted_if_needed(schema.columns[static_cast<std::size_t>(first)].name);
    }
  }
  return name;
}

std::vector<int> union_of_groups(const std::vector<int>& sources, const HandCodedSets& sets) {
  std::vector<int> all;
  for (const int source : sources) {
    const auto& group = sets.group_of(source);
    all.insert(all.end(), group.begin(), group.end());
  }
  std::sort(all.begin(), all.end());
  all.erase(std::unique(all.begin(), all.end()), all.end());
  return all;
}

}  // namespace

void assign_families(Design& design, const table::Schema& schema,
                     const std::vector<std::vector<bool>>& never_together) {
  const HandCodedSets sets(design, schema.columns.size(), never_together);
  design.families.clear();
  std::map<Key, int> known;
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    DesignColumn& column = design.columns[j];
    const bool product = is_product_of_single_sources(column);
    Key key;
    for (const int source : column.sources) key.sources.push_back(sets.group_of(source).front());
    std::sort(key.sources.begin(), key.sources.end());
    key.sources.erase(std::unique(key.sources.begin(), key.sources.end()), key.sources.end());
    if (!product) key.alone = static_cast<int>(j);
    const auto [entry, fresh] = known.emplace(key, static_cast<int>(design.families.size()));
    if (fresh) {
      Family family;
      family.products_only = product;
      family.sources = product ? union_of_groups(column.sources, sets) : column.sources;
      family.name = product ? name_of_product(column, sets, schema) : column.label;
      if (column.sources.empty()) family.name = "constant";
      design.families.push_back(std::move(family));
    }
    column.family = entry->second;
    design.families[static_cast<std::size_t>(entry->second)].columns.push_back(static_cast<int>(j));
  }
}

bool is_under(const Family& below, const Family& above) {
  if (!below.products_only || !above.products_only || below.sources.empty()) return false;
  return below.sources.size() < above.sources.size() &&
         std::includes(above.sources.begin(), above.sources.end(), below.sources.begin(),
                       below.sources.end());
}

}  // namespace gramproof::design
