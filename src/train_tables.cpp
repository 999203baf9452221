#include "train_tables.hpp"

#include "train_check.hpp"

namespace chromacore::detail {
namespace {

// The one key of `table`, of three that exclude one another.
std::string only_key(const TableView& table, std::initializer_list<std::string_view> keys) {
  table.allow(keys);
  const std::vector<TomlNode>& items = table.node().items;
  if (items.size() == 1) return items.front().key;
  std::string choices;
  for (const std::string_view key : keys)
    choices += (choices.empty() ? "" : ", ") + std::string(key);
  if (items.empty()) {
    table.fail(ErrorCode::not_set, table.title() + " is empty; give one of: " + choices);
  }
  table.fail(ErrorCode::bad_value,
             table.title() + " has " + items[0].key + " and " + items[1].key + "; give one",
             items[1].key);
}

}  // namespace

Aperture read_aperture(const TableView& table) {
  const std::string key = only_key(table, {"entrance_pupil_diameter_mm", "f_number", "object_na"});
  const double value = table.number(key);
  if (key == "f_number") return FNumber{value};
  if (key == "object_na") return ObjectNa{value};
  return EntrancePupilDiameter{value * units::mm};
}

Field read_field(const TableView& table) {
  const std::string key =
      only_key(table, {"half_angle_deg", "object_height_mm", "image_height_mm"});
  const double value = table.number(key);
  if (key == "object_height_mm") return ObjectHeight{value * units::mm};
  if (key == "image_height_mm") return ImageHeight{value * units::mm};
  return HalfAngle{value * units::deg};
}

Surroundings read_surroundings(const TableView& table) {
  table.allow({"temperature_C", "pressure_Pa", "altitude_m", "humidity", "co2_ppm"});
  Surroundings air;
  if (const auto altitude = table.maybe_number("altitude_m")) {
    if (table.has("pressure_Pa")) {
      table.fail(ErrorCode::bad_value, "pressure_Pa and altitude_m in one table; give one",
                 "altitude_m");
    }
    air = placed(table.place("altitude_m"),
                 [&] { return standard_atmosphere(*altitude * 1000.0 * units::mm); });
  }
  if (const auto t = table.maybe_number("temperature_C")) air.temperature = *t * units::celsius;
  if (const auto p = table.maybe_number("pressure_Pa")) air.pressure = *p * units::Pa;
  air.humidity = table.maybe_number("humidity").value_or(air.humidity);
  air.co2_ppm = table.maybe_number("co2_ppm").value_or(air.co2_ppm);
  placed(table.place(), [&] { check(air); });
  return air;
}

}  // namespace chromacore::detail
