// tests/bench/make_wide_file.cpp - writes the large file on which speed is measured.
//
//   make_wide_file FILE [ROWS]     "-" for standard output; 2,000,000 rows unless said otherwise,
//   about 290 MB
//
// Columns: region (text, five levels), x01 .. x20 (numbers, in turn with 0, 1, 2 and 3 decimals).
// x20 = x03 + x07 to the cent, so that a run has something to prove. The same rows give the same
// bytes everywhere: integers only, SplitMix64 (Steele, Lea & Flood 2014).
#include <charconv>
#include <cstdint>
#include <cstdio>
#include <cstdlib>
#include <string>
#include <string_view>

namespace {

constexpr int numeric_columns = 20;
constexpr std::uint64_t default_rows = 2'000'000;
constexpr std::string_view regions[] = {"north", "east", "south", "west", "isles"};

class Random {
 public:
  std::uint64_t below(std::uint64_t bound) {
    state_ += 0x9E3779B97F4A7C15;
    std::uint64_t z = state_;
    z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9;
    z = (z ^ (z >> 27)) * 0x94D049BB133111EB;
    return (z ^ (z >> 31)) % bound;
  }

 private:
  std::uint64_t state_ = 20240917;
};

/// Appends units * 10^-decimals.
void append_decimal(std::string& line, std::uint64_t units, int decimals) {
  char digits[24];
  const auto end = std::to_chars(digits, digits + sizeof digits, units).ptr;
  std::string_view text(digits, static_cast<std::size_t>(end - digits));
  if (decimals == 0) {
    line.append(text);
    return;
  }
  const auto places = static_cast<std::size_t>(decimals);
  if (text.size() <= places) {
    line.append("0.").append(places - text.size(), '0').append(text);
    return;
  }
  line.append(text.substr(0, text.size() - places)).push_back('.');
  line.append(text.substr(text.size() - places));
}

void append_header(std::string& text) {
  text += "region";
  for (int column = 1; column <= numeric_columns; ++column) {
    text += column < 10 ? ",x0" : ",x";
    text += std::to_string(column);
  }
  text += '\n';
}

void append_row(std::string& text, Random& random) {
  text += regions[random.below(5)];
  std::uint64_t sum = 0;
  for (int column = 1; column < numeric_columns; ++column) {
    // Columns 3, 7, 11, 15, 19 have two decimals; 3 and 7 are the parts of the last column.
    const int decimals = (column + 3) % 4;
    const std::uint64_t units = random.below(decimals < 2 ? 100'000 : 1'000'000);
    if (column == 3 || column == 7) sum += units;
    text += ',';
    append_decimal(text, units, decimals);
  }
  text += ',';
  append_decimal(text, sum, 2);
  text += '\n';
}

bool write_rows(std::FILE* file, std::uint64_t rows) {
  constexpr std::size_t flush_at = 1 << 20;
  Random random;
  std::string text;
  text.reserve(flush_at + 4096);
  append_header(text);
  for (std::uint64_t row = 0; row < rows; ++row) {
    append_row(text, random);
    if (text.size() < flush_at) continue;
    if (std::fwrite(text.data(), 1, text.size(), file) != text.size()) return false;
    text.clear();
  }
  return std::fwrite(text.data(), 1, text.size(), file) == text.size() && std::fflush(file) == 0;
}

}  // namespace

int main(int argc, char** argv) {
  if (argc < 2 || argc > 3) {
    std::fputs("make_wide_file FILE [ROWS]\n", stderr);
    return 2;
  }
  std::uint64_t rows = default_rows;
  if (argc == 3) {
    const std::string_view text = argv[2];
    const auto [end, problem] = std::from_chars(text.data(), text.data() + text.size(), rows);
    if (problem != std::errc() || end != text.data() + text.size()) {
      std::fprintf(stderr, "make_wide_file: \"%s\" is no number of rows\n", argv[2]);
      return 2;
    }
  }
  const bool to_standard_output = std::string_view(argv[1]) == "-";
  std::FILE* file = to_standard_output ? stdout : std::fopen(argv[1], "wb");
  if (file == nullptr) {
    std::perror(argv[1]);
    return 2;
  }
  const bool written = write_rows(file, rows);
  const bool closed = to_standard_output || std::fclose(file) == 0;
  if (written && closed) return 0;
  std::perror(argv[1]);
  return 2;
}
