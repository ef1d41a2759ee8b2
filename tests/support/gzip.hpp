// tests/support/gzip.hpp - a text as gzip makes it.
#pragma once

#include <doctest/doctest.h>
#include <zlib.h>

#include <string>
#include <string_view>

namespace gramproof::test {

inline std::string gzip(std::string_view bytes) {
  constexpr int gzip_header = 16;  // added to the window bits (zlib.h)
  z_stream stream{};
  REQUIRE(deflateInit2(&stream, 6, Z_DEFLATED, MAX_WBITS + gzip_header, 8, Z_DEFAULT_STRATEGY) ==
          Z_OK);
  std::string packed(deflateBound(&stream, bytes.size()) + 64, '\0');
  stream.next_in = reinterpret_cast<Bytef*>(const_cast<char*>(bytes.data()));
  stream.avail_in = static_cast<uInt>(bytes.size());
  stream.next_out = reinterpret_cast<Bytef*>(packed.data());
  stream.avail_out = static_cast<uInt>(packed.size());
  REQUIRE(deflate(&stream, Z_FINISH) == Z_STREAM_END);
  packed.resize(stream.total_out);
  deflateEnd(&stream);
  return packed;
}

}  // namespace gramproof::test
