// src/exact/surely_regular.hpp - a proof in doubles that a square matrix known within bounds is
// regular.
//   [R10] Rump, "Verification methods: rigorous results using floating-point arithmetic", Acta
//         Numerica 19 (2010) 287-449, section 10.
//   [H02] Higham, "Accuracy and Stability of Numerical Algorithms", 2nd ed., SIAM 2002, section 3.1
//         (error of a sum of products in any order).
#pragma once

#include "base/numeric.hpp"

namespace gramproof::exact {

/// True proves that every matrix A with |A - middle| <= radius entry by entry is regular: with C an
/// approximate inverse in doubles, the norm of I - C A is below 1 for all of them, all rounding
/// errors counted. False proves nothing (condition numbers beyond about 1e13, and what is
/// singular). Cost: an inverse and a product, O(n^3) in doubles.
[[nodiscard]] bool surely_regular(const Matrix& middle, const Matrix& radius);

}  // namespace gramproof::exact
