// Reads a train file. What the tables hold is in train_tables.hpp; here is how they fit together.
#include <chromacore/train_file.hpp>
#include <set>
#include <utility>

#include "material_table.hpp"
#include "text_file.hpp"
#include "toml_input.hpp"
#include "train_check.hpp"
#include "train_tables.hpp"

namespace chromacore {
namespace detail {
namespace {

constexpr int format_read = 1;

Side side_of(const TableView& table) {
  const std::string side = table.maybe_text("side").value_or("front");
  if (side == "front") return Side::front;
  if (side == "back") return Side::back;
  table.fail(ErrorCode::bad_value, "side is \"" + side + "\"; expected \"front\" or \"back\"",
             "side");
}

class TrainReader {
 public:
  TrainReader(const TomlNode& root, const std::string& file, const Catalog& catalog)
      : file_(root, file), catalog_(catalog) {}

  TrainFile read() {
    check_format();
    file_.allow({"format", "name", "band", "aperture", "field", "object", "stop", "detector",
                 "surroundings", "element", "material", "vary", "require"});
    train().name = file_.maybe_text("name").value_or("");
    read_materials();
    train().band = read_band(file_.table("band"));
    read_elements();
    read_conjugates();
    check_fit();
    read_requirements();
    out_.may_vary = read_may_vary(file_, train());
    return std::move(out_);
  }

 private:
  Train& train() { return out_.train; }

  void check_format() const {
    if (file_.node().items.empty()) {
      file_.fail(ErrorCode::not_set, "the file is empty; a train file begins with format = 1");
    }
    const int format = file_.integer("format");
    if (format == format_read) return;
    file_.fail(ErrorCode::bad_value,
               "format is " + std::to_string(format) + "; this version reads format " +
                   std::to_string(format_read),
               "format");
  }

  void read_materials() {
    for (const TableView& table : file_.tables("material")) {
      const Material material = read_material_table(table);
      placed(table.place("name"), [&] { catalog_.add(material); });
    }
  }

  void read_elements() {
    element_tables_ = file_.tables("element");
    if (element_tables_.empty()) {
      file_.fail(ErrorCode::not_set, "the train has no element; expected [[element]] tables");
    }
    for (TableView& table : element_tables_) {
      table.set_element(static_cast<int>(train().elements.size()) + 1);
      train().elements.push_back(read_element(table, catalog_));
    }
  }

  void read_conjugates() {
    const auto object = file_.maybe_table("object");
    if (object) {
      object->allow({"distance_mm"});
      const auto distance = object->maybe_number("distance_mm", Infinite::allowed);
      if (distance) train().object_distance = *distance * units::mm;
      placed(object->place("distance_mm"), [&] { check_object(train()); });
    }
    const TableView aperture = file_.table("aperture");
    train().aperture = read_aperture(aperture);
    placed(first_place(aperture), [&] { check_aperture(train()); });
    const TableView field = file_.table("field");
    train().field = read_field(field);
    placed(first_place(field), [&] { check_field(train()); });
    if (const auto detector = file_.maybe_table("detector")) read_detector(*detector);
    if (const auto table = file_.maybe_table("surroundings")) {
      train().surroundings = read_surroundings(*table);
    }
  }

  static ErrorPlace first_place(const TableView& table) {
    return table.place(table.node().items.front().key);
  }

  void read_detector(const TableView& table) {
    table.allow({"pixel_um"});
    if (const auto pixel = table.maybe_number("pixel_um")) {
      train().pixel = *pixel / 1000.0 * units::mm;
    }
    placed(table.place("pixel_um"), [&] { check_detector(train()); });
  }

  // What needs more than one table: joints, the stop's place, the sources' ranges.
  void check_fit() {
    for (std::size_t e = 0; e < element_tables_.size(); ++e) {
      placed(element_tables_[e].place(), [&] { check_element(train(), e); });
    }
    read_stop();
    check_ranges();
    placed({.file = file_.file()}, [&] { check(train()); });
  }

  void read_stop() {
    const auto table = file_.maybe_table("stop");
    if (!table) return;
    table->allow({"element", "side", "offset_mm"});
    train().stop = {.element = table->maybe_integer("element").value_or(1),
                    .side = side_of(*table),
                    .offset = table->maybe_number("offset_mm").value_or(0) * units::mm};
    const bool inside = train().stop.element >= 1 &&
                        train().stop.element <= static_cast<int>(train().elements.size());
    placed(table->place(inside ? "offset_mm" : "element"), [&] { check_stop(train()); });
  }

  // Calls `look(e, material)` for each material, at the first element that is made of it.
  template <class Look>
  void for_each_material(Look look) {
    std::set<const Material::Record*> seen;
    for (std::size_t e = 0; e < train().elements.size(); ++e) {
      const Material* const material = material_of(train().elements[e]);
      if (material != nullptr && seen.insert(&material->record()).second) look(e, *material);
    }
  }

  // Whether the source of each material covers `line`, which stands at `place`.
  void check_range(const Line& line, const ErrorPlace& place) {
    for_each_material([&](std::size_t e, const Material& material) {
      ErrorPlace of_element = place;
      of_element.element = static_cast<int>(e) + 1;
      placed(of_element, [&] { static_cast<void>(index(material, line.wavelength())); });
    });
  }

  void check_ranges() {
    const TableView table = file_.table("band");
    const Band& band = train().band;
    check_range(band.reference, table.place("reference_um"));
    for (std::size_t i = 0; i < band.wavelengths.size(); ++i) {
      check_range(band.wavelengths[i], wavelength_place(table, i));
    }
    const auto surroundings = file_.maybe_table("surroundings");
    if (!surroundings) return;
    placed(surroundings->place(), [&] {
      static_cast<void>(air_index(band.reference.wavelength(), *train().surroundings));
    });
    for_each_material([&](std::size_t e, const Material& material) {
      placed(element_tables_[e].place("material"), [&] {
        static_cast<void>(index(material, band.reference.wavelength(), *train().surroundings));
      });
    });
  }

  void read_requirements() {
    for (const TableView& table : file_.tables("require")) {
      const Requirement requirement = read_requirement(table, train());
      if (requirement.between) {
        check_range(requirement.between->first, table.place("between_um", 0));
        check_range(requirement.between->second, table.place("between_um", 1));
      }
      out_.required.push_back(requirement);
    }
  }

  TableView file_;
  Catalog catalog_;  // with the file's own materials
  std::vector<TableView> element_tables_ = {};
  TrainFile out_ = {};
};

}  // namespace
}  // namespace detail

TrainFile parse_train(std::string_view text, const Catalog& catalog, const std::string& file) {
  const detail::TomlNode root = detail::parse_toml(text, file);
  return detail::TrainReader(root, file, catalog).read();
}

TrainFile read_train(const std::string& path, const Catalog& catalog) {
  return parse_train(detail::read_text_file(path), catalog, path);
}

}  // namespace chromacore
