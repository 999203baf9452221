#include <chromacore/error.hpp>
#include <cmath>
#include <string>
#include <utility>

#include "train_check.hpp"

namespace chromacore::detail {
namespace {

bool same(const Material& a, const Material& b) { return &a.record() == &b.record(); }

std::optional<Length> larger(std::optional<Length> a, std::optional<Length> b) {
  if (!a || !b) return a ? a : b;
  return *a < *b ? b : a;
}

// Walks along the surfaces: air until one opens a glass, then glass until one closes it.
class SurfaceWalk {
 public:
  void step(const Surface& s) {
    if (open_) {
      step_out_of_glass(s);
    } else if (s.material_after.is_set()) {
      step_into_glass(s);
    } else {
      step_in_air(s);
    }
  }

  Train finish() {
    if (open_) {
      refuse("glass (" + open_->material.full_name() +
             ") behind the last surface; expected a list that ends in the surroundings");
    }
    if (train_.elements.empty()) throw Error(ErrorCode::not_set, "the surfaces make no element");
    return std::move(train_);
  }

 private:
  [[noreturn]] static void refuse(const std::string& message) {
    throw Error(ErrorCode::bad_value, message);
  }

  // An object row: flat, in air, infinitely far ahead.
  bool is_object_at_infinity(const Surface& s) const {
    return train_.elements.empty() && distance_ == Length{} && !s.is_stop &&
           in_mm(s.thickness_after) == in_mm(infinity);
  }

  void step_in_air(const Surface& s) {
    if (s.curvature != flat) refuse("a curved surface between equal media (the surroundings)");
    if (is_object_at_infinity(s)) return;
    if (s.is_stop) {
      const int elements = static_cast<int>(train_.elements.size());
      set_stop(elements == 0 ? Stop{.element = 1, .side = Side::front, .offset = distance_}
                             : Stop{.element = elements, .side = Side::back, .offset = distance_});
      stop_leads_ = elements == 0;
    }
    walk_on(s);
  }

  void step_into_glass(const Surface& s) {
    if (train_.elements.empty()) {
      if (stop_leads_) train_.stop.offset -= distance_;  // it counted from the first row
    } else {
      std::get<Thick>(train_.elements.back()).gap_after = distance_;
    }
    if (s.is_stop) {
      set_stop({.element = static_cast<int>(train_.elements.size()) + 1, .side = Side::front});
    }
    open(s);
  }

  void step_out_of_glass(const Surface& s) {
    open_->back = s.curvature;
    open_->clear_diameter = larger(open_->clear_diameter, s.clear_diameter);
    open_->cemented = s.material_after.is_set();
    if (open_->cemented && same(open_->material, s.material_after) && s.curvature != flat) {
      refuse("a curved surface between equal media (" + open_->material.full_name() + ")");
    }
    train_.elements.emplace_back(*std::exchange(open_, std::nullopt));
    if (s.is_stop) {
      set_stop({.element = static_cast<int>(train_.elements.size()), .side = Side::back});
    }
    distance_ = Length{};
    s.material_after.is_set() ? open(s) : walk_on(s);
  }

  void open(const Surface& s) {
    check_not_negative("thickness_mm", in_mm(s.thickness_after));
    open_ = Thick{.material = s.material_after,
                  .front = s.curvature,
                  .thickness = s.thickness_after,
                  .clear_diameter = s.clear_diameter};
  }

  void walk_on(const Surface& s) {
    check_not_negative("thickness_mm", in_mm(s.thickness_after));
    distance_ += s.thickness_after;
  }

  void set_stop(const Stop& stop) {
    if (has_stop_) refuse("a second stop; expected one at most");
    has_stop_ = true;
    train_.stop = stop;
  }

  Train train_;
  std::optional<Thick> open_;
  Length distance_{};  // in air, since the last glass or the first row
  bool has_stop_ = false;
  bool stop_leads_ = false;  // ahead of the first element
};

}  // namespace

Train train_from_surfaces(std::span<const Surface> surfaces, std::size_t& at) {
  if (surfaces.empty()) throw Error(ErrorCode::not_set, "no surface");
  SurfaceWalk walk;
  try {
    for (at = 0; at < surfaces.size(); ++at) walk.step(surfaces[at]);
    at = surfaces.size() - 1;
    return walk.finish();
  } catch (const Error& error) {
    throw Error(error.code(), "surface " + std::to_string(at + 1) + ": " + error.message());
  }
}

}  // namespace chromacore::detail
