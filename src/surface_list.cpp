// A surface list, as engineers keep it, as a train.
#include <chromacore/train_file.hpp>
#include <filesystem>

#include "csv_input.hpp"
#include "text.hpp"
#include "text_file.hpp"
#include "train_check.hpp"
#include "train_tables.hpp"

namespace chromacore {
namespace detail {
namespace {

Material read_material(const CsvTable& csv, std::size_t row, const Catalog& catalog) {
  const std::string name = csv.text_or_empty(row, "material");
  if (name.empty() || lower_case(name) == "air") return {};
  return placed(csv.place(row, "material"), [&] { return catalog.at(name); });
}

bool read_stop(const CsvTable& csv, std::size_t row) {
  const std::string mark = csv.text_or_empty(row, "stop");
  if (mark.empty() || mark == "stop") return !mark.empty();
  csv.fail(ErrorCode::bad_value,
           "stop is \"" + mark + "\"; expected \"stop\" in the stop's row and nothing elsewhere",
           row, "stop");
}

// The last thickness has no effect and may be left out.
Length read_thickness(const CsvTable& csv, std::size_t row) {
  constexpr std::string_view column = "thickness_mm";
  constexpr bool infinite_allowed = true;  // of the object's row; elsewhere the walk refuses it
  if (row + 1 == csv.rows()) {
    return csv.maybe_number(row, column, infinite_allowed).value_or(0) * units::mm;
  }
  return csv.number(row, column, infinite_allowed) * units::mm;
}

Surface read_surface(const CsvTable& csv, std::size_t row, const Catalog& catalog) {
  Surface surface;
  const double radius_mm = csv.number(row, "radius_mm", true);
  surface.curvature = placed(csv.place(row, "radius_mm"),
                             [&] { return curvature_of_radius("radius_mm", radius_mm); });
  surface.thickness_after = read_thickness(csv, row);
  surface.material_after = read_material(csv, row, catalog);
  if (const auto diameter = csv.maybe_number(row, "clear_diameter_mm")) {
    placed(csv.place(row, "clear_diameter_mm"),
           [&] { check_positive("clear_diameter_mm", *diameter); });
    surface.clear_diameter = *diameter * units::mm;
  }
  surface.is_stop = read_stop(csv, row);
  return surface;
}

void check_columns(const CsvTable& csv, const std::string& file) {
  csv.allow({"radius_mm", "thickness_mm", "material", "clear_diameter_mm", "stop"});
  for (const std::string_view column : {"radius_mm", "thickness_mm", "material"}) {
    if (csv.has(column)) continue;
    throw Error(ErrorCode::not_set,
                "no column " + std::string(column) +
                    "; expected radius_mm,thickness_mm,material,clear_diameter_mm",
                {.file = file});
  }
  if (csv.rows() == 0) throw Error(ErrorCode::not_set, "no surface", {.file = file});
}

}  // namespace
}  // namespace detail

TrainFile parse_surfaces(std::string_view text, const Catalog& catalog, const std::string& file) {
  const detail::CsvTable csv(text, file);
  detail::check_columns(csv, file);
  std::vector<Surface> surfaces;
  for (std::size_t row = 0; row < csv.rows(); ++row) {
    surfaces.push_back(detail::read_surface(csv, row, catalog));
  }
  TrainFile out;
  std::size_t at = 0;
  try {
    out.train = detail::train_from_surfaces(surfaces, at);
  } catch (const Error& error) {
    throw error.within(csv.place(at));
  }
  out.train.name = std::filesystem::path(file).stem().string();
  out.train.band = Band::of_lines({"F", "d", "C"}, "d");
  out.train.aperture = FNumber{10};
  out.train.field = HalfAngle{1.0 * units::deg};
  out.assumed = {.band = true, .aperture = true, .field = true};
  detail::placed({.file = file}, [&] { check(out.train); });
  return out;
}

TrainFile read_surfaces(const std::string& path, const Catalog& catalog) {
  return parse_surfaces(detail::read_text_file(path), catalog, path);
}

}  // namespace chromacore
