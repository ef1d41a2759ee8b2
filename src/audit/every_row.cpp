#include "audit/every_row.hpp"

#include <unordered_set>

namespace gramproof::audit {

Result<std::vector<scan::Examined>> EveryRow::ask(const scan::Examiner& examiner) {
  if (sample_is_everything()) return ask_sample(examiner);
  ++passes_;
  return pass_(examiner);
}

Result<std::vector<scan::Examined>> EveryRow::ask_sample(const scan::Examiner& examiner) const {
  return scan::examine_rows(schema_, file_names_, design_, digest_.sample, examiner);
}

Result<Matrix> EveryRow::sample_values() const {
  Result<design::Block> block = design::expand(design_, schema_, file_names_, digest_.sample);
  if (!block) return block.error();
  return std::move(block.value().values);
}

std::size_t EveryRow::join(const std::vector<scan::Examined>& answers) {
  table::Piece& sample = digest_.sample;
  std::unordered_set<std::uint64_t> known(sample.row.begin(), sample.row.end());
  std::size_t joined = 0;
  for (const scan::Examined& answer : answers) {
    std::vector<std::size_t> fresh;
    for (std::size_t i = 0; i < answer.violators.rows; ++i) {
      if (known.insert(answer.violators.row[i]).second) fresh.push_back(i);
    }
    if (fresh.empty()) continue;
    table::append(sample, table::gather(answer.violators, fresh));
    joined += fresh.size();
  }
  return joined;
}

}  // namespace gramproof::audit
