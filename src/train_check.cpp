#include "train_check.hpp"

#include <chromacore/error.hpp>
#include <cmath>
#include <string>

#include "text.hpp"

namespace chromacore::detail {
namespace {

[[noreturn]] void refuse(const std::string& message) { throw Error(ErrorCode::bad_value, message); }

void check_value(bool fits, std::string_view name, double value, std::string_view expected) {
  if (fits) return;
  refuse(std::string(name) + " is " + number_text(value) + "; expected " + std::string(expected));
}

bool has_infinite_object(const Train& train) { return std::isinf(in_mm(train.object_distance)); }

// ---- aperture and field, one overload each ----

void check_one(std::monostate, const Train&) {}

void check_one(const EntrancePupilDiameter& a, const Train&) {
  check_positive("entrance_pupil_diameter_mm", in_mm(a.value));
}

void check_one(const FNumber& a, const Train&) { check_positive("f_number", a.value); }

void check_one(const ObjectNa& a, const Train& train) {
  check_value(a.value > 0 && a.value < 1, "object_na", a.value, "a number between 0 and 1");
  if (!has_infinite_object(train)) return;
  refuse(
      "object_na needs an object at a distance; for one at infinity give "
      "entrance_pupil_diameter_mm or f_number");
}

void check_one(const HalfAngle& f, const Train&) {
  check_value(std::abs(in_deg(f.value)) < 90, "half_angle_deg", in_deg(f.value),
              "a number between -90 and 90");
}

void check_one(const ObjectHeight& f, const Train& train) {
  check_finite("object_height_mm", in_mm(f.value));
  if (!has_infinite_object(train)) return;
  refuse(
      "object_height_mm needs an object at a distance; for one at infinity give half_angle_deg "
      "or image_height_mm");
}

void check_one(const ImageHeight& f, const Train&) {
  check_finite("image_height_mm", in_mm(f.value));
}

// ---- elements ----

void check_material(const Material& material) {
  if (!material.is_set()) throw Error(ErrorCode::not_set, "no material");
}

void check_kind(const Thin& e) {
  check_material(e.material);
  check_finite("power_per_mm", in_per_mm(e.power));
}

void check_kind(const Thick& e) {
  check_material(e.material);
  check_finite("curvatures_per_mm[1]", in_per_mm(e.front));
  check_finite("curvatures_per_mm[2]", in_per_mm(e.back));
  check_not_negative("thickness_mm", in_mm(e.thickness));
  if (e.clear_diameter) check_positive("clear_diameter_mm", in_mm(*e.clear_diameter));
}

void check_kind(const Diffractive& e) { check_finite("power_per_mm", in_per_mm(e.power)); }

std::string radius_text(Curvature c) {
  return c == flat ? "inf" : number_text(1.0 / in_per_mm(c), 10);
}

void check_joint(const Thick& e, const Element* next) {
  if (!e.cemented) return;
  const auto* const after = next == nullptr ? nullptr : std::get_if<Thick>(next);
  if (after == nullptr) refuse("cemented, but no element with two radii follows");
  if (e.gap_after != Length{}) {
    refuse("cemented to the next element, but gap_after_mm is " + number_text(in_mm(e.gap_after)) +
           "; expected 0");
  }
  if (e.back == after->front) return;
  refuse("cemented to the next element, but the radii of the joint are " + radius_text(e.back) +
         " and " + radius_text(after->front) + " mm; expected equal ones");
}

void check_whole_element(const Train& train, std::size_t e) {
  const Element& element = train.elements[e];
  std::visit([](const auto& kind) { check_kind(kind); }, element);
  check_not_negative("gap_after_mm", in_mm(gap_after(element)));
  const Element* const next = e + 1 < train.elements.size() ? &train.elements[e + 1] : nullptr;
  if (const auto* const thick = std::get_if<Thick>(&element)) check_joint(*thick, next);
}

// ---- stop ----

std::string stop_text(const Stop& stop) {
  return "stop: offset_mm is " + number_text(in_mm(stop.offset)) + " from the " +
         (stop.side == Side::front ? "front" : "back") + " of element " +
         std::to_string(stop.element);
}

// How far the gap before the front, or behind the back, of the stop's element reaches.
double room_for_stop(const Train& train) {
  const auto e = static_cast<std::size_t>(train.stop.element - 1);
  if (train.stop.side == Side::front) {
    return e == 0 ? in_mm(train.object_distance) : in_mm(gap_after(train.elements[e - 1]));
  }
  const bool last = e + 1 == train.elements.size();
  return last ? in_mm(infinity) : in_mm(gap_after(train.elements[e]));
}

}  // namespace

void check_finite(std::string_view name, double value) {
  check_value(std::isfinite(value), name, value, "a finite number");
}

void check_not_negative(std::string_view name, double value) {
  check_value(value >= 0 && std::isfinite(value), name, value, "a finite number, 0 or more");
}

void check_positive(std::string_view name, double value) {
  check_value(value > 0 && std::isfinite(value), name, value, "a positive finite number");
}

Curvature curvature_of_radius(std::string_view name, double radius_mm) {
  if (radius_mm == 0 || std::isnan(radius_mm)) {
    refuse(std::string(name) + " is " + number_text(radius_mm) +
           "; a radius is a number other than 0, or inf for flat");
  }
  if (std::isinf(radius_mm)) return flat;
  return 1.0 / radius_mm * units::per_mm;
}

void check_object(const Train& train) {
  const double distance = in_mm(train.object_distance);
  check_value(distance > 0, "distance_mm", distance,
              "a positive number, or inf for an object at infinity");
}

void check_aperture(const Train& train) {
  if (std::holds_alternative<std::monostate>(train.aperture)) {
    throw Error(ErrorCode::not_set,
                "no aperture; give entrance_pupil_diameter_mm, f_number or object_na");
  }
  std::visit([&](const auto& a) { check_one(a, train); }, train.aperture);
}

void check_field(const Train& train) {
  if (std::holds_alternative<std::monostate>(train.field)) {
    throw Error(ErrorCode::not_set,
                "no field; give half_angle_deg, object_height_mm or image_height_mm");
  }
  std::visit([&](const auto& f) { check_one(f, train); }, train.field);
}

void check_detector(const Train& train) {
  if (train.pixel) check_positive("pixel_um", in_mm(*train.pixel) * 1000);
}

void check_stop(const Train& train) {
  const Stop& stop = train.stop;
  const std::size_t count = train.elements.size();
  if (stop.element < 1 || static_cast<std::size_t>(stop.element) > count) {
    refuse("stop: element is " + std::to_string(stop.element) + "; the train has elements 1 to " +
           std::to_string(count));
  }
  const double offset = in_mm(stop.offset);
  check_finite("stop: offset_mm", offset);
  const double outwards = stop.side == Side::front ? -offset : offset;
  const bool thick =
      std::holds_alternative<Thick>(train.elements[static_cast<std::size_t>(stop.element - 1)]);
  if (outwards < 0) {
    refuse(stop_text(stop) + ", " + (thick ? "inside it" : "on its other side") +
           "; expected a place in the gap " +
           (stop.side == Side::front ? "before it, 0 or less" : "behind it, 0 or more"));
  }
  const double room = room_for_stop(train);
  if (outwards <= room) return;
  refuse(stop_text(stop) + ", past its neighbour; the gap there is " + number_text(room) + " mm");
}

const Material* material_of(const Element& element) {
  if (const auto* const thin = std::get_if<Thin>(&element)) return &thin->material;
  if (const auto* const thick = std::get_if<Thick>(&element)) return &thick->material;
  return nullptr;
}

void check_element(const Train& train, std::size_t e) {
  try {
    check_whole_element(train, e);
  } catch (const Error& error) {
    throw error.within({.element = static_cast<int>(e + 1)});
  }
}

}  // namespace chromacore::detail
