// Parameters: names and factories.
#include <array>
#include <chromacore/error.hpp>
#include <chromacore/solve.hpp>

#include "text.hpp"

namespace chromacore {
namespace {

constexpr std::array<std::string_view, 6> kParameters = {
    "power_per_mm", "curvature_front_per_mm", "curvature_back_per_mm",
    "shape",        "thickness_mm",           "gap_after_mm"};

Vary between(int element, Parameter parameter, double min, double max) {
  return {.element = element, .parameter = parameter, .min = min, .max = max};
}

}  // namespace

std::string_view to_string(Parameter parameter) {
  return kParameters[static_cast<std::size_t>(parameter)];
}

Parameter parameter(std::string_view name) {
  for (std::size_t i = 0; i < kParameters.size(); ++i) {
    if (kParameters[i] == name) return static_cast<Parameter>(i);
  }
  throw Error(ErrorCode::not_found, "no parameter \"" + std::string(name) + "\"; nearest: " +
                                        detail::joined(detail::nearest(name, kParameters)));
}

std::string_view to_string(SolveStatus status) {
  constexpr std::array<std::string_view, 4> names = {"met", "compromise", "infeasible", "stopped"};
  return names[static_cast<std::size_t>(status)];
}

namespace vary {

Vary power(int element) { return {.element = element, .parameter = Parameter::power}; }
Vary power(int element, Power min, Power max) {
  return between(element, Parameter::power, in_per_mm(min), in_per_mm(max));
}
Vary front(int element) { return {.element = element, .parameter = Parameter::curvature_front}; }
Vary front(int element, Curvature min, Curvature max) {
  return between(element, Parameter::curvature_front, in_per_mm(min), in_per_mm(max));
}
Vary back(int element) { return {.element = element, .parameter = Parameter::curvature_back}; }
Vary back(int element, Curvature min, Curvature max) {
  return between(element, Parameter::curvature_back, in_per_mm(min), in_per_mm(max));
}
Vary shape(int element) { return {.element = element, .parameter = Parameter::shape}; }
Vary thickness(int element, Length min, Length max) {
  return between(element, Parameter::thickness, in_mm(min), in_mm(max));
}
Vary gap_after(int element) { return {.element = element, .parameter = Parameter::gap_after}; }
Vary gap_after(int element, Length min, Length max) {
  return between(element, Parameter::gap_after, in_mm(min), in_mm(max));
}

}  // namespace vary
}  // namespace chromacore
