#include <chromacore/error.hpp>
#include <chromacore/train.hpp>

#include "train_check.hpp"

namespace chromacore {

Curvature radius(Length r) { return detail::curvature_of_radius("radius_mm", in_mm(r)); }

Length gap_after(const Element& element) {
  return std::visit([](const auto& e) { return e.gap_after; }, element);
}

Length thickness(const Element& element) {
  const auto* const thick = std::get_if<Thick>(&element);
  return thick == nullptr ? Length{} : thick->thickness;
}

Train Train::from_surfaces(std::span<const Surface> surfaces) {
  std::size_t at = 0;
  return detail::train_from_surfaces(surfaces, at);
}

void check(const Train& train) {
  check(train.band);
  if (train.elements.empty()) throw Error(ErrorCode::not_set, "the train has no element");
  detail::check_object(train);
  detail::check_aperture(train);
  detail::check_field(train);
  detail::check_detector(train);
  if (train.surroundings) check(*train.surroundings);
  for (std::size_t e = 0; e < train.elements.size(); ++e) detail::check_element(train, e);
  detail::check_stop(train);
}

}  // namespace chromacore
