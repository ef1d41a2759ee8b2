// The pipeline: order, errors and exceptions are the same for any number of threads.
#include "base/ordered_work.hpp"

#include <doctest/doctest.h>

#include <atomic>
#include <memory>
#include <new>
#include <random>
#include <stdexcept>
#include <string>
#include <thread>
#include <vector>

using namespace gramproof;

namespace {

constexpr int nothing = -1;

/// Which item meets trouble at which stage.
struct Plan {
  int items = 200;
  int produce_error = nothing, work_error = nothing, consume_error = nothing;
  int produce_throw = nothing, work_throw = nothing, consume_throw = nothing;
};

struct Outcome {
  std::vector<int> consumed;
  std::string end = "done";
};

Error failed(const std::string& stage, int item) {
  return {ErrorKind::data, "", stage + " " + std::to_string(item), ""};
}

void meet(int item, int error_at, int throw_at, const std::string& stage,
          std::optional<Error>& error) {
  if (item == throw_at) throw std::runtime_error(stage + " threw " + std::to_string(item));
  if (item == error_at) error = failed(stage, item);
}

/// Items are unique pointers, so that a copy anywhere would not compile; work takes uneven time.
Outcome run(const Plan& plan, unsigned threads, unsigned seed) {
  Outcome outcome;
  int next = 0;
  std::atomic<int> producing = 0, consuming = 0, alive = 0, most_alive = 0;
  std::vector<unsigned> delay(static_cast<std::size_t>(plan.items) + 1);
  std::mt19937 random(seed);
  for (unsigned& d : delay) d = random() % 60;
  const auto produce = [&]() -> Result<std::optional<std::unique_ptr<int>>> {
    CHECK(++producing == 1);
    const int item = next++;
    --producing;
    std::optional<Error> error;
    meet(item, plan.produce_error, plan.produce_throw, "produce", error);
    if (error) return *error;
    if (item >= plan.items) return std::optional<std::unique_ptr<int>>();
    if (++alive > most_alive) most_alive = alive.load();
    return std::optional(std::make_unique<int>(item));
  };
  const auto work = [&](std::unique_ptr<int> item) -> Result<std::unique_ptr<int>> {
    std::this_thread::sleep_for(std::chrono::microseconds(delay[static_cast<std::size_t>(*item)]));
    std::optional<Error> error;
    meet(*item, plan.work_error, plan.work_throw, "work", error);
    if (error) return *error;
    return std::make_unique<int>(*item * 10);
  };
  const auto consume = [&](std::unique_ptr<int> result) -> Result<void> {
    CHECK(++consuming == 1);
    const int item = *result / 10;
    --consuming;
    std::optional<Error> error;
    meet(item, plan.consume_error, plan.consume_throw, "consume", error);
    if (error) return *error;
    --alive;
    outcome.consumed.push_back(item);
    return {};
  };
  try {
    const Result<void> done =
        run_ordered<std::unique_ptr<int>, std::unique_ptr<int>>(threads, produce, work, consume);
    if (!done) outcome.end = done.error().what;
  } catch (const std::runtime_error& thrown) {
    outcome.end = thrown.what();
  }
  CHECK(most_alive <= static_cast<int>(2 * threads + 2));
  return outcome;
}

}  // namespace

TEST_CASE("what is consumed, and how a run ends, does not depend on the number of threads") {
  struct Case {
    std::string why;
    Plan plan;
    int consumed;
    std::string end;
  };
  const Case cases[] = {
      {"nothing to do", {.items = 0}, 0, "done"},
      {"one item", {.items = 1}, 1, "done"},
      {"all goes well", {}, 200, "done"},
      {"production fails", {.produce_error = 50}, 50, "produce 50"},
      {"production fails at once", {.produce_error = 0}, 0, "produce 0"},
      {"work fails", {.work_error = 31}, 31, "work 31"},
      {"consumption fails", {.consume_error = 77}, 77, "consume 77"},
      {"the earlier item's error wins over a later one's",
       {.produce_error = 60, .work_error = 58},
       58,
       "work 58"},
      {"an error in work comes before consumption of the same item",
       {.work_error = 40, .consume_error = 40},
       40,
       "work 40"},
      {"a later consumption error is never reached",
       {.work_error = 40, .consume_error = 41},
       40,
       "work 40"},
      {"production throws", {.produce_throw = 20}, 20, "produce threw 20"},
      {"work throws", {.work_throw = 33}, 33, "work threw 33"},
      {"consumption throws", {.consume_throw = 12}, 12, "consume threw 12"},
      {"an earlier error wins over a later exception",
       {.work_error = 90, .work_throw = 92},
       90,
       "work 90"},
      {"an earlier exception wins over a later error",
       {.work_error = 93, .work_throw = 92},
       92,
       "work threw 92"},
  };
  for (const Case& c : cases) {
    for (unsigned threads = 0; threads <= 8; ++threads) {
      CAPTURE(c.why);
      CAPTURE(threads);
      const Outcome outcome = run(c.plan, threads, 17 + threads);
      CHECK(outcome.end == c.end);
      REQUIRE(outcome.consumed.size() == static_cast<std::size_t>(c.consumed));
      for (int i = 0; i < c.consumed; ++i)
        CHECK(outcome.consumed[static_cast<std::size_t>(i)] == i);
    }
  }
}

TEST_CASE("one thread means the caller's thread") {
  const auto caller = std::this_thread::get_id();
  int next = 0;
  const auto done = run_ordered<int, int>(
      1,
      [&]() -> Result<std::optional<int>> {
        return next < 3 ? std::optional(next++) : std::nullopt;
      },
      [&](int item) -> Result<int> {
        CHECK(std::this_thread::get_id() == caller);
        return item;
      },
      [](int) -> Result<void> { return {}; });
  CHECK(done);
}

TEST_CASE("consumption stays in the caller's thread for any number of threads") {
  const auto caller = std::this_thread::get_id();
  int next = 0;
  const auto done = run_ordered<int, int>(
      4,
      [&]() -> Result<std::optional<int>> {
        return next < 50 ? std::optional(next++) : std::nullopt;
      },
      [](int item) -> Result<int> { return item; },
      [&](int) -> Result<void> {
        CHECK(std::this_thread::get_id() == caller);
        return {};
      });
  CHECK(done);
}

TEST_CASE("running out of memory in a worker reaches the caller as such") {
  int next = 0;
  CHECK_THROWS_AS(static_cast<void>(run_ordered<int, int>(
                      3, [&]() -> Result<std::optional<int>> { return std::optional(next++); },
                      [](int item) -> Result<int> {
                        if (item == 10) throw std::bad_alloc();
                        return item;
                      },
                      [](int) -> Result<void> { return {}; })),
                  std::bad_alloc);
}
