#include "first_order.hpp"

#include "text.hpp"

namespace chromacore::detail {

void throw_no_focus(const Model& model, double power_per_mm) {
  const bool all_thin = [&] {
    for (std::size_t e = 0; e < model.elements(); ++e) {
      if (model.kind(e) == Kind::thick) return false;
    }
    return true;
  }();
  throw Error(ErrorCode::degenerate,
              "no focus: the train's total power is " + number_text(power_per_mm + 0.0, 3) +
                  " per mm; it needs a power other than 0 at the reference wavelength, from " +
                  (all_thin ? "power_per_mm of its elements" : "its radii, powers and gaps"));
}

void throw_image_at_infinity(double object_distance_mm) {
  throw Error(ErrorCode::degenerate,
              "no focus: the object, " + number_text(object_distance_mm, 6) +
                  " mm ahead of the first vertex, lies in the front focal plane and its image at "
                  "infinity; move the object or change the power");
}

void throw_stop_on_object() {
  throw Error(ErrorCode::degenerate,
              "the stop is imaged onto the object, so that no chief ray leaves the axis; place the "
              "stop elsewhere");
}

void throw_pupil_at_infinity(const char* asked_for) {
  throw Error(
      ErrorCode::degenerate,
      std::string("the entrance pupil is at infinity (telecentric in object space), so that "
                  "it has no ") +
          asked_for + "; give object_na and an object or image height");
}

void throw_no_position(const char* pupil) {
  throw Error(ErrorCode::degenerate, std::string("the ") + pupil +
                                         " pupil is at infinity (telecentric), so that it has no "
                                         "position or diameter to require; leave that out");
}

}  // namespace chromacore::detail
