// src/gramproof.hpp - the library in one header, for programs that use an installed copy.
//
// Nothing here prints, exits or keeps global state; whatever can fail returns Result<T>
// (base/result.hpp).
#pragma once

#include "audit/run.hpp"
#include "base/numeric.hpp"
#include "base/result.hpp"
#include "report/document.hpp"
#include "report/text_report.hpp"
#include "table/source.hpp"
#include "table/survey.hpp"
