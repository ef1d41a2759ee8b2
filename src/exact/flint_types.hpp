// src/exact/flint_types.hpp - FLINT's objects with C++ lifetimes, and the way to and from GMP.
#pragma once

#include <flint/fmpq.h>
#include <flint/fmpz.h>
#include <flint/fmpz_mat.h>
#include <flint/nmod_mat.h>
#include <gmpxx.h>

#include <cstddef>
#include <cstdint>
#include <vector>

namespace gramproof::exact {

/// FLINT keeps a pool of big integers for each thread. A public function of this folder that uses
/// such integers holds one session while it runs, declared before any of them, so that a thread may
/// end without a leak. Sessions do not nest: no public function calls another that holds one.
class FlintSession {
 public:
  FlintSession() = default;
  FlintSession(const FlintSession&) = delete;
  FlintSession& operator=(const FlintSession&) = delete;
  ~FlintSession() { flint_cleanup(); }
};

class FlintInteger {
 public:
  FlintInteger() { fmpz_init(value_); }
  explicit FlintInteger(const mpz_class& value) {
    fmpz_init(value_);
    fmpz_set_mpz(value_, value.get_mpz_t());
  }
  FlintInteger(const FlintInteger&) = delete;
  FlintInteger& operator=(const FlintInteger&) = delete;
  ~FlintInteger() { fmpz_clear(value_); }

  [[nodiscard]] fmpz* get() { return value_; }
  [[nodiscard]] mpz_class to_mpz() const {
    mpz_class result;
    fmpz_get_mpz(result.get_mpz_t(), value_);
    return result;
  }

 private:
  fmpz_t value_;
};

/// rows x columns integers, zero at first.
class FlintMatrix {
 public:
  FlintMatrix(std::size_t rows, std::size_t columns) {
    fmpz_mat_init(matrix_, static_cast<slong>(rows), static_cast<slong>(columns));
  }
  FlintMatrix(const FlintMatrix&) = delete;
  FlintMatrix& operator=(const FlintMatrix&) = delete;
  ~FlintMatrix() { fmpz_mat_clear(matrix_); }

  [[nodiscard]] fmpz_mat_struct* get() { return matrix_; }
  void set(std::size_t row, std::size_t column, const mpz_class& value) {
    fmpz_set_mpz(entry(row, column), value.get_mpz_t());
  }
  [[nodiscard]] mpz_class at(std::size_t row, std::size_t column) const {
    mpz_class result;
    fmpz_get_mpz(result.get_mpz_t(), entry(row, column));
    return result;
  }

 private:
  [[nodiscard]] fmpz* entry(std::size_t row, std::size_t column) const {
    return fmpz_mat_entry(matrix_, static_cast<slong>(row), static_cast<slong>(column));
  }
  fmpz_mat_t matrix_;
};

/// rows x columns residues, zero at first.
class ResidueMatrix {
 public:
  ResidueMatrix(std::size_t rows, std::size_t columns, std::uint64_t modulus) {
    nmod_mat_init(matrix_, static_cast<slong>(rows), static_cast<slong>(columns), modulus);
  }
  ResidueMatrix(const ResidueMatrix&) = delete;
  ResidueMatrix& operator=(const ResidueMatrix&) = delete;
  ~ResidueMatrix() { nmod_mat_clear(matrix_); }

  [[nodiscard]] nmod_mat_struct* get() { return matrix_; }
  [[nodiscard]] std::uint64_t& at(std::size_t row, std::size_t column) {
    return matrix_->rows[row][column];
  }
  [[nodiscard]] std::uint64_t at(std::size_t row, std::size_t column) const {
    return matrix_->rows[row][column];
  }

 private:
  nmod_mat_t matrix_;
};

}  // namespace gramproof::exact
