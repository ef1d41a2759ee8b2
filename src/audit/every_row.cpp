#include "audit/every_row.hpp"

#include "scan/sampler.hpp"

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
  std::size_t joined = 0;
  for (const scan::Examined& answer : answers)
    joined += scan::join(digest_.sample, answer.violators);
  return joined;
}

}  // namespace gramproof::audit
