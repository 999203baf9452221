#pragma once
// What a solve varies: from the user's list to scaled variables between bounds, and from variables
// back to a layout of any scalar type.
#include <Eigen/Core>
#include <chromacore/solve.hpp>
#include <cmath>
#include <cstddef>
#include <span>
#include <vector>

#include "model.hpp"
#include "trace.hpp"

namespace chromacore::detail {

class Variables {
 public:
  // Units: powers and curvatures 1/|f|, lengths |f|/10, shapes 1.
  // Throws Error(bad_value): see `solve`; the element is in its place.
  Variables(const Train& train, const Model& model, const std::vector<Vary>& may_vary,
            double focal_length_mm);

  [[nodiscard]] std::size_t size() const { return slots_.size(); }
  [[nodiscard]] double unit(std::size_t i) const { return slots_[i].unit; }
  // In units; the start is within the bounds.
  [[nodiscard]] const Eigen::VectorXd& start() const { return start_; }
  [[nodiscard]] const Eigen::VectorXd& lower() const { return lower_; }
  [[nodiscard]] const Eigen::VectorXd& upper() const { return upper_; }

  // Writes the values (not in units, but in 1/mm, mm) into a layout of this train. False where an
  // element cannot have that power and shape at its thickness.
  template <class T>
  [[nodiscard]] bool write(std::span<const T> values, Layout<T>& layout) const {
    for (std::size_t i = 0; i < slots_.size(); ++i) {
      const Slot& slot = slots_[i];
      ElementLayout<T>& element = layout[slot.element];
      if (slot.bent) continue;
      switch (slot.parameter) {
        case Parameter::power:
          element.power = values[i];
          break;
        case Parameter::curvature_front:
          element.front = values[i];
          break;
        case Parameter::curvature_back:
          element.back = values[i];
          if (slot.joint) layout[slot.element + 1].front = values[i];
          break;
        case Parameter::thickness:
          element.thickness = values[i];
          break;
        case Parameter::gap_after:
          element.gap_after = values[i];
          break;
        case Parameter::shape:
          break;
      }
    }
    for (const Bend& bend : bends_) {
      if (!write_bend(bend, values, layout[bend.element])) return false;
    }
    return true;
  }

 private:
  struct Slot {
    std::size_t element = 0;
    Parameter parameter = Parameter::power;
    bool joint = false;  // the back of this element and the front of the next
    bool bent = false;   // power or shape of a thick element: see `Bend`
    double unit = 1.0;
  };

  static constexpr std::size_t kFixed = static_cast<std::size_t>(-1);
  // A thick element whose power, shape or both vary: both curvatures follow.
  struct Bend {
    std::size_t element = 0;
    double n = 1.0;
    std::size_t power_slot = kFixed;
    std::size_t shape_slot = kFixed;
    double power = 0;
    double shape = 0;
    bool thin_branch = true;
  };

  // With s = c1 - c2 and shape q the power is (n - 1)(s + a s^2), a = t (n - 1)/n (q^2 - 1)/4; of
  // the two roots that of the start, as a rule the one that thin elements have.
  template <class T>
  static bool write_bend(const Bend& bend, std::span<const T> values, ElementLayout<T>& element) {
    using std::sqrt;
    const T power = bend.power_slot == kFixed ? T(bend.power) : values[bend.power_slot];
    const T q = bend.shape_slot == kFixed ? T(bend.shape) : values[bend.shape_slot];
    const T thin = power / (bend.n - 1.0);
    const T a = element.thickness * (q * q - 1.0) * ((bend.n - 1.0) / (4.0 * bend.n));
    const T square = 1.0 + 4.0 * a * thin;
    if (!(value_of(square) > 0.0)) return false;
    const T root = sqrt(square);
    const T s = bend.thin_branch ? T(2.0 * thin / (1.0 + root)) : T((-1.0 - root) / (2.0 * a));
    element.front = s * (q + 1.0) * 0.5;
    element.back = s * (q - 1.0) * 0.5;
    return true;
  }

  void add(const Train& train, const Model& model, const Vary& vary, double focal_length_mm);
  Slot slot_of(const Train& train, const Vary& vary) const;
  void check_apart(const Slot& slot) const;
  double bend_start(const Train& train, const Model& model, const Slot& slot);

  std::vector<Slot> slots_;
  std::vector<Bend> bends_;
  Eigen::VectorXd start_, lower_, upper_;
};

}  // namespace chromacore::detail
