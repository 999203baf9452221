#pragma once
// A train, flattened for the trace: what depends on the materials (per wavelength, fixed) and what
// a solver may vary (a `Layout` of any scalar type).
#include <chromacore/train.hpp>
#include <cstddef>
#include <span>
#include <vector>

namespace chromacore::detail {

enum class Kind { thin, thick, diffractive };

// Powers, curvatures and lengths of one element, in 1/mm and mm. `power` is that of elements
// without thickness, the next three those of thick ones; the others stay 0.
template <class T>
struct ElementLayout {
  T power{};
  T front{};
  T back{};
  T thickness{};
  T gap_after{};
};

template <class T>
using Layout = std::vector<ElementLayout<T>>;

class Model {
 public:
  // Indices at the band's reference (wavelength 0), the band's own, then `further` lines.
  // Throws Error: not_set, out_of_range; the element is in its place. `train` is checked before.
  Model(const Train& train, std::span<const Line> further);

  [[nodiscard]] std::size_t elements() const { return kinds_.size(); }
  [[nodiscard]] Kind kind(std::size_t e) const { return kinds_[e]; }
  [[nodiscard]] std::size_t wavelengths() const { return wavelengths_um_.size(); }
  // The place of a line given to the constructor.
  [[nodiscard]] std::size_t place(const Line& line) const;

  // n, relative to the surroundings; 1 for a diffractive surface.
  [[nodiscard]] double index(std::size_t w, std::size_t e) const {
    return index_[w * elements() + e];
  }
  // phi(lambda)/phi(ref) of an element without thickness.
  [[nodiscard]] double relative_power(std::size_t w, std::size_t e) const {
    return relative_power_[w * elements() + e];
  }
  // Wavelength in the surroundings.
  [[nodiscard]] double wavelength_um(std::size_t w) const { return wavelengths_um_[w]; }

  // 1/(object distance), 0 for an object at infinity.
  [[nodiscard]] double vergence() const { return vergence_; }
  [[nodiscard]] const Aperture& aperture() const { return aperture_; }
  [[nodiscard]] const Field& field() const { return field_; }
  [[nodiscard]] const Stop& stop() const { return stop_; }

 private:
  void add(const Train& train, const Line& line);

  std::vector<Kind> kinds_;
  std::vector<Line> lines_;
  std::vector<double> wavelengths_um_;
  std::vector<double> index_;
  std::vector<double> relative_power_;
  double vergence_ = 0;
  Aperture aperture_;
  Field field_;
  Stop stop_;
};

[[nodiscard]] Layout<double> layout_of(const Train& train);
// The same train with other powers, curvatures and lengths.
[[nodiscard]] Train with_layout(Train train, const Layout<double>& layout);

// Power of a whole thick element in the surroundings, from its index n.
template <class T>
[[nodiscard]] T thick_power(const ElementLayout<T>& e, double n) {
  return (n - 1.0) * (e.front - e.back + e.thickness * e.front * e.back * ((n - 1.0) / n));
}

}  // namespace chromacore::detail
