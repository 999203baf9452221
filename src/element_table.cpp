// [[element]] of a train.
#include <array>

#include "train_check.hpp"
#include "train_tables.hpp"

namespace chromacore::detail {
namespace {

enum class Shape { thin, thick, diffractive };

std::string_view name_of(Shape shape) {
  switch (shape) {
    case Shape::thin:
      return "a thin element (power_per_mm)";
    case Shape::thick:
      return "a thick element (radii_mm or curvatures_per_mm)";
    case Shape::diffractive:
      return "a diffractive surface";
  }
  return "";
}

bool has_surfaces(const TableView& table) {
  return table.has("radii_mm") || table.has("curvatures_per_mm");
}

Shape shape_from_figures(const TableView& table) {
  if (has_surfaces(table)) return Shape::thick;
  if (table.has("power_per_mm")) return Shape::thin;
  table.fail(ErrorCode::not_set,
             "no figures; give power_per_mm (thin), or radii_mm and thickness_mm (thick)");
}

Shape shape_of(const TableView& table) {
  const std::optional<std::string> kind = table.maybe_text("kind");
  if (!kind) return shape_from_figures(table);
  if (*kind == "thin") return Shape::thin;
  if (*kind == "thick") return Shape::thick;
  if (*kind == "diffractive") return Shape::diffractive;
  if (*kind == "mirror") {
    table.fail(ErrorCode::bad_value, "kind is \"mirror\"; this version has no mirrors yet", "kind");
  }
  table.fail(ErrorCode::bad_value,
             "kind is \"" + *kind +
                 "\"; expected \"diffractive\", or leave it out for a refracting element",
             "kind");
}

void refuse(const TableView& table, Shape shape,
            std::initializer_list<std::string_view> keys_of_others) {
  for (const std::string_view key : keys_of_others) {
    if (!table.has(key)) continue;
    table.fail(ErrorCode::bad_value,
               std::string(key) + " does not belong to " + std::string(name_of(shape)), key);
  }
}

Material read_material(const TableView& table, const Catalog& catalog) {
  const std::string name = table.text("material");
  return placed(table.place("material"), [&] { return catalog.at(name); });
}

Length length_not_negative(const TableView& table, std::string_view key, double value) {
  placed(table.place(key), [&] { check_not_negative(key, value); });
  return value * units::mm;
}

Length read_gap(const TableView& table) {
  const double gap = table.maybe_number("gap_after_mm").value_or(0);
  return length_not_negative(table, "gap_after_mm", gap);
}

Power read_power(const TableView& table) { return table.number("power_per_mm") * units::per_mm; }

// Front and back, from whichever of the two keys is there.
std::array<Curvature, 2> read_curvatures(const TableView& table) {
  const bool radii = table.has("radii_mm");
  const std::string_view key = radii ? "radii_mm" : "curvatures_per_mm";
  if (radii && table.has("curvatures_per_mm")) {
    table.fail(ErrorCode::bad_value, "radii_mm and curvatures_per_mm in one element; give one",
               "curvatures_per_mm");
  }
  const auto values = table.numbers(key, radii ? Infinite::allowed : Infinite::refused);
  if (values.size() != 2) {
    table.fail(ErrorCode::bad_value,
               std::string(key) + " needs two values, front and back; it has " +
                   std::to_string(values.size()) +
                   (values.size() > 2 ? "; a decimal comma? numbers have a decimal point" : ""),
               key);
  }
  std::array<Curvature, 2> curvatures;
  for (std::size_t i = 0; i < 2; ++i) {
    const std::string name = std::string(key) + '[' + std::to_string(i + 1) + ']';
    curvatures[i] = placed(table.place(key, i), [&] {
      return radii ? curvature_of_radius(name, values[i]) : values[i] * units::per_mm;
    });
  }
  return curvatures;
}

Thin read_thin(const TableView& table, const Catalog& catalog) {
  refuse(table, Shape::thin,
         {"radii_mm", "curvatures_per_mm", "thickness_mm", "clear_diameter_mm", "cemented"});
  return {.material = read_material(table, catalog),
          .power = read_power(table),
          .gap_after = read_gap(table)};
}

Thick read_thick(const TableView& table, const Catalog& catalog) {
  refuse(table, Shape::thick, {"power_per_mm"});
  const auto [front, back] = read_curvatures(table);
  Thick thick{.material = read_material(table, catalog), .front = front, .back = back};
  thick.thickness = length_not_negative(table, "thickness_mm", table.number("thickness_mm"));
  if (const auto diameter = table.maybe_number("clear_diameter_mm")) {
    placed(table.place("clear_diameter_mm"),
           [&] { check_positive("clear_diameter_mm", *diameter); });
    thick.clear_diameter = *diameter * units::mm;
  }
  thick.gap_after = read_gap(table);
  thick.cemented = table.maybe_boolean("cemented").value_or(false);
  return thick;
}

Diffractive read_diffractive(const TableView& table) {
  refuse(table, Shape::diffractive,
         {"material", "radii_mm", "curvatures_per_mm", "thickness_mm", "clear_diameter_mm",
          "cemented"});
  return {.power = read_power(table), .gap_after = read_gap(table)};
}

}  // namespace

Element read_element(const TableView& table, const Catalog& catalog) {
  table.allow({"kind", "material", "power_per_mm", "radii_mm", "curvatures_per_mm", "thickness_mm",
               "clear_diameter_mm", "gap_after_mm", "cemented"});
  switch (shape_of(table)) {
    case Shape::thin:
      return read_thin(table, catalog);
    case Shape::thick:
      return read_thick(table, catalog);
    case Shape::diffractive:
      return read_diffractive(table);
  }
  throw Error(ErrorCode::internal, "an element of no kind");
}

}  // namespace chromacore::detail
