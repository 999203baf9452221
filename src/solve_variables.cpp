#include "solve_variables.hpp"

#include <algorithm>
#include <chromacore/error.hpp>
#include <string>

#include "text.hpp"

namespace chromacore::detail {
namespace {

[[noreturn]] void refuse(std::size_t element, const std::string& message) {
  throw Error(ErrorCode::bad_value, message, {.element = static_cast<int>(element) + 1});
}

std::string name_of(Parameter parameter) { return std::string(to_string(parameter)); }

bool is_length(Parameter parameter) {
  return parameter == Parameter::thickness || parameter == Parameter::gap_after;
}

bool is_curvature(Parameter parameter) {
  return parameter == Parameter::curvature_front || parameter == Parameter::curvature_back;
}

const Thick* thick(const Train& train, std::size_t e) {
  return std::get_if<Thick>(&train.elements[e]);
}

bool cemented_behind(const Train& train, std::size_t e) {
  const Thick* element = thick(train, e);
  return element != nullptr && element->cemented;
}

bool cemented_ahead(const Train& train, std::size_t e) {
  return e > 0 && cemented_behind(train, e - 1);
}

void check_gap(const Train& train, std::size_t e) {
  if (e + 1 == train.elements.size()) {
    refuse(e, "gap_after_mm cannot vary: behind the last element it has no effect");
  }
  if (cemented_behind(train, e)) {
    refuse(e, "gap_after_mm cannot vary: it is cemented to the next, and their gap stays 0");
  }
}

void check_bend(const Train& train, std::size_t e, Parameter parameter) {
  if (cemented_ahead(train, e) || cemented_behind(train, e)) {
    refuse(e, name_of(parameter) +
                  " cannot vary: a cemented face ties it to its neighbour; vary "
                  "curvature_front_per_mm or curvature_back_per_mm instead");
  }
  if (thick(train, e)->front == thick(train, e)->back) {
    refuse(e, name_of(parameter) +
                  " cannot vary: with two equal curvatures it has no shape, (c1 + c2)/(c1 - c2); "
                  "vary a curvature instead");
  }
}

void check_parameter(const Train& train, std::size_t e, Parameter parameter) {
  if (parameter == Parameter::gap_after) return check_gap(train, e);
  if (thick(train, e) == nullptr) {
    if (parameter == Parameter::power) return;
    refuse(e, "it has no " + name_of(parameter) +
                  ", being without thickness; power_per_mm and gap_after_mm are what it has");
  }
  if (parameter == Parameter::power || parameter == Parameter::shape) {
    check_bend(train, e, parameter);
  }
}

void check_bounds(std::size_t e, const Vary& vary) {
  const auto fail = [&](const std::string& what) {
    refuse(e, name_of(vary.parameter) + ": " + what);
  };
  if (std::isnan(vary.min) || std::isnan(vary.max)) fail("a bound is not a number");
  if (vary.min > vary.max) {
    fail("min " + number_text(vary.min) + " is above max " + number_text(vary.max));
  }
  if (std::isinf(vary.min) && vary.min > 0) fail("min is inf; leave it out for none");
  if (std::isinf(vary.max) && vary.max < 0) fail("max is -inf; leave it out for none");
  if (is_length(vary.parameter) && vary.max < 0) {
    fail("max is " + number_text(vary.max) + "; a length is never below 0");
  }
}

// A stop that floats in a gap keeps its place.
double least_gap(const Train& train, std::size_t e) {
  const double offset = in_mm(train.stop.offset);
  const std::size_t element = static_cast<std::size_t>(train.stop.element) - 1;
  if (train.stop.side == Side::back && element == e) return std::max(0.0, offset);
  if (train.stop.side == Side::front && element == e + 1) return std::max(0.0, -offset);
  return 0.0;
}

double least_value(const Train& train, std::size_t e, const Vary& vary) {
  if (vary.parameter == Parameter::thickness) return std::max(0.0, vary.min);
  if (vary.parameter == Parameter::gap_after) return std::max(least_gap(train, e), vary.min);
  return vary.min;
}

double present_value(const ElementLayout<double>& element, Parameter parameter) {
  switch (parameter) {
    case Parameter::power:
      return element.power;
    case Parameter::curvature_front:
      return element.front;
    case Parameter::curvature_back:
      return element.back;
    case Parameter::thickness:
      return element.thickness;
    case Parameter::gap_after:
      return element.gap_after;
    case Parameter::shape:
      break;
  }
  return (element.front + element.back) / (element.front - element.back);
}

void append(Eigen::VectorXd& to, double value) {
  to.conservativeResize(to.size() + 1);
  to[to.size() - 1] = value;
}

}  // namespace

Variables::Variables(const Train& train, const Model& model, const std::vector<Vary>& may_vary,
                     double focal_length_mm) {
  for (const Vary& vary : may_vary) add(train, model, vary, std::abs(focal_length_mm));
}

void Variables::add(const Train& train, const Model& model, const Vary& vary,
                    double focal_length_mm) {
  if (vary.element < 1 || vary.element > static_cast<int>(train.elements.size())) {
    throw Error(ErrorCode::bad_value, "cannot vary " + name_of(vary.parameter) + " of element " +
                                          std::to_string(vary.element) + "; the train has " +
                                          std::to_string(train.elements.size()));
  }
  const std::size_t named = static_cast<std::size_t>(vary.element) - 1;
  check_parameter(train, named, vary.parameter);
  check_bounds(named, vary);
  Slot slot = slot_of(train, vary);
  check_apart(slot);
  slot.unit = is_length(slot.parameter)            ? focal_length_mm / 10.0
              : slot.parameter == Parameter::shape ? 1.0
                                                   : 1.0 / focal_length_mm;
  const double value = slot.bent ? bend_start(train, model, slot)
                                 : present_value(layout_of(train)[slot.element], slot.parameter);
  const double least = least_value(train, named, vary);
  if (least > vary.max) {
    refuse(named, "gap_after_mm: max is " + number_text(vary.max) + ", but the stop stands " +
                      number_text(least) + " mm into the gap");
  }
  append(start_, std::clamp(value, least, vary.max) / slot.unit);
  append(lower_, least / slot.unit);
  append(upper_, vary.max / slot.unit);
  slots_.push_back(slot);
}

// A joint is the back of the element ahead of it, whichever face was named.
Variables::Slot Variables::slot_of(const Train& train, const Vary& vary) const {
  Slot slot;
  slot.element = static_cast<std::size_t>(vary.element) - 1;
  slot.parameter = vary.parameter;
  if (vary.parameter == Parameter::curvature_front && cemented_ahead(train, slot.element)) {
    --slot.element;
    slot.parameter = Parameter::curvature_back;
  }
  slot.joint = slot.parameter == Parameter::curvature_back && cemented_behind(train, slot.element);
  slot.bent = thick(train, slot.element) != nullptr &&
              (slot.parameter == Parameter::power || slot.parameter == Parameter::shape);
  return slot;
}

void Variables::check_apart(const Slot& slot) const {
  for (const Slot& other : slots_) {
    if (other.element != slot.element) continue;
    if (other.parameter == slot.parameter) {
      refuse(slot.element,
             slot.joint ? "its cemented joint to the next is named twice; it moves as one, so vary "
                          "one of its faces"
                        : name_of(slot.parameter) + " is to vary twice; name it once");
    }
    if ((other.bent && is_curvature(slot.parameter)) ||
        (slot.bent && is_curvature(other.parameter))) {
      refuse(slot.element, name_of(other.parameter) + " and " + name_of(slot.parameter) +
                               " cannot both vary: power and shape move both curvatures");
    }
  }
}

double Variables::bend_start(const Train& train, const Model& model, const Slot& slot) {
  const ElementLayout<double> element = layout_of(train)[slot.element];
  auto known = std::find_if(bends_.begin(), bends_.end(),
                            [&](const Bend& bend) { return bend.element == slot.element; });
  if (known == bends_.end()) {
    Bend bend;
    bend.element = slot.element;
    bend.n = model.index(0, slot.element);
    bend.power = thick_power(element, bend.n);
    bend.shape = present_value(element, Parameter::shape);
    const double bent = element.thickness * element.front * element.back * (1.0 - 1.0 / bend.n);
    bend.thin_branch = 1.0 + 2.0 * bent / (element.front - element.back) > 0.0;
    bends_.push_back(bend);
    known = bends_.end() - 1;
  }
  const bool is_power = slot.parameter == Parameter::power;
  (is_power ? known->power_slot : known->shape_slot) = slots_.size();
  return is_power ? known->power : known->shape;
}

}  // namespace chromacore::detail
