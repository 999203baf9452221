// Materials as JSON.
#include <chromacore/result_json.hpp>

#include "json_text.hpp"
#include "material_text.hpp"

namespace chromacore {
namespace detail {
namespace {

// Some figures are there only where the source covers what they are made from.
struct Figures {
  std::optional<double> n_ref = {};
  std::optional<double> v = {};
  std::optional<double> p_ref_long = {};
  std::optional<double> abbe_number = {};
  std::optional<double> deviation = {};
};

Figures figures_of(const Material& material, const Band& band) {
  static const Band visible = Band::of_lines({"F", "d", "C"}, "d");
  static const Band blue_to_red = Band::of_lines({"g", "F", "d", "C"}, "d");
  Figures f;
  if (covers(material, band)) {
    f.n_ref = index(material, band.reference.wavelength());
    f.v = v_number(material, band);
    f.p_ref_long = partial_dispersion(material, {band.reference, band.longest()}, band);
  }
  if (covers(material, visible)) f.abbe_number = abbe_number(material);
  if (covers(material, blue_to_red)) f.deviation = deviation_from_normal_line(material);
  return f;
}

Json thermal_json(const std::optional<ThermalCoefficients>& t) {
  if (!t) return nullptr;
  return {{"d0_per_K", t->d0},     {"d1_per_K2", t->d1},     {"d2_per_K3", t->d2},
          {"e0_um2_per_K", t->e0}, {"e1_um2_per_K2", t->e1}, {"lambda_tk_um", t->lambda_tk_um}};
}

std::string reason_for(const std::string& key, const Material& material) {
  const bool of_dispersion = key == "n_ref" || key == "v" || key == "p_ref_long" ||
                             key == "abbe_number" || key == "deviation_from_normal_line";
  if (of_dispersion) return "its source does not cover the lines, or it has no dispersion";
  if (key == "range_um") return "one index for every wavelength";
  if (key == "maker" || key == "code" || key == "axis") return "it has none";
  if (key == "thermal" && material.data().thermal_constant) return "its dn/dT is a constant";
  return "its source does not state it";
}

Json range_json(const MaterialData& data) {
  const double longest = in_um(data.longest);
  return std::isfinite(longest) ? Json({in_um(data.shortest), longest}) : Json(nullptr);
}

Json material_json(const Material& material, const Band& band) {
  const MaterialData& data = material.data();
  const Figures f = figures_of(material, band);
  const auto& constant = data.thermal_constant;
  Json result = {
      {"name", data.name},
      {"maker", json_text(data.maker)},
      {"code", json_text(data.code)},
      {"status", to_string(data.status)},
      {"n_ref", json_number(f.n_ref)},
      {"v", json_number(f.v)},
      {"p_ref_long", json_number(f.p_ref_long)},
      {"abbe_number", json_number(f.abbe_number)},
      {"deviation_from_normal_line", json_number(f.deviation)},
      {"range_um", range_json(data)},
      {"form", to_string(data.form)},
      {"coefficients", data.coefficients},
      {"index_relative_to", word(data.index_relative_to)},
      {"wavelength_in", word(data.wavelength_in)},
      {"temperature_C", in_celsius(data.temperature)},
      {"thermal", thermal_json(data.thermal)},
      {"dn_dt_per_K", constant ? json_number(constant->dn_dt_per_K) : Json(nullptr)},
      {"dn_dt_relative_to", constant ? Json(word(constant->relative_to)) : Json(nullptr)},
      {"expansion_per_K", json_number(data.expansion_per_K)},
      {"density_kg_m3", json_number(data.density_kg_m3)},
      {"axis", json_text(data.axis)},
      {"cautions", data.cautions},
      {"notes", data.notes},
      {"source", json_text(data.source)}};
  Json why = Json::object();
  for (const auto& [key, value] : result.items()) {
    if (value.is_null()) why[key] = reason_for(key, material);
  }
  result["why"] = std::move(why);
  return result;
}

}  // namespace
}  // namespace detail

std::string to_json(const std::vector<Material>& materials, const Band& band) {
  using namespace detail;
  check(band);
  const Json wavelengths =
      json_list(band.wavelengths, [](const Line& line) { return Json(in_um(line.wavelength())); });
  const Json list = json_list(materials, [&](const Material& m) { return material_json(m, band); });
  return written({{"format", json_format},
                  {"reference_um", in_um(band.reference.wavelength())},
                  {"wavelengths_um", wavelengths},
                  {"materials", list}});
}

}  // namespace chromacore
