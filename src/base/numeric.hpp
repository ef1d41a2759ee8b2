// src/base/numeric.hpp - the numeric types used everywhere, named once.
#pragma once

#include <Eigen/Core>

namespace gramproof {

using Index = Eigen::Index;
using Vector = Eigen::VectorXd;
using Matrix = Eigen::MatrixXd;  ///< column major

/// u: half the distance from 1 to the next double, the largest relative error of one rounding.
inline constexpr double unit_roundoff = 0x1p-53;

}  // namespace gramproof
