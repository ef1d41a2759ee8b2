// A user's program: audits the file named on its command line and prints its columns and the
// verdict, or the error.
#include <gramproof.hpp>

#include <iostream>

// A vector that the library allocates and this program frees needs the same alignment on both
// sides, whatever instruction set either was compiled for.
static_assert(EIGEN_MAX_ALIGN_BYTES == 64 && EIGEN_MAX_STATIC_ALIGN_BYTES == 64);

int main(int argc, char** argv) {
  if (argc != 2) return 2;
  auto source = gramproof::table::Source::open({argv[1]}, {});
  if (!source) {
    std::cout << gramproof::to_line(source.error()) << '\n';
    return 1;
  }
  for (const std::string& name : source.value().column_names()) std::cout << name << '\n';
  const auto audit = gramproof::audit::run(source.value(), {});
  if (!audit) {
    std::cout << gramproof::to_line(audit.error()) << '\n';
    return 1;
  }
  std::cout << gramproof::audit::word_of(audit.value().verdict.overall) << '\n';
  return 0;
}
