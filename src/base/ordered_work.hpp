// src/base/ordered_work.hpp - a bounded pipeline: produced in order, worked on in parallel,
// consumed in order.
#pragma once

#include <condition_variable>
#include <cstddef>
#include <exception>
#include <map>
#include <mutex>
#include <optional>
#include <thread>
#include <vector>

#include "base/result.hpp"

namespace gramproof {

/// Runs `produce` (one call at a time, until it gives an empty optional), `work` on each item in up
/// to `threads` threads, and `consume` on the results strictly in the order of production (one call
/// at a time). What is consumed, and in which order, does not depend on `threads`: this is what
/// makes the same bytes for any number of threads.
///
///   produce: () -> Result<std::optional<In>>     work: (In) -> Result<Out>     consume: (Out) ->
///   Result<void>
///
/// At most 2 * threads + 2 items are alive. The first error in order of production is returned and
/// ends the run; an exception in any of the three (std::bad_alloc, say) ends the run too and is
/// rethrown in the caller's thread after all threads are joined.
template <class In, class Out, class Produce, class Work, class Consume>
[[nodiscard]] Result<void> run_ordered(unsigned threads, Produce&& produce, Work&& work,
                                       Consume&& consume);

}  // namespace gramproof

#include "base/ordered_work.inl"
