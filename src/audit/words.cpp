#include "audit/audit.hpp"

namespace gramproof::audit {

bool is_focused(const Audit& audit, int column) {
  const auto at = static_cast<std::size_t>(column);
  if (audit.design.columns[at].role == design::Role::focus) return true;
  return at < audit.focused.size() && audit.focused[at];
}

std::string word_of(Grade grade) {
  switch (grade) {
    case Grade::pass:
      return "pass";
    case Grade::caution:
      return "caution";
    case Grade::fail:
      break;
  }
  return "fail";
}

std::string word_of(Overall overall) {
  switch (overall) {
    case Overall::singular:
      return "singular";
    case Overall::unreliable:
      return "unreliable";
    case Overall::fragile:
      return "fragile";
    case Overall::guarded:
      return "guarded";
    case Overall::sound:
      break;
  }
  return "sound";
}

std::string word_of(Standing standing) {
  switch (standing) {
    case Standing::exact:
      return "exact";
    case Standing::exact_except:
      return "exact_except";
    case Standing::within_rounding:
      return "within_rounding";
    case Standing::within_recorded_precision:
      return "within_recorded_precision";
    case Standing::near:
      break;
  }
  return "near";
}

std::string word_of(CentredBy centred_by) {
  switch (centred_by) {
    case CentredBy::column:
      return "column";
    case CentredBy::span:
      return "span";
    case CentredBy::none:
      break;
  }
  return "none";
}

std::string word_of(Step::How how) {
  switch (how) {
    case Step::How::decimals:
      return "decimals";
    case Step::How::binary:
      return "binary";
    case Step::How::whole:
      return "whole";
    case Step::How::exact_code:
      return "exact_code";
    case Step::How::given:
      return "given";
    case Step::How::given_exact:
      break;
  }
  return "given_exact";
}

}  // namespace gramproof::audit
