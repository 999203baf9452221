#pragma once
// The checks of a train one by one, so that a reader can name the line of each. Values are called
// by their names in files. None sets a place but `check_element`, which sets the element.
#include <chromacore/train.hpp>
#include <cstddef>
#include <span>
#include <string_view>

namespace chromacore::detail {

// @throws Error  bad_value: "thickness_mm is -6; expected 0 or more"
void check_finite(std::string_view name, double value);
void check_not_negative(std::string_view name, double value);
void check_positive(std::string_view name, double value);
// 1/radius; an infinite radius is flat.
// @throws Error  bad_value: 0 or not a number
[[nodiscard]] Curvature curvature_of_radius(std::string_view name, double radius_mm);

void check_object(const Train& train);
void check_aperture(const Train& train);
void check_field(const Train& train);
void check_stop(const Train& train);
void check_detector(const Train& train);
// @param e  from 0
void check_element(const Train& train, std::size_t e);

// None for a diffractive surface.
[[nodiscard]] const Material* material_of(const Element& element);

// `Train::from_surfaces`; `at` follows the surface (from 0) that is being read, for whoever
// catches.
[[nodiscard]] Train train_from_surfaces(std::span<const Surface> surfaces, std::size_t& at);

}  // namespace chromacore::detail
