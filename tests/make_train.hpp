#pragma once
// Materials from given indices, and trains to try laws on.
#include <algorithm>
#include <chromacore/error.hpp>
#include <chromacore/paraxial.hpp>
#include <chromacore/train.hpp>
#include <cmath>
#include <cstdint>
#include <random>
#include <string>
#include <utility>
#include <vector>

namespace chromacore::test {

/// A glass that has these indices at these lines.
inline Material glass(const std::vector<std::pair<Line, double>>& indices,
                      std::string name = "glass") {
  MaterialData data;
  data.name = std::move(name);
  data.form = DispersionForm::through_lines;
  for (const auto& [line, n] : indices) {
    data.coefficients.push_back(in_um(line.wavelength()));
    data.coefficients.push_back(n);
  }
  return Material(std::move(data));
}

/// One index at all wavelengths.
inline Material fixed_index(double n) { return glass({{"d", n}}, "fixed"); }

/// A glass from n_d, V_d and P(F,d).
inline Material glass_of(double n, double v, double p_f_d = 0.7) {
  const double dispersion = (n - 1) / v;
  return glass({{"F", n + p_f_d * dispersion}, {"d", n}, {"C", n - (1 - p_f_d) * dispersion}});
}

/// A crown and a flint by their lines in the visible.
inline Material crown() {
  return glass({{"g", 1.52668}, {"F", 1.52238}, {"d", 1.51680}, {"C", 1.51432}, {"r", 1.51289}},
               "crown");
}
inline Material flint() {
  return glass({{"g", 1.64202}, {"F", 1.63208}, {"d", 1.62004}, {"C", 1.61503}, {"r", 1.61227}},
               "flint");
}

inline Band visible() { return Band::of_lines({"F", "d", "C"}, "d"); }

/// A train in the visible, 10 mm wide, half angle 1 degree, stop at its front, object at infinity.
inline Train train_of(std::vector<Element> elements) {
  Train train;
  train.band = visible();
  train.aperture = EntrancePupilDiameter{10.0 * units::mm};
  train.field = HalfAngle{1.0 * units::deg};
  train.elements = std::move(elements);
  return train;
}

inline Thin thin(Material material, double power_per_mm, double gap_after_mm = 0) {
  return {.material = std::move(material),
          .power = power_per_mm * units::per_mm,
          .gap_after = gap_after_mm * units::mm};
}

/// By curvatures.
inline Thick thick(Material material, double front_per_mm, double back_per_mm, double thickness_mm,
                   double gap_after_mm = 0) {
  return {.material = std::move(material),
          .front = front_per_mm * units::per_mm,
          .back = back_per_mm * units::per_mm,
          .thickness = thickness_mm * units::mm,
          .gap_after = gap_after_mm * units::mm};
}

inline Diffractive diffractive(double power_per_mm, double gap_after_mm = 0) {
  return {.power = power_per_mm * units::per_mm, .gap_after = gap_after_mm * units::mm};
}

inline Element turned_round(const Element& element) {
  const auto* const as_thick = std::get_if<Thick>(&element);
  if (as_thick == nullptr) return element;
  Thick turned = *as_thick;
  turned.front = -as_thick->back;
  turned.back = -as_thick->front;
  return turned;
}

/// The same train passed through from behind; aperture, field and object stay as they are.
inline Train reversed(const Train& train) {
  Train back = train;
  const std::size_t count = train.elements.size();
  for (std::size_t i = 0; i < count; ++i) {
    back.elements[i] = turned_round(train.elements[count - 1 - i]);
    const Length gap = i + 1 < count ? gap_after(train.elements[count - 2 - i]) : Length{};
    std::visit([&](auto& element) { element.gap_after = gap; }, back.elements[i]);
  }
  back.stop.element = static_cast<int>(count) + 1 - train.stop.element;
  back.stop.side = train.stop.side == Side::front ? Side::back : Side::front;
  back.stop.offset = -train.stop.offset;
  return back;
}

/// Random numbers and trains, the same on every machine for one seed.
class Draw {
 public:
  explicit Draw(std::uint64_t seed) : engine_(seed) {}

  double between(double low, double high) {
    return low + (high - low) * (static_cast<double>(engine_() >> 11) * 0x1p-53);
  }
  int whole(int low, int high) {
    return low + static_cast<int>(engine_() % static_cast<std::uint64_t>(high - low + 1));
  }
  bool chance(double probability) { return between(0, 1) < probability; }

  Material glass() {
    const double n = between(1.43, 1.95);
    return chance(0.1) ? fixed_index(n) : glass_of(n, between(20, 95), between(0.68, 0.72));
  }
  Element element() {
    const double gap = chance(0.3) ? 0 : between(0, 30);
    const int kind = whole(1, 20);
    if (kind <= 8) return thin(glass(), chance(0.1) ? 0 : between(-0.015, 0.015), gap);
    if (kind <= 10) return diffractive(between(-0.003, 0.003), gap);
    return thick(glass(), curvature(), curvature(), chance(0.1) ? 0 : between(0, 12), gap);
  }
  /// A train of up to `most` elements, whose focus and pupils lie within 3 m.
  Train train(int most = 5) {
    for (;;) {
      Train train = any_train(most);
      if (is_sound(train)) return train;
    }
  }

 private:
  double curvature() { return chance(0.2) ? 0 : between(-0.02, 0.02); }

  Train any_train(int most) {
    std::vector<Element> elements;
    for (int i = whole(1, most); i > 0; --i) elements.push_back(element());
    Train train = train_of(std::move(elements));
    train.aperture = EntrancePupilDiameter{between(1, 20) * units::mm};
    train.field = HalfAngle{between(0.5, 10) * units::deg};
    if (chance(0.5)) train.object_distance = between(50, 3000) * units::mm;
    place_stop(train);
    return train;
  }

  void place_stop(Train& train) {
    Stop& stop = train.stop;
    stop.element = whole(1, static_cast<int>(train.elements.size()));
    const auto e = static_cast<std::size_t>(stop.element - 1);
    stop.side = chance(0.5) ? Side::front : Side::back;
    const double share = chance(0.4) ? 0 : between(0, 1);
    if (stop.side == Side::back) {
      const bool last = e + 1 == train.elements.size();
      stop.offset = share * (last ? 20.0 * units::mm : gap_after(train.elements[e]));
    } else {
      stop.offset = -share * (e == 0 ? 20.0 * units::mm : gap_after(train.elements[e - 1]));
    }
  }

  static bool is_sound(const Train& train) {
    const auto near = [](Length length, double limit_mm) {
      return std::abs(in_mm(length)) < limit_mm;
    };
    try {
      const FirstOrder f = first_order(train);
      return near(f.focal_length, 3000) && !near(f.focal_length, 10) &&
             near(f.image_distance, 3000) && f.entrance_pupil_position &&
             near(*f.entrance_pupil_position, 3000) && f.exit_pupil_position &&
             near(*f.exit_pupil_position, 3000) && f.working_f_number < 1000;
    } catch (const Error&) {
      return false;
    }
  }

  std::mt19937_64 engine_;
};

}  // namespace chromacore::test
