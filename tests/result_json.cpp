// JSON: the keys that scripts rely on, their order, null and why. That it is valid under the
// schemas: check_schema.py.
#include <doctest/doctest.h>

#include <chromacore/result_json.hpp>
#include <chromacore/train_file.hpp>
#include <nlohmann/json.hpp>

using namespace chromacore;
using namespace chromacore::units;

namespace {

using Json = nlohmann::ordered_json;
using Keys = std::vector<std::string>;

const Catalog& catalog() {
  static const Catalog built_in = Catalog::built_in();
  return built_in;
}

Keys keys(const Json& object) {
  Keys names;
  for (const auto& item : object.items()) names.push_back(item.key());
  return names;
}

constexpr const char* head = R"(format = 1
name = "a pair"
[band]
reference_um   = "d"
wavelengths_um = ["F", 0.55, "C"]
[aperture]
entrance_pupil_diameter_mm = 20
[field]
half_angle_deg = 2
)";

constexpr const char* thick_and_diffractive = R"([[element]]
material = "N-BK7"
radii_mm = [50, inf]
thickness_mm = 4
[[element]]
kind = "diffractive"
power_per_mm = 0.0005
[[require]]
quantity = "focal_length_mm"
at_least = 80
at_most = 90
budget = 1
[[require]]
quantity = "axial_color_mm"
between_um = ["F", 0.6]
target = 0
[[require]]
quantity = "lateral_sum_mm"
element = 1
target = 0
budget = 0.01
)";

Json analyzed(const std::string& text) {
  const TrainFile file = parse_train(text, catalog());
  return Json::parse(to_json(file.train, analyze(file.train, file.required)));
}

}  // namespace

TEST_CASE("to_json: the keys of an analysis, in the contract's order") {
  const Json json = analyzed(std::string(head) + thick_and_diffractive);
  CHECK(keys(json) == Keys{"format", "name", "reference_um", "first_order", "elements", "surfaces",
                           "totals", "curves", "requirements", "notes", "why"});
  CHECK(keys(json["first_order"]) ==
        Keys{"focal_length_mm", "back_focal_distance_mm", "image_distance_mm", "f_number",
             "working_f_number", "magnification", "entrance_pupil_position_mm",
             "entrance_pupil_diameter_mm", "exit_pupil_position_mm", "lagrange_invariant_mm",
             "petzval_per_mm", "track_length_mm"});
  CHECK(keys(json["elements"][0]) == Keys{"element", "material", "power_per_mm", "v", "p_ref_long",
                                          "abbe_number", "marginal_height_mm", "chief_height_mm",
                                          "axial_sum_mm", "lateral_sum_mm"});
  CHECK(keys(json["surfaces"][0]) == Keys{"element", "radius_mm", "marginal_height_mm",
                                          "chief_height_mm", "axial_sum_mm", "lateral_sum_mm"});
  CHECK(keys(json["totals"]) == Keys{"axial_color_mm", "lateral_color_mm", "axial_sum_mm",
                                     "lateral_sum_mm", "secondary_axial_sum_mm",
                                     "secondary_lateral_sum_mm", "axial_color_from_sums_mm",
                                     "lateral_color_from_sums_mm", "secondary_axial_mm",
                                     "secondary_lateral_mm", "rms_focus_mm"});
  CHECK(keys(json["curves"]) ==
        Keys{"wavelength_um", "focus_difference_mm", "lateral_difference_mm", "focal_length_mm"});
}

TEST_CASE("to_json: each key of a requirement where it applies") {
  const Json required = analyzed(std::string(head) + thick_and_diffractive)["requirements"];
  REQUIRE(required.size() == 3);
  CHECK(keys(required[0]) == Keys{"quantity", "value", "at_least", "at_most", "budget", "spent"});
  CHECK(keys(required[1]) == Keys{"quantity", "between_um", "value", "target", "budget", "spent"});
  CHECK(required[1]["between_um"] == Json({0.4861327, 0.6}));
  CHECK(keys(required[2]) == Keys{"quantity", "element", "value", "target", "budget", "spent"});
  CHECK(required[2]["element"] == 1);
}

TEST_CASE("to_json: wavelengths are numbers in um, whatever the file has") {
  const Json json = analyzed(std::string(head) + thick_and_diffractive);
  CHECK(json["reference_um"] == 0.5875618);
  CHECK(json["curves"]["wavelength_um"] == Json({0.4861327, 0.55, 0.6562725}));
}

TEST_CASE("to_json: numbers read back to the last bit") {
  const TrainFile file = parse_train(std::string(head) + thick_and_diffractive, catalog());
  const Analysis analysis = analyze(file.train, file.required);
  const Json json = Json::parse(to_json(file.train, analysis));
  CHECK(json["first_order"]["focal_length_mm"].get<double>() == in_mm(analysis.focal_length));
  CHECK(json["totals"]["rms_focus_mm"].get<double>() == in_mm(analysis.rms_focus));
  CHECK(json["surfaces"][0]["radius_mm"].get<double>() == 50);
}

TEST_CASE("to_json: what is null has its reason") {
  const Json json = analyzed(std::string(head) + thick_and_diffractive);
  CHECK(json["surfaces"][1]["radius_mm"].is_null());
  CHECK(json["why"]["surfaces[1].radius_mm"] == "the surface is flat");
  CHECK(json["elements"][1]["material"].is_null());
  CHECK(json["why"]["elements[1].material"] == "a diffractive surface has no material");
  CHECK(json["why"].size() == 2);
}

TEST_CASE("to_json: a telecentric train has no exit pupil, and says why") {
  const Json json = analyzed(std::string(head) + R"([stop]
offset_mm = -100
[[element]]
material = "N-BK7"
power_per_mm = 0.01
)");
  CHECK(json["first_order"]["exit_pupil_position_mm"].is_null());
  CHECK(json["why"]["exit_pupil_position_mm"] ==
        "the exit pupil is at infinity (telecentric in image space)");
}

TEST_CASE("to_json: a material of one line has neither V nor P") {
  const Json json = analyzed(std::string(head) + R"([[element]]
material = "constant"
power_per_mm = 0.01
[[material]]
name = "constant"
lines_um = ["d"]
indices = [1.5]
)");
  CHECK(json["elements"][0]["v"].is_null());
  CHECK(json["elements"][0]["p_ref_long"].is_null());
  CHECK(json["why"].contains("elements[0].v"));
  CHECK(json["why"].contains("elements[0].p_ref_long"));
  CHECK(json["notes"].is_array());
}

TEST_CASE("to_json: a name that is no UTF-8 does not break the answer") {
  TrainFile file = parse_train(std::string(head) + thick_and_diffractive, catalog());
  file.train.name = std::string(1, static_cast<char>(0xFF));
  CHECK(Json::parse(to_json(file.train, analyze(file.train)))["name"] == "\xEF\xBF\xBD");
}

TEST_CASE("to_json: a solution stands beside the analysis of the solved train") {
  Solution solution;
  const TrainFile file = parse_train(std::string(head) + thick_and_diffractive, catalog());
  solution.train = file.train;
  solution.analysis = analyze(file.train, file.required);
  solution.status = SolveStatus::infeasible;
  solution.why = "equal V";
  solution.iterations = 3;
  solution.varied = {
      {.vary = {.element = 2, .parameter = Parameter::power}, .value = 0.1, .at_bound = true}};
  const Json json = Json::parse(to_json(solution));
  CHECK(keys(json).back() == "solution");
  CHECK(json["solution"].dump() ==
        R"({"status":"infeasible","cost":null,"iterations":3,"why":"equal V","varied":)"
        R"([{"element":2,"parameter":"power_per_mm","value":0.1,"at_bound":true}]})");
  Json rest = json;
  rest.erase("solution");
  CHECK(rest == Json::parse(to_json(file.train, solution.analysis)));
}

TEST_CASE("to_json: materials, each with what its source states") {
  const Band infrared = Band::of_lines({8.0 * um, 10.0 * um, 12.0 * um}, 10.0 * um);
  const Json json = Json::parse(to_json({catalog().at("N-BK7")}, infrared));
  CHECK(keys(json) == Keys{"format", "reference_um", "wavelengths_um", "materials"});
  const Json& glass = json["materials"].at(0);
  CHECK(glass["name"] == "N-BK7");
  CHECK(glass["maker"] == "SCHOTT");
  CHECK(glass["form"] == "sellmeier_squared");
  CHECK(glass["v"].is_null());
  CHECK(glass["why"]["v"] == "its source does not cover the lines, or it has no dispersion");
  CHECK(glass["abbe_number"].is_number());
  CHECK(glass["range_um"] == Json({0.3, 2.5}));
  for (const auto& [key, value] : glass.items())
    CHECK(value.is_null() == glass["why"].contains(key));
}
