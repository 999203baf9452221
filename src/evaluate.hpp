#pragma once
// Values of requirements for any scalar type: analysis takes double, the solver takes Jets.
#include <chromacore/color.hpp>
#include <cstddef>
#include <limits>
#include <span>
#include <vector>

#include "first_order.hpp"

namespace chromacore::detail {

// C_I and C_II.
template <class T>
struct Sums {
  T axial{};
  T lateral{};
};

// A pair of wavelengths as places in the model.
struct PlacePair {
  std::size_t first = 0;
  std::size_t second = 0;
};

// Calls `at_surface(element, side, marginal, chief, sums)` for each surface: rays ahead of it at
// the reference wavelength, and its part of the sums over the pair.
template <class T, class AtSurface>
void for_each_surface_sum(const Model& model, const Layout<T>& layout, const Reference<T>& r,
                          const PlacePair& pair, AtSurface&& at_surface) {
  Ray<T> marginal = r.marginal;
  Ray<T> chief = r.chief;
  for_each_vertex(
      model, layout, 0, [&](std::size_t e, Side side, const T& power, const T& reduced) {
        Sums<T> sums;
        if (model.kind(e) == Kind::thick) {
          // A = n(u + y c) is the same on both sides; D(dn/n) is dn/n entering the glass.
          const bool front = side == Side::front;
          const double n = model.index(0, e);
          const double n_before = front ? 1.0 : n;
          const T c = (front ? layout[e].front : layout[e].back) * n_before;
          const double step = (model.index(pair.first, e) - model.index(pair.second, e)) / n;
          const T weight = marginal.y * (front ? step : -step);
          sums.axial = (marginal.w + marginal.y * c) * weight;
          sums.lateral = (chief.w + chief.y * c) * weight;
        } else {
          const double step =
              model.relative_power(pair.first, e) - model.relative_power(pair.second, e);
          const T weight = marginal.y * layout[e].power * step;
          sums.axial = marginal.y * weight;
          sums.lateral = chief.y * weight;
        }
        at_surface(e, side, marginal, chief, sums);
        refract(marginal, power);
        refract(chief, power);
        transfer(marginal, reduced);
        transfer(chief, reduced);
      });
}

// Of one element, or of all of them.
inline constexpr std::size_t kAllElements = std::numeric_limits<std::size_t>::max();

template <class T>
[[nodiscard]] Sums<T> color_sums(const Model& model, const Layout<T>& layout, const Reference<T>& r,
                                 const PlacePair& pair, std::size_t element) {
  Sums<T> total{T(0.0), T(0.0)};
  for_each_surface_sum(model, layout, r, pair,
                       [&](std::size_t e, Side, const Ray<T>&, const Ray<T>&, const Sums<T>& s) {
                         if (element != kAllElements && e != element) return;
                         total.axial = total.axial + s.axial;
                         total.lateral = total.lateral + s.lateral;
                       });
  return total;
}

// sum |phi_i| / |phi|.
template <class T>
[[nodiscard]] T strength(const Model& model, const Layout<T>& layout, const T& focal_length) {
  using std::abs;
  T sum(0.0);
  for (std::size_t e = 0; e < layout.size(); ++e) {
    sum = sum + abs(element_power(model, layout, e));
  }
  return sum * abs(focal_length);
}

// A requirement with its lines looked up.
struct Asked {
  Quantity quantity = Quantity::focal_length;
  PlacePair pair = {};
  std::size_t element = kAllElements;
};

// Values at one layout. It keeps each wavelength's trace, so that several requirements at the same
// lines cost one; nothing is allocated after the first call.
template <class T>
class Evaluator {
 public:
  explicit Evaluator(const Model& model)
      : model_(model), traced_(model.wavelengths()), known_(model.wavelengths()) {}

  // Traces the reference wavelength; the others follow when they are asked for.
  // Throws Error(degenerate) where there is no focus or no pupil.
  void at(const Layout<T>& layout) {
    layout_ = &layout;
    reference_ = reference_of(model_, layout);
    traced_[0] = reference_.traced;
    known_.assign(known_.size(), false);
    known_[0] = true;
  }

  [[nodiscard]] const Reference<T>& reference() const { return reference_; }

  [[nodiscard]] const Traced<T>& traced(std::size_t w) {
    if (!known_[w]) {
      traced_[w] = trace_train(model_, *layout_, w);
      known_[w] = true;
    }
    return traced_[w];
  }

  [[nodiscard]] T focus(std::size_t w) {
    return image_distance(traced(w).whole, model_.vergence());
  }
  // Chief-ray height in the reference image plane.
  [[nodiscard]] T lateral(std::size_t w) {
    return chief_height(traced(w), model_.vergence(), reference_.object_point,
                        reference_.image_distance);
  }
  // Infinite where the train has no power.
  [[nodiscard]] T focal_length(std::size_t w) {
    return detail::focal_length(model_, *layout_, traced(w).whole, w);
  }

  [[nodiscard]] T value(const Asked& asked) {
    switch (asked.quantity) {
      case Quantity::axial_color:
        return focus(asked.pair.first) - focus(asked.pair.second);
      case Quantity::lateral_color:
        return lateral(asked.pair.first) - lateral(asked.pair.second);
      case Quantity::secondary_axial:
        return focus(0) - (focus(asked.pair.first) + focus(asked.pair.second)) * 0.5;
      case Quantity::secondary_lateral:
        return lateral(0) - (lateral(asked.pair.first) + lateral(asked.pair.second)) * 0.5;
      case Quantity::axial_sum:
        return sums(asked).axial;
      case Quantity::lateral_sum:
        return sums(asked).lateral;
      default:
        return first_order_value(asked.quantity);
    }
  }

 private:
  [[nodiscard]] Sums<T> sums(const Asked& asked) const {
    return color_sums(model_, *layout_, reference_, asked.pair, asked.element);
  }

  [[nodiscard]] T first_order_value(Quantity quantity) const {
    switch (quantity) {
      case Quantity::image_distance:
        return reference_.image_distance;
      case Quantity::track_length:
        return vertex_length(*layout_) + reference_.image_distance;
      case Quantity::magnification:
        return magnification(reference_.traced.whole, model_.vergence());
      case Quantity::petzval:
        return petzval_sum(model_, *layout_);
      case Quantity::entrance_pupil_position:
        return entrance_pupil_position(reference_.traced.to_stop);
      case Quantity::exit_pupil_position:
        return exit_pupil_position(reference_.traced);
      default:
        return value_of_focal_length(quantity);
    }
  }

  // Those that a train without power does not have, even where it has an image.
  [[nodiscard]] T value_of_focal_length(Quantity quantity) const {
    using std::abs;
    const System<T>& whole = reference_.traced.whole;
    if (!has_power(reference_)) throw_no_focus(model_, -value_of(whole.from_height.w));
    switch (quantity) {
      case Quantity::focal_length:
        return reference_.focal_length;
      case Quantity::back_focal_distance:
        return image_distance(whole, 0.0);
      case Quantity::f_number:
        return abs(reference_.focal_length) / entrance_pupil_diameter(reference_);
      case Quantity::strength:
        return strength(model_, *layout_, reference_.focal_length);
      default:
        throw Error(ErrorCode::internal, "no value for this quantity");
    }
  }

  const Model& model_;
  const Layout<T>* layout_ = nullptr;
  Reference<T> reference_;
  std::vector<Traced<T>> traced_;
  std::vector<char> known_;
};

// Lines of all requirements that are not the band's, for the model.
[[nodiscard]] std::vector<Line> lines_of(const Train& train,
                                         const std::vector<Requirement>& required);
[[nodiscard]] Asked look_up(const Model& model, const Train& train, const Requirement& requirement);

// A requirement's budget, its own or the default (see `Requirement::budget`).
// Throws Error(not_set) where there is neither.
[[nodiscard]] double budget_of(const Requirement& requirement, const Train& train,
                               double working_f_number);

// (value - target)/budget, or the overshoot over the budget.
template <class T>
[[nodiscard]] T residual(const Requirement& requirement, double budget, const T& value) {
  if (requirement.target) return (value - *requirement.target) / budget;
  if (requirement.at_least && value_of(value) < *requirement.at_least) {
    return (value - *requirement.at_least) / budget;
  }
  if (requirement.at_most && value_of(value) > *requirement.at_most) {
    return (value - *requirement.at_most) / budget;
  }
  return T(0.0);
}

}  // namespace chromacore::detail
