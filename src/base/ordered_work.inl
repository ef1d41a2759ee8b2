// src/base/ordered_work.inl - implementation of run_ordered; see ordered_work.hpp.
#pragma once

#include <type_traits>
#include <utility>
#include <variant>

namespace gramproof::ordered_work_detail {

/// What became of one item: its result, an error, or an exception under way to the caller.
template <class Out>
using Outcome = std::variant<Out, Error, std::exception_ptr>;

/// The state the threads share. `produce` runs under `producing`, so that it is called by one
/// thread at a time and items get their numbers in the order of production; all else is guarded by
/// `mutex`.
template <class In, class Out>
struct Line {
  std::mutex producing;
  std::mutex mutex;
  std::condition_variable room;
  std::condition_variable ready;
  std::map<std::size_t, Outcome<Out>> outcomes;
  std::size_t most_alive = 0;
  std::size_t produced = 0;
  std::size_t consumed = 0;
  bool ended = false;  ///< nothing more will be produced

  /// Waits for room; false when the run has ended.
  bool wait_for_room() {
    std::unique_lock lock(mutex);
    room.wait(lock, [&] { return ended || produced - consumed < most_alive; });
    return !ended;
  }

  void end() {
    const std::lock_guard lock(mutex);
    ended = true;
    room.notify_all();
    ready.notify_all();
  }

  /// Stores an outcome. After an error or exception nothing later can be consumed, so production
  /// ends; earlier items are still worked on, because one of them may hold an earlier error.
  void finish(std::size_t number, Outcome<Out> outcome) {
    const std::lock_guard lock(mutex);
    if (outcome.index() != 0) {
      ended = true;
      room.notify_all();
    }
    outcomes.emplace(number, std::move(outcome));
    ready.notify_all();
  }

  std::size_t take_number() {
    const std::lock_guard lock(mutex);
    return produced++;
  }
};

/// Produces one item and gives its number, or nothing at the end (or after a failure, which is
/// stored).
template <class In, class Out, class Produce>
std::optional<std::pair<std::size_t, In>> produce_one(Line<In, Out>& line, Produce& produce) {
  const std::lock_guard turn(line.producing);
  if (!line.wait_for_room()) return std::nullopt;
  try {
    Result<std::optional<In>> item = produce();
    if (!item) {
      line.finish(line.take_number(), std::move(item.error()));
      return std::nullopt;
    }
    if (!item.value()) {
      line.end();
      return std::nullopt;
    }
    In taken = std::move(*item.value());
    return std::pair<std::size_t, In>(line.take_number(), std::move(taken));
  } catch (...) {
    line.finish(line.take_number(), std::current_exception());
    return std::nullopt;
  }
}

template <class In, class Out, class Produce, class Work>
void work_until_end(Line<In, Out>& line, Produce& produce, Work& work) {
  while (auto item = produce_one<In, Out>(line, produce)) {
    try {
      Result<Out> result = work(std::move(item->second));
      if (result) {
        line.finish(item->first, Outcome<Out>(std::in_place_index<0>, std::move(result.value())));
      } else {
        line.finish(item->first, std::move(result.error()));
      }
    } catch (...) {
      line.finish(item->first, std::current_exception());
    }
  }
}

/// Consumes in order in the caller's thread. Throws what a stage threw.
template <class In, class Out, class Consume>
Result<void> consume_until_end(Line<In, Out>& line, Consume& consume) {
  while (true) {
    std::optional<Outcome<Out>> outcome;
    {
      std::unique_lock lock(line.mutex);
      line.ready.wait(lock, [&] {
        return line.outcomes.contains(line.consumed) ||
               (line.ended && line.consumed == line.produced);
      });
      const auto found = line.outcomes.find(line.consumed);
      if (found == line.outcomes.end()) return {};
      outcome.emplace(std::move(found->second));
      line.outcomes.erase(found);
    }
    if (outcome->index() == 1) return std::move(std::get<1>(*outcome));
    if (outcome->index() == 2) std::rethrow_exception(std::get<2>(*outcome));
    if (Result<void> done = consume(std::move(std::get<0>(*outcome))); !done) return done;
    outcome.reset();  // before it is counted as consumed: the bound is on items alive
    const std::lock_guard lock(line.mutex);
    ++line.consumed;
    line.room.notify_one();
  }
}

template <class In, class Out, class Produce, class Work, class Consume>
Result<void> run_inline(Produce& produce, Work& work, Consume& consume) {
  while (true) {
    Result<std::optional<In>> item = produce();
    if (!item) return std::move(item.error());
    if (!item.value()) return {};
    Result<Out> result = work(std::move(*item.value()));
    if (!result) return std::move(result.error());
    if (Result<void> done = consume(std::move(result.value())); !done) return done;
  }
}

/// Joins on every way out: the threads refer to the caller's stack.
template <class In, class Out>
struct Crew {
  Line<In, Out>& line;
  std::vector<std::thread> threads;
  ~Crew() {
    line.end();
    for (std::thread& thread : threads) thread.join();
  }
};

}  // namespace gramproof::ordered_work_detail

namespace gramproof {

template <class In, class Out, class Produce, class Work, class Consume>
Result<void> run_ordered(unsigned threads, Produce&& produce, Work&& work, Consume&& consume) {
  namespace detail = ordered_work_detail;
  if (threads <= 1) return detail::run_inline<In, Out>(produce, work, consume);
  detail::Line<In, Out> line;
  line.most_alive = 2 * static_cast<std::size_t>(threads) + 2;
  detail::Crew<In, Out> crew{line, {}};
  crew.threads.reserve(threads);
  for (unsigned i = 0; i < threads; ++i) {
    crew.threads.emplace_back(
        [&line, &produce, &work] { detail::work_until_end<In, Out>(line, produce, work); });
  }
  return detail::consume_until_end(line, consume);
}

}  // namespace gramproof
