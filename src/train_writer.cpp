#include <algorithm>
#include <chromacore/error.hpp>
#include <chromacore/train_file.hpp>
#include <cmath>

#include "material_text.hpp"
#include "toml_text.hpp"
#include "train_check.hpp"

namespace chromacore {
namespace detail {
namespace {

constexpr std::string_view assumed_comment = "assumed: replace it by yours";

std::string comment_if(bool assumed) { return std::string(assumed ? assumed_comment : ""); }

// ---- tables in the file's order ----

std::string head_text(const Train& train) {
  TomlTable table("");
  table.add("format", "1");
  if (!train.name.empty()) table.add("name", toml_string(train.name));
  return table.text();
}

std::string band_text(const Band& band, bool assumed) {
  std::vector<std::string> lines;
  for (const Line& line : band.wavelengths) lines.push_back(toml_line(line));
  TomlTable table("[band]");
  table.add("reference_um", toml_line(band.reference), comment_if(assumed));
  table.add("wavelengths_um", toml_list(lines), comment_if(assumed));
  if (!band.weights.empty()) table.add("weights", toml_numbers(band.weights));
  return table.text();
}

struct KeyAndValue {
  std::string key = {};
  double value = 0;
};

KeyAndValue given(std::monostate) { return {}; }
KeyAndValue given(const EntrancePupilDiameter& a) {
  return {"entrance_pupil_diameter_mm", in_mm(a.value)};
}
KeyAndValue given(const FNumber& a) { return {"f_number", a.value}; }
KeyAndValue given(const ObjectNa& a) { return {"object_na", a.value}; }
KeyAndValue given(const HalfAngle& f) { return {"half_angle_deg", in_deg(f.value)}; }
KeyAndValue given(const ObjectHeight& f) { return {"object_height_mm", in_mm(f.value)}; }
KeyAndValue given(const ImageHeight& f) { return {"image_height_mm", in_mm(f.value)}; }

// [aperture] or [field].
template <class Choice>
std::string choice_text(std::string header, const Choice& choice, bool assumed) {
  const KeyAndValue row = std::visit([](const auto& c) { return given(c); }, choice);
  TomlTable table(std::move(header));
  table.add(row.key, toml_number(row.value), comment_if(assumed));
  return table.text();
}

std::string object_and_stop_text(const Train& train) {
  TomlTable object("[object]");
  object.add("distance_mm", in_mm(train.object_distance));
  TomlTable stop("[stop]");
  stop.add("element", std::to_string(train.stop.element));
  stop.add("side", toml_string(train.stop.side == Side::front ? "front" : "back"));
  stop.add("offset_mm", in_mm(train.stop.offset));
  return object.text() + stop.text();
}

std::string detector_text(Length pixel) {
  const double mm = in_mm(pixel);
  const std::string um =
      number_that_becomes(mm, mm * 1000.0, [](double pixel_um) { return pixel_um / 1000.0; });
  TomlTable table("[detector]");
  table.add("pixel_um", um.empty() ? toml_number(mm * 1000.0) : um);
  return table.text();
}

std::string surroundings_text(const Surroundings& air) {
  TomlTable table("[surroundings]");
  table.add("temperature_C", in_celsius(air.temperature));
  table.add("pressure_Pa", in_Pa(air.pressure));
  table.add("humidity", air.humidity);
  table.add("co2_ppm", air.co2_ppm);
  return table.text();
}

// ---- elements ----

// The radius that reads back to exactly this curvature; "" where no double does.
std::string radius_text(Curvature curvature) {
  const double c = in_per_mm(curvature);
  if (c == 0) return "inf";
  return number_that_becomes(c, 1.0 / c, [](double r) { return 1.0 / r; });
}

void add_curvatures(TomlTable& table, const Thick& e) {
  const std::vector<std::string> radii = {radius_text(e.front), radius_text(e.back)};
  if (radii[0].empty() || radii[1].empty()) {
    table.add("curvatures_per_mm", toml_numbers({in_per_mm(e.front), in_per_mm(e.back)}));
  } else {
    table.add("radii_mm", toml_list(radii));
  }
}

void add_gap(TomlTable& table, Length gap) {
  if (gap != Length{}) table.add("gap_after_mm", in_mm(gap));
}

void add_element(TomlTable& table, const Thin& e, const Catalog& catalog) {
  table.add("material", toml_string(catalog.shortest_name(e.material)));
  table.add("power_per_mm", in_per_mm(e.power));
  add_gap(table, e.gap_after);
}

void add_element(TomlTable& table, const Thick& e, const Catalog& catalog) {
  table.add("material", toml_string(catalog.shortest_name(e.material)));
  add_curvatures(table, e);
  table.add("thickness_mm", in_mm(e.thickness));
  if (e.clear_diameter) table.add("clear_diameter_mm", in_mm(*e.clear_diameter));
  add_gap(table, e.gap_after);
  if (e.cemented) table.add("cemented", "true");
}

void add_element(TomlTable& table, const Diffractive& e, const Catalog&) {
  table.add("kind", toml_string("diffractive"));
  table.add("power_per_mm", in_per_mm(e.power));
  add_gap(table, e.gap_after);
}

std::string element_text(const Element& element, const Catalog& catalog) {
  TomlTable table("[[element]]");
  std::visit([&](const auto& e) { add_element(table, e, catalog); }, element);
  return table.text();
}

// ---- what may vary, what is required ----

void add_bound(TomlTable& table, std::string key, double value) {
  if (std::isfinite(value)) table.add(std::move(key), value);
}

std::string vary_text(const Vary& vary) {
  TomlTable table("[[vary]]");
  table.add("element", std::to_string(vary.element));
  table.add("parameter", toml_string(to_string(vary.parameter)));
  add_bound(table, "min", vary.min);
  add_bound(table, "max", vary.max);
  return table.text();
}

void add_maybe(TomlTable& table, std::string key, const std::optional<double>& value) {
  if (value) table.add(std::move(key), *value);
}

std::string requirement_text(const Requirement& r) {
  TomlTable table("[[require]]");
  table.add("quantity", toml_string(to_string(r.quantity)));
  if (r.element != 0) table.add("element", std::to_string(r.element));
  if (r.between) {
    table.add("between_um", toml_list({toml_line(r.between->first), toml_line(r.between->second)}));
  }
  add_maybe(table, "target", r.target);
  add_maybe(table, "at_least", r.at_least);
  add_maybe(table, "at_most", r.at_most);
  add_maybe(table, "budget", r.budget);
  return table.text();
}

// ---- materials ----

bool is_in(std::span<const Material> materials, const Material& material) {
  return std::any_of(materials.begin(), materials.end(),
                     [&](const Material& m) { return &m.record() == &material.record(); });
}

// Those that a reader with `catalog` would not know, each once.
std::vector<Material> own_materials(const Train& train, const Catalog& catalog) {
  std::vector<Material> own;
  for (const Element& element : train.elements) {
    const Material* const material = material_of(element);
    if (material == nullptr || is_in(catalog.materials(), *material) || is_in(own, *material)) {
      continue;
    }
    own.push_back(*material);
  }
  return own;
}

}  // namespace
}  // namespace detail

std::string train_text(const TrainFile& file, const Catalog& catalog) {
  using namespace detail;
  const Train& train = file.train;
  check(train);
  Catalog known = catalog;
  const std::vector<Material> own = own_materials(train, catalog);
  for (const Material& material : own) known.add(material);
  std::string text = head_text(train) + band_text(train.band, file.assumed.band) +
                     choice_text("[aperture]", train.aperture, file.assumed.aperture) +
                     choice_text("[field]", train.field, file.assumed.field) +
                     object_and_stop_text(train);
  if (train.pixel) text += detector_text(*train.pixel);
  if (train.surroundings) text += surroundings_text(*train.surroundings);
  for (const Element& element : train.elements) text += element_text(element, known);
  for (const Material& material : own) text += material_text(material);
  for (const Vary& vary : file.may_vary) text += vary_text(vary);
  for (const Requirement& requirement : file.required) text += requirement_text(requirement);
  text.pop_back();  // the empty line at the end
  return text;
}

}  // namespace chromacore
