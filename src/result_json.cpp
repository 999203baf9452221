#include <chromacore/result_json.hpp>

#include "json_text.hpp"
#include "train_check.hpp"

namespace chromacore {
namespace detail {
namespace {

Json numbers(const std::vector<Length>& values) {
  Json list = Json::array();
  for (const Length& value : values) list.push_back(json_number(value));
  return list;
}

Json wavelengths(const std::vector<Line>& lines) {
  Json list = Json::array();
  for (const Line& line : lines) list.push_back(in_um(line.wavelength()));
  return list;
}

Json first_order_json(const FirstOrder& f) {
  return {{"focal_length_mm", json_number(f.focal_length)},
          {"back_focal_distance_mm", json_number(f.back_focal_distance)},
          {"image_distance_mm", json_number(f.image_distance)},
          {"f_number", json_number(f.f_number)},
          {"working_f_number", json_number(f.working_f_number)},
          {"magnification", json_number(f.magnification)},
          {"entrance_pupil_position_mm", json_number(f.entrance_pupil_position)},
          {"entrance_pupil_diameter_mm", json_number(f.entrance_pupil_diameter)},
          {"exit_pupil_position_mm", json_number(f.exit_pupil_position)},
          {"lagrange_invariant_mm", json_number(f.lagrange_invariant)},
          {"petzval_per_mm", json_number(in_per_mm(f.petzval))},
          {"track_length_mm", json_number(f.track_length)}};
}

Json material_name_json(const Element& element, const Catalog& catalog) {
  const Material* material = material_of(element);
  return material == nullptr ? Json(nullptr) : json_text(catalog.shortest_name(*material));
}

Json element_json(const ElementColor& e) {
  return {{"element", e.element},
          {"material", nullptr},  // in `elements_json`
          {"power_per_mm", json_number(in_per_mm(e.power))},
          {"v", json_number(e.v)},
          {"p_ref_long", json_number(e.p_ref_long)},
          {"abbe_number", json_number(e.abbe_number)},
          {"marginal_height_mm", json_number(e.marginal_height)},
          {"chief_height_mm", json_number(e.chief_height)},
          {"axial_sum_mm", json_number(e.axial_sum)},
          {"lateral_sum_mm", json_number(e.lateral_sum)}};
}

Json elements_json(const Train& train, const Analysis& a, const Catalog& catalog) {
  Json list = json_list(a.elements, element_json);
  for (std::size_t e = 0; e < list.size(); ++e) {
    list[e]["material"] = material_name_json(train.elements[e], catalog);
  }
  return list;
}

Json surface_json(const SurfaceColor& s) {
  return {{"element", s.element},
          {"radius_mm", json_number(1.0 / in_per_mm(s.curvature))},
          {"marginal_height_mm", json_number(s.marginal_height)},
          {"chief_height_mm", json_number(s.chief_height)},
          {"axial_sum_mm", json_number(s.axial_sum)},
          {"lateral_sum_mm", json_number(s.lateral_sum)}};
}

Json totals_json(const ColorTotals& t) {
  return {{"axial_color_mm", json_number(t.axial_color)},
          {"lateral_color_mm", json_number(t.lateral_color)},
          {"axial_sum_mm", json_number(t.axial_sum)},
          {"lateral_sum_mm", json_number(t.lateral_sum)},
          {"secondary_axial_sum_mm", json_number(t.secondary_axial_sum)},
          {"secondary_lateral_sum_mm", json_number(t.secondary_lateral_sum)},
          {"axial_color_from_sums_mm", json_number(t.axial_color_from_sums)},
          {"lateral_color_from_sums_mm", json_number(t.lateral_color_from_sums)},
          {"secondary_axial_mm", json_number(t.secondary_axial)},
          {"secondary_lateral_mm", json_number(t.secondary_lateral)},
          {"rms_focus_mm", json_number(t.rms_focus)}};
}

Json curves_json(const Curves& c) {
  return {{"wavelength_um", wavelengths(c.wavelengths)},
          {"focus_difference_mm", numbers(c.focus_difference)},
          {"lateral_difference_mm", numbers(c.lateral_difference)},
          {"focal_length_mm", numbers(c.focal_length)}};
}

void add_maybe(Json& object, const char* key, const std::optional<double>& value) {
  if (value) object[key] = json_number(*value);
}

Json requirement_json(const RequirementResult& result) {
  const Requirement& r = result.requirement;
  Json object = {{"quantity", to_string(r.quantity)}};
  if (r.between) object["between_um"] = wavelengths({r.between->first, r.between->second});
  if (r.element != 0) object["element"] = r.element;
  object["value"] = json_number(result.value);
  add_maybe(object, "target", r.target);
  add_maybe(object, "at_least", r.at_least);
  add_maybe(object, "at_most", r.at_most);
  add_maybe(object, "budget", r.budget);
  object["spent"] = json_number(result.spent());
  return object;
}

// ---- why something is null ----

std::string reason_for(const std::string& key) {
  if (key == "material") return "a diffractive surface has no material";
  if (key == "radius_mm") return "the surface is flat";
  return "infinite or undefined";
}

// A reason for each null of the object at `path` that has none yet.
void explain_nulls(const Json& object, const std::string& path, Json& why) {
  for (const auto& [key, value] : object.items()) {
    if (value.is_null() && !why.contains(path + key)) why[path + key] = reason_for(key);
  }
}

void explain_nulls_of_list(const Json& list, const std::string& name, Json& why) {
  for (std::size_t i = 0; i < list.size(); ++i) {
    explain_nulls(list[i], name + '[' + std::to_string(i) + "].", why);
  }
}

Json why_json(const Json& result, const Analysis& analysis) {
  Json why = Json::object();
  for (const auto& [key, reason] : analysis.why) why[key] = reason;
  explain_nulls(result["first_order"], "", why);
  explain_nulls(result["totals"], "", why);
  for (const char* name : {"elements", "surfaces", "requirements"}) {
    explain_nulls_of_list(result[name], name, why);
  }
  return why;
}

// ---- whole results ----

Json analysis_json(const Train& train, const Analysis& a, const Catalog& catalog) {
  Json result = {{"format", json_format},
                 {"name", train.name},
                 {"reference_um", in_um(train.band.reference.wavelength())},
                 {"first_order", first_order_json(a)},
                 {"elements", elements_json(train, a, catalog)},
                 {"surfaces", json_list(a.surfaces, surface_json)},
                 {"totals", totals_json(a)},
                 {"curves", curves_json(a.curves)},
                 {"requirements", json_list(a.requirements, requirement_json)},
                 {"notes", a.notes}};
  result["why"] = why_json(result, a);
  return result;
}

Json varied_json(const Varied& v) {
  return {{"element", v.vary.element},
          {"parameter", to_string(v.vary.parameter)},
          {"value", json_number(v.value)},
          {"at_bound", v.at_bound}};
}

Json solution_json(const Solution& s) {
  return {{"status", to_string(s.status)},
          {"cost", json_number(s.cost)},
          {"iterations", s.iterations},
          {"why", s.why},
          {"varied", json_list(s.varied, varied_json)}};
}

}  // namespace
}  // namespace detail

std::string to_json(const Train& train, const Analysis& analysis, const Catalog& catalog) {
  return detail::written(detail::analysis_json(train, analysis, catalog));
}

std::string to_json(const Solution& solution, const Catalog& catalog) {
  detail::Json result = detail::analysis_json(solution.train, solution.analysis, catalog);
  result["solution"] = detail::solution_json(solution);
  return detail::written(result);
}

}  // namespace chromacore
