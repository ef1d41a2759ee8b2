#include "table/record_splitter.hpp"

#include <algorithm>
#include <cstring>
#include <utility>

namespace gramproof::table {
namespace {

constexpr std::size_t read_size = 256 * 1024;
constexpr std::string_view byte_order_mark = "\xEF\xBB\xBF";

}  // namespace

RecordSplitter::RecordSplitter(std::unique_ptr<ByteStream> stream) : stream_(std::move(stream)) {}

/// Reads more bytes behind the unfinished record.
Result<void> RecordSplitter::fill() {
  buffer_.erase(0, given_);
  record_ -= given_;
  scan_ -= given_;
  given_ = 0;
  const std::size_t size = buffer_.size();
  // A long record grows the steps, so that its bytes are moved a bounded number of times.
  const std::size_t step = std::max(read_size, size / 2);
  buffer_.resize(size + step);
  auto got = stream_->read(buffer_.data() + size, step);
  if (!got) return got.error();
  buffer_.resize(size + got.value());
  ended_ = got.value() == 0;
  return {};
}

Result<std::string_view> RecordSplitter::sample() {
  while (!ended_ && buffer_.size() < read_size) {
    if (auto filled = fill(); !filled) return filled.error();
  }
  if (buffer_.starts_with(byte_order_mark)) given_ = record_ = scan_ = byte_order_mark.size();
  return std::string_view(buffer_).substr(given_, read_size);
}

/// Moves scan_ behind the line break that ends the record, or to the end of the buffer (false).
bool RecordSplitter::find_record_end() {
  const char* const bytes = buffer_.data();
  const std::size_t size = buffer_.size();
  while (scan_ < size) {
    if (in_quotes_) {
      const auto* quote = static_cast<const char*>(std::memchr(bytes + scan_, '"', size - scan_));
      if (quote == nullptr) break;
      scan_ = static_cast<std::size_t>(quote - bytes) + 1;
      in_quotes_ = false;
      continue;
    }
    const auto* line_break =
        static_cast<const char*>(std::memchr(bytes + scan_, '\n', size - scan_));
    const std::size_t stop =
        line_break == nullptr ? size : static_cast<std::size_t>(line_break - bytes);
    const auto* quote = static_cast<const char*>(std::memchr(bytes + scan_, '"', stop - scan_));
    if (quote != nullptr) {
      scan_ = static_cast<std::size_t>(quote - bytes) + 1;
      in_quotes_ = true;
    } else if (line_break != nullptr) {
      scan_ = stop + 1;
      return true;
    } else {
      break;
    }
  }
  scan_ = size;
  return false;
}

bool RecordSplitter::is_blank(std::size_t begin, std::size_t end, char separator) const {
  for (std::size_t i = begin; i < end; ++i) {
    const char c = buffer_[i];
    const bool blank = c == ' ' || c == '\t' || c == '\r' || c == '\n';
    if (!blank || c == separator) return false;
  }
  return true;
}

void RecordSplitter::give(Records& records, std::size_t end) {
  records.bytes.append(buffer_, given_, end - given_);
  given_ = end;
}

/// Blank lines that turned out to stand before a record are given out, as bare line breaks. False
/// when `records` is full.
bool RecordSplitter::give_blank_lines(Records& records, std::size_t most_records) {
  while (blank_lines_ > 0) {
    if (records.count == most_records) return false;
    records.bytes += '\n';
    ++records.count;
    --blank_lines_;
  }
  return true;
}

Result<Records> RecordSplitter::next(std::size_t most_records, char separator) {
  Records records;
  records.first_line = line_;
  while (records.count < most_records && records.bytes.size() + (record_ - given_) < most_bytes) {
    if (!find_record_end() && !ended_) {
      give(records, record_);
      if (scan_ - record_ > longest_record) {
        give(records, scan_);
        record_ = scan_;
        records.cut = true;
        ++records.count;
        ended_ = true;
        break;
      }
      if (auto filled = fill(); !filled) return filled.error();
      continue;
    }
    if (record_ == buffer_.size()) break;
    if (is_blank(record_, scan_, separator)) {
      give(records, record_);
      ++blank_lines_;
      given_ = record_ = scan_;
      continue;
    }
    if (blank_lines_ > 0) {
      // Nothing but these lines stands between what was given out and this record.
      if (!give_blank_lines(records, most_records) || records.count == most_records) {
        scan_ = record_;
        in_quotes_ = false;
        break;
      }
    }
    record_ = scan_;
    ++records.count;
  }
  give(records, record_);
  line_ += static_cast<std::uint64_t>(std::count(records.bytes.begin(), records.bytes.end(), '\n'));
  return records;
}

}  // namespace gramproof::table
