#pragma once
// Benchmarks as ratios: candidate and baseline alternate in one process, so that what the machine
// does meanwhile meets both. Equal results come first; absolute figures are goals, no verdicts.
#include <fmt/core.h>

#include <algorithm>
#include <chrono>
#include <cstdint>
#include <string_view>
#include <vector>

namespace pairs {

// Keeps a result, so that the work behind it is done.
template <class T>
inline void keep(const T& value) {
  asm volatile("" : : "r,m"(value) : "memory");
}

template <class F>
[[nodiscard]] double seconds(F&& work, std::int64_t times) {
  const auto start = std::chrono::steady_clock::now();
  for (std::int64_t i = 0; i < times; ++i) work();
  const std::chrono::duration<double> taken = std::chrono::steady_clock::now() - start;
  return taken.count() / static_cast<double>(times);
}

// How often to run something so that the clock sees at least 2 ms.
template <class F>
[[nodiscard]] std::int64_t repetitions(F&& work) {
  std::int64_t times = 1;
  while (seconds(work, times) * static_cast<double>(times) < 2e-3) times *= 2;
  return times;
}

[[nodiscard]] inline double median(std::vector<double> values) {
  std::sort(values.begin(), values.end());
  return values[values.size() / 2];
}

// Seconds a call, the quietest of several runs.
template <class F>
[[nodiscard]] double quickest(F&& work, int runs = 15) {
  const std::int64_t times = repetitions(work);
  double best = seconds(work, times);
  for (int run = 1; run < runs; ++run) best = std::min(best, seconds(work, times));
  return best;
}

// Prints the median ratio of the times and its spread; true if it is at most `most`.
template <class Candidate, class Baseline>
bool ratio(std::string_view name, Candidate&& candidate, Baseline&& baseline, double most,
           int count = 31) {
  const std::int64_t times_candidate = repetitions(candidate);
  const std::int64_t times_baseline = repetitions(baseline);
  std::vector<double> ratios;
  for (int pair = 0; pair < count; ++pair) {
    const double ours = seconds(candidate, times_candidate);
    ratios.push_back(ours / seconds(baseline, times_baseline));
  }
  const double middle = median(ratios);
  const auto [low, high] = std::minmax_element(ratios.begin(), ratios.end());
  const bool pass = middle <= most;
  fmt::print("{}: ratio {:.3g} ({:.3g} to {:.3g}, {} pairs), at most {:.3g}: {}\n", name, middle,
             *low, *high, count, most, pass ? "pass" : "FAIL");
  return pass;
}

}  // namespace pairs
