#include "audit/contrasts.hpp"

#include <optional>
#include <utility>

#include "audit/figures.hpp"
#include "design/bind.hpp"
#include "design/rows.hpp"
#include "exact/relations.hpp"

namespace gramproof::audit {
namespace {

/// The first relation within rounding that the contrast is not orthogonal to: in exact arithmetic
/// where its coefficients are whole numbers, else by the doubles nearest to them, whose products
/// cancel to 1e-15 where they cancel, and are told from what does not.
const RelationFinding* blocking_within_rounding(const std::vector<design::ContrastPart>& parts,
                                                const Audit& audit) {
  for (const RelationFinding& relation : audit.relations) {
    if (relation.standing != Standing::within_rounding) continue;
    mpq_class sum = 0, size = 0;
    for (const RelationTerm& term : relation.terms) {
      for (const design::ContrastPart& part : parts) {
        if (part.column != term.column) continue;
        const mpq_class coefficient =
            term.exact.empty() ? mpq_class(term.coefficient) : mpq_class(term.exact);
        const mpq_class product = design::exact_number(part.number) * coefficient;
        sum += product;
        size += abs(product);
      }
    }
    const bool exact = !relation.terms.front().exact.empty();
    if (exact ? sum != 0 : std::abs(sum.get_d()) > 1e-12 * size.get_d()) return &relation;
  }
  return nullptr;
}

/// Estimable: orthogonal to every exact relation (Silvey 1969), decided in integers, and to those
/// within rounding.
ContrastFinding contrast_finding(const std::string& text,
                                 const std::vector<design::ContrastPart>& parts,
                                 const scan::Digest& digest, const Audit& audit) {
  ContrastFinding finding;
  finding.text = text;
  finding.estimable = true;
  for (const exact::NullVector& relation : audit.null_space) {
    mpq_class product = 0;
    for (const design::ContrastPart& part : parts) {
      product +=
          design::exact_number(part.number) * relation[static_cast<std::size_t>(part.column)];
    }
    if (product == 0) continue;
    finding.estimable = false;
    finding.blocking_relation = exact::equation(audit.design, relation);
    return finding;
  }
  if (const RelationFinding* relation = blocking_within_rounding(parts, audit)) {
    finding.estimable = false;
    finding.blocking_relation = relation->text;
    return finding;
  }
  Vector coefficients = Vector::Zero(static_cast<Index>(audit.kept.size()));
  for (std::size_t i = 0; i < audit.kept.size(); ++i) {
    for (const design::ContrastPart& part : parts) {
      if (part.column == audit.kept[i]) coefficients[static_cast<Index>(i)] += part.number.value;
    }
  }
  finding.standard_error_per_sigma = contrast_error(digest.factor, audit.kept, coefficients);
  return finding;
}

}  // namespace

Result<void> fill_contrasts(const std::vector<std::string>& texts, bool too_few_rows,
                            const scan::Digest& digest, Audit& audit) {
  for (const std::string& text : texts) {
    Result<std::vector<design::ContrastPart>> parts =
        design::parse_contrast(text, audit.design, audit.schema);
    if (!parts) return parts.error();
    if (too_few_rows) {
      audit.contrasts.push_back({text, false, std::nullopt, "fewer rows than columns"});
      continue;
    }
    audit.contrasts.push_back(contrast_finding(text, parts.value(), digest, audit));
  }
  return {};
}

}  // namespace gramproof::audit
