// [band] of a train or a query, and the weight file that it may name.
#include <filesystem>

#include "csv_input.hpp"
#include "text.hpp"
#include "text_file.hpp"
#include "train_tables.hpp"

namespace chromacore::detail {
namespace {

std::string beside(const std::string& file, const std::string& named) {
  return (std::filesystem::path(file).parent_path() / named).string();
}

Line line_of(const CsvTable& csv, std::size_t row) {
  constexpr std::string_view column = "wavelength_um";
  return placed(csv.place(row, column), [&] {
    const std::string text = csv.text(row, column);
    return parse_number(text) ? Line(csv.number(row, column) * units::um)
                              : Line(std::string_view(text));
  });
}

void read_weights(const CsvTable& csv, Band& band) {
  csv.allow({"wavelength_um", "weight"});
  for (std::size_t row = 0; row < csv.rows(); ++row) {
    band.wavelengths.push_back(line_of(csv, row));
    band.weights.push_back(csv.number(row, "weight"));
  }
}

void read_weight_file(const TableView& table, Band& band) {
  const std::string named = table.text("weight_file");
  const std::string path = beside(table.file(), named);
  std::string text;
  try {
    text = read_text_file(path);
  } catch (const Error& error) {
    table.fail(error.code(), "weight_file \"" + named + "\": " + error.message(), "weight_file");
  }
  const CsvTable csv(text, path);
  read_weights(csv, band);
  placed({.file = path}, [&] { check(band); });
}

void read_list(const TableView& table, Band& band) {
  band.wavelengths = table.lines("wavelengths_um");
  if (table.has("weights")) band.weights = table.numbers("weights");
  placed(table.place("wavelengths_um"), [&] {
    Band without_weights = band;
    without_weights.weights.clear();
    check(without_weights);
  });
  placed(table.place("weights"), [&] { check(band); });
}

void read_range(const TableView& table, Band& band) {
  const std::vector<Line> ends = table.lines("ends_um");
  if (ends.size() != 2) {
    table.fail(ErrorCode::bad_value,
               "ends_um needs two wavelengths; it has " + std::to_string(ends.size()), "ends_um");
  }
  const int samples = table.integer("samples");
  band = placed(table.place(samples < 2 ? "samples" : "ends_um"),
                [&] { return Band::of_range(ends[0], ends[1], samples, band.reference); });
}

// The way that the wavelengths are given in; keys that belong to another one are refused.
std::string_view way_of(const TableView& table) {
  std::string_view way;
  for (const std::string_view key : {"wavelengths_um", "ends_um", "weight_file"}) {
    if (!table.has(key)) continue;
    if (!way.empty()) {
      table.fail(ErrorCode::bad_value,
                 std::string(way) + " and " + std::string(key) + " in one [band]; give one", key);
    }
    way = key;
  }
  if (way.empty()) {
    table.fail(ErrorCode::not_set,
               "[band] has no wavelengths; give wavelengths_um, ends_um and samples, or "
               "weight_file");
  }
  return way;
}

void refuse_stray(const TableView& table, std::string_view way, std::string_view key,
                  std::string_view owner) {
  if (!table.has(key) || way == owner) return;
  table.fail(
      ErrorCode::bad_value,
      std::string(key) + " goes with " + std::string(owner) + ", not with " + std::string(way),
      key);
}

}  // namespace

Band read_band(const TableView& table) {
  table.allow({"reference_um", "wavelengths_um", "weights", "ends_um", "samples", "weight_file"});
  Band band;
  band.reference = table.line("reference_um");
  const std::string_view way = way_of(table);
  refuse_stray(table, way, "weights", "wavelengths_um");
  refuse_stray(table, way, "samples", "ends_um");
  if (way == "wavelengths_um") read_list(table, band);
  if (way == "ends_um") read_range(table, band);
  if (way == "weight_file") read_weight_file(table, band);
  return band;
}

ErrorPlace wavelength_place(const TableView& band, std::size_t index) {
  if (band.has("wavelengths_um")) return band.place("wavelengths_um", index);
  return band.place(band.has("ends_um") ? "ends_um" : "weight_file");
}

}  // namespace chromacore::detail
