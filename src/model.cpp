#include "model.hpp"

#include <chromacore/error.hpp>
#include <type_traits>

#include "train_check.hpp"

namespace chromacore::detail {
namespace {

static_assert(std::is_same_v<std::variant_alternative_t<0, Element>, Thin> &&
              std::is_same_v<std::variant_alternative_t<1, Element>, Thick> &&
              std::is_same_v<std::variant_alternative_t<2, Element>, Diffractive>);  // as in Kind

double element_index(const Train& train, std::size_t e, const Line& line) {
  const Material* material = material_of(train.elements[e]);
  if (material == nullptr) return 1.0;
  try {
    return train.surroundings ? index(*material, line.wavelength(), *train.surroundings)
                              : index(*material, line.wavelength());
  } catch (const Error& error) {
    throw error.within({.element = static_cast<int>(e) + 1});
  }
}

double wavelength_in_surroundings_um(const Train& train, const Line& line) {
  const double standard_um = in_um(line.wavelength());
  if (!train.surroundings) return standard_um;
  return in_um(vacuum_wavelength(line.wavelength())) /
         air_index(line.wavelength(), *train.surroundings);
}

}  // namespace

Model::Model(const Train& train, std::span<const Line> further)
    : vergence_(1.0 / in_mm(train.object_distance)),
      aperture_(train.aperture),
      field_(train.field),
      stop_(train.stop) {
  for (const Element& element : train.elements)
    kinds_.push_back(static_cast<Kind>(element.index()));
  add(train, train.band.reference);
  for (const Line& line : train.band.wavelengths) add(train, line);
  for (const Line& line : further) add(train, line);
}

void Model::add(const Train& train, const Line& line) {
  for (const Line& known : lines_) {
    if (known.wavelength() == line.wavelength()) return;
  }
  lines_.push_back(line);
  wavelengths_um_.push_back(wavelength_in_surroundings_um(train, line));
  for (std::size_t e = 0; e < elements(); ++e) {
    const double n = element_index(train, e, line);
    index_.push_back(n);
    const double reference = index_[e];
    if (kinds_[e] == Kind::thin && reference == 1.0) {
      throw Error(ErrorCode::degenerate,
                  "its material has the index of the surroundings at " + line.name() +
                      "; a thin element of it has no power to scale",
                  {.element = static_cast<int>(e) + 1});
    }
    relative_power_.push_back(kinds_[e] == Kind::diffractive
                                  ? wavelengths_um_.back() / wavelengths_um_.front()
                                  : (n - 1.0) / (reference - 1.0));
  }
}

std::size_t Model::place(const Line& line) const {
  for (std::size_t w = 0; w < lines_.size(); ++w) {
    if (lines_[w].wavelength() == line.wavelength()) return w;
  }
  throw Error(ErrorCode::internal, "line " + line.name() + " is not part of the model");
}

Layout<double> layout_of(const Train& train) {
  Layout<double> layout;
  for (const Element& element : train.elements) {
    ElementLayout<double> e;
    e.gap_after = in_mm(gap_after(element));
    if (const auto* thick = std::get_if<Thick>(&element)) {
      e.front = in_per_mm(thick->front);
      e.back = in_per_mm(thick->back);
      e.thickness = in_mm(thick->thickness);
    } else if (const auto* thin = std::get_if<Thin>(&element)) {
      e.power = in_per_mm(thin->power);
    } else {
      e.power = in_per_mm(std::get<Diffractive>(element).power);
    }
    layout.push_back(e);
  }
  return layout;
}

namespace {

// The nearest curvature that is 1 over some double, so that a file can give its radius.
double with_radius(double curvature) { return curvature == 0.0 ? 0.0 : 1.0 / (1.0 / curvature); }

}  // namespace

Train with_layout(Train train, const Layout<double>& layout) {
  using namespace units;
  for (std::size_t i = 0; i < layout.size(); ++i) {
    const ElementLayout<double>& e = layout[i];
    std::visit([&](auto& element) { element.gap_after = e.gap_after * mm; }, train.elements[i]);
    if (auto* thick = std::get_if<Thick>(&train.elements[i])) {
      thick->front = with_radius(e.front) * per_mm;
      thick->back = with_radius(e.back) * per_mm;
      thick->thickness = e.thickness * mm;
    } else if (auto* thin = std::get_if<Thin>(&train.elements[i])) {
      thin->power = e.power * per_mm;
    } else {
      std::get<Diffractive>(train.elements[i]).power = e.power * per_mm;
    }
  }
  return train;
}

}  // namespace chromacore::detail
