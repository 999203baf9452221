// Train files and surface lists: what they mean, and that what is written reads back. What is wrong
// with a file: bad_input.cpp.
#include <doctest/doctest.h>
#include <sys/stat.h>
#include <unistd.h>

#include <chromacore/train_file.hpp>
#include <cmath>
#include <cstdio>
#include <filesystem>
#include <fstream>
#include <random>
#include <sstream>

#include "close.hpp"
#include "message_of.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

namespace fs = std::filesystem;

const Catalog& catalog() {
  static const Catalog built_in = Catalog::built_in();
  return built_in;
}

// A folder of its own, gone afterwards.
class Folder {
 public:
  Folder() {
    std::string pattern = (fs::temp_directory_path() / "chromacore-XXXXXX").string();
    REQUIRE(::mkdtemp(pattern.data()) != nullptr);
    path_ = pattern;
  }
  Folder(const Folder&) = delete;
  Folder& operator=(const Folder&) = delete;
  ~Folder() { fs::remove_all(path_); }

  [[nodiscard]] std::string operator/(const std::string& name) const {
    return (path_ / name).string();
  }
  [[nodiscard]] std::size_t files() const {
    return static_cast<std::size_t>(
        std::distance(fs::directory_iterator(path_), fs::directory_iterator()));
  }

 private:
  fs::path path_;
};

std::string content(const std::string& path) {
  std::ifstream file(path, std::ios::binary);
  std::stringstream text;
  text << file.rdbuf();
  return text.str();
}

void put(const std::string& path, std::string_view text) { std::ofstream(path) << text; }

// ---- equality to the last bit ----

bool same(const Line& a, const Line& b) {
  return a.wavelength() == b.wavelength() && a.letter() == b.letter();
}

bool same(const Material& a, const Material& b) {
  return a.full_name() == b.full_name() && a.data().form == b.data().form &&
         a.data().coefficients == b.data().coefficients && a.data().shortest == b.data().shortest &&
         a.data().longest == b.data().longest;
}

bool same(const Band& a, const Band& b) {
  const auto same_line = [](const Line& x, const Line& y) { return same(x, y); };
  return same(a.reference, b.reference) && a.weights == b.weights &&
         std::equal(a.wavelengths.begin(), a.wavelengths.end(), b.wavelengths.begin(),
                    b.wavelengths.end(), same_line);
}

bool same(std::monostate, std::monostate) { return true; }
bool same(const EntrancePupilDiameter& a, const EntrancePupilDiameter& b) {
  return a.value == b.value;
}
bool same(const FNumber& a, const FNumber& b) { return a.value == b.value; }
bool same(const ObjectNa& a, const ObjectNa& b) { return a.value == b.value; }
bool same(const HalfAngle& a, const HalfAngle& b) { return a.value == b.value; }
bool same(const ObjectHeight& a, const ObjectHeight& b) { return a.value == b.value; }
bool same(const ImageHeight& a, const ImageHeight& b) { return a.value == b.value; }
bool same(const Thin& a, const Thin& b) {
  return same(a.material, b.material) && a.power == b.power && a.gap_after == b.gap_after;
}
bool same(const Thick& a, const Thick& b) {
  return same(a.material, b.material) && a.front == b.front && a.back == b.back &&
         a.thickness == b.thickness && a.clear_diameter == b.clear_diameter &&
         a.gap_after == b.gap_after && a.cemented == b.cemented;
}
bool same(const Diffractive& a, const Diffractive& b) {
  return a.power == b.power && a.gap_after == b.gap_after;
}

template <class... Kinds>
bool same(const std::variant<Kinds...>& a, const std::variant<Kinds...>& b) {
  if (a.index() != b.index()) return false;
  return std::visit([&](const auto& x) { return same(x, std::get<std::decay_t<decltype(x)>>(b)); },
                    a);
}

bool same(const std::optional<Surroundings>& a, const std::optional<Surroundings>& b) {
  if (!a || !b) return !a && !b;
  return a->temperature == b->temperature && a->pressure == b->pressure &&
         a->humidity == b->humidity && a->co2_ppm == b->co2_ppm;
}

bool same(const Train& a, const Train& b) {
  const auto same_element = [](const Element& x, const Element& y) { return same(x, y); };
  return a.name == b.name && same(a.band, b.band) && same(a.aperture, b.aperture) &&
         same(a.field, b.field) && a.object_distance == b.object_distance &&
         a.stop.element == b.stop.element && a.stop.side == b.stop.side &&
         a.stop.offset == b.stop.offset && a.pixel == b.pixel &&
         same(a.surroundings, b.surroundings) &&
         std::equal(a.elements.begin(), a.elements.end(), b.elements.begin(), b.elements.end(),
                    same_element);
}

bool same(const Vary& a, const Vary& b) {
  return a.element == b.element && a.parameter == b.parameter && a.min == b.min && a.max == b.max;
}

bool same(const std::optional<LinePair>& a, const std::optional<LinePair>& b) {
  if (!a || !b) return !a && !b;
  return same(a->first, b->first) && same(a->second, b->second);
}

bool same(const Requirement& a, const Requirement& b) {
  return a.quantity == b.quantity && a.element == b.element && a.target == b.target &&
         same(a.between, b.between) && a.at_least == b.at_least && a.at_most == b.at_most &&
         a.budget == b.budget;
}

template <class Item>
bool same(const std::vector<Item>& a, const std::vector<Item>& b) {
  return std::equal(a.begin(), a.end(), b.begin(), b.end(),
                    [](const Item& x, const Item& y) { return same(x, y); });
}

constexpr const char* whole_file = R"(format = 1
name = "survey objective"
[band]
reference_um   = "d"
wavelengths_um = ["F", 0.5875618, "C"]
weights        = [1, 2.5, 1]
[aperture]
entrance_pupil_diameter_mm = 50
[field]
half_angle_deg = 1.0
[object]
distance_mm = inf
[stop]
element   = 2
side      = "back"
offset_mm = 1.5
[detector]
pixel_um = 3.45
[surroundings]
temperature_C = 25
pressure_Pa   = 90000
humidity      = 0.5
co2_ppm       = 420
[[element]]
material     = "n-sk2"
power_per_mm = 0.0112
gap_after_mm = 3.0
[[element]]
material  = "N-SK2"
radii_mm  = [62.1, -inf]
thickness_mm = 6
clear_diameter_mm = 50
gap_after_mm = 2
[[element]]
material  = "crown of 1931"
curvatures_per_mm  = [0.01, -0.02]
thickness_mm = 6
cemented = true
[[element]]
material  = "SCHOTT/F2"
radii_mm  = [-50, 1e3]
thickness_mm = 2
[[element]]
kind = "diffractive"
power_per_mm = 0.0005
[[material]]
name     = "crown of 1931"
lines_um = ["F", "d", "C"]
indices  = [1.52238, 1.51700, 1.51432]
[[vary]]
element = 1
parameter = "power_per_mm"
min = -0.1
max = 0.1
[[vary]]
element = 2
parameter = "gap_after_mm"
[[require]]
quantity   = "focal_length_mm"
target     = 500
budget     = 0.5
[[require]]
quantity   = "axial_color_mm"
between_um = ["F", 0.6]
at_least   = -0.1
at_most    = 0.1
[[require]]
quantity = "lateral_sum_mm"
element  = 2
target   = 0
budget   = 0.01
)";

// The least that a train file has.
std::string minimal(const std::string& band, const std::string& rest = "") {
  return "format = 1\n[band]\n" + band +
         "[aperture]\nf_number = 8\n[field]\nimage_height_mm = -4\n" + rest +
         "[[element]]\nmaterial = \"N-BK7\"\npower_per_mm = 0.01\n";
}

constexpr const char* visible = "reference_um = \"d\"\nwavelengths_um = [\"F\", \"d\", \"C\"]\n";

Train parsed(const std::string& text) { return parse_train(text, catalog()).train; }

}  // namespace

TEST_CASE("parse_train: every key of the format arrives") {
  const TrainFile file = parse_train(whole_file, catalog(), "train.toml");
  const Train& t = file.train;
  CHECK(t.name == "survey objective");
  CHECK(t.band.reference.letter() == "d");
  REQUIRE(t.band.wavelengths.size() == 3);
  CHECK(t.band.wavelengths[0].letter() == "F");
  CHECK(t.band.wavelengths[1].letter().empty());
  CHECK(in_um(t.band.wavelengths[1].wavelength()) == 0.5875618);
  CHECK(t.band.weights == std::vector{1.0, 2.5, 1.0});
  CHECK(std::get<EntrancePupilDiameter>(t.aperture).value == 50.0 * mm);
  CHECK(std::get<HalfAngle>(t.field).value == 1.0 * deg);
  CHECK(t.object_distance == infinity);
  CHECK(t.stop.element == 2);
  CHECK(t.stop.side == Side::back);
  CHECK(t.stop.offset == 1.5 * mm);
  CHECK(close(in_mm(t.pixel.value()), 0.00345, {.rel = 1e-15}));
  CHECK(in_celsius(t.surroundings.value().temperature) == 25);
  CHECK(in_Pa(t.surroundings->pressure) == 90000);
  CHECK(t.surroundings->humidity == 0.5);
  CHECK(t.surroundings->co2_ppm == 420);
  REQUIRE(t.elements.size() == 5);
  CHECK(std::get<Thin>(t.elements[0]).material.name() == "N-SK2");
  CHECK(std::get<Thin>(t.elements[0]).power == 0.0112 * per_mm);
  CHECK(gap_after(t.elements[0]) == 3.0 * mm);
  const auto& thick = std::get<Thick>(t.elements[1]);
  CHECK(in_per_mm(thick.front) == 1 / 62.1);
  CHECK(thick.back == flat);
  CHECK(thick.thickness == 6.0 * mm);
  CHECK(thick.clear_diameter == 50.0 * mm);
  const auto& cemented = std::get<Thick>(t.elements[2]);
  CHECK(cemented.cemented);
  CHECK(cemented.front == 0.01 * per_mm);
  // The indices that the file lists, by its own lines.
  CHECK(close(index(cemented.material, Line("d").wavelength()), 1.51700, {.abs = 1e-14}));
  CHECK(std::get<Diffractive>(t.elements[4]).power == 0.0005 * per_mm);
}

TEST_CASE("parse_train: what may vary and what is required") {
  const TrainFile file = parse_train(whole_file, catalog());
  REQUIRE(file.may_vary.size() == 2);
  CHECK(same(file.may_vary[0], {1, Parameter::power, -0.1, 0.1}));
  CHECK(same(file.may_vary[1], {2, Parameter::gap_after}));
  REQUIRE(file.required.size() == 3);
  CHECK(file.required[0].quantity == Quantity::focal_length);
  CHECK(file.required[0].target == 500.0);
  CHECK(file.required[0].budget == 0.5);
  CHECK(file.required[1].between.value().first.letter() == "F");
  CHECK(in_um(file.required[1].between.value().second.wavelength()) == 0.6);
  CHECK(file.required[1].at_least == -0.1);
  CHECK(file.required[1].at_most == 0.1);
  CHECK_FALSE(file.required[1].budget);
  CHECK(file.required[2].element == 2);
}

TEST_CASE("parse_train: what is left out") {
  const Train t = parsed(minimal(visible));
  CHECK(t.name.empty());
  CHECK(t.band.weights.empty());
  CHECK(t.object_distance == infinity);
  CHECK(t.stop.element == 1);
  CHECK(t.stop.side == Side::front);
  CHECK(t.stop.offset == 0.0 * mm);
  CHECK_FALSE(t.pixel);
  CHECK_FALSE(t.surroundings);
  CHECK(gap_after(t.elements[0]) == 0.0 * mm);
}

TEST_CASE("parse_train: a band as two ends and a number of samples") {
  const Train t = parsed(minimal("reference_um = \"d\"\nends_um = [0.435, \"r\"]\nsamples = 21\n"));
  REQUIRE(t.band.wavelengths.size() == 21);
  CHECK(in_um(t.band.shortest().wavelength()) == 0.435);
  CHECK(t.band.longest().letter() == "r");
}

TEST_CASE("parse_train: a weight file lies beside the train, and is written into it") {
  const Folder folder;
  fs::create_directory(folder / "data");
  put(folder / "data/lamp.csv",
      "\xEF\xBB\xBFwavelength_um,weight\r\n0.45,0.5\r\nd,1\r\n0.7,0.25\r\n");
  put(folder / "train.toml", minimal("reference_um = \"d\"\nweight_file = \"data/lamp.csv\"\n"));
  const TrainFile file = read_train(folder / "train.toml", catalog());
  CHECK(file.train.band.weights == std::vector{0.5, 1.0, 0.25});
  CHECK(in_um(file.train.band.wavelengths[0].wavelength()) == 0.45);
  CHECK(file.train.band.wavelengths[1].letter() == "d");
  const std::string text = train_text(file, catalog());
  CHECK(text.find("weights        = [0.5, 1, 0.25]\n") != std::string::npos);
  CHECK(same(parse_train(text, catalog()).train, file.train));
}

TEST_CASE("parse_train: surroundings at a height are those of the standard atmosphere") {
  const auto air = [](const std::string& rest) {
    return parsed(minimal(visible, "[surroundings]\n" + rest)).surroundings.value();
  };
  // ISO 2533:1975, table: 3000 m (geopotential), 268.65 K, 701.085 hPa.
  CHECK(close(in_celsius(air("altitude_m = 3000\ntemperature_C = 18\n").temperature), 18, {}));
  CHECK(
      close(in_Pa(air("altitude_m = 3000\ntemperature_C = 18\n").pressure), 70108.5, {.abs = 0.5}));
  CHECK(in_celsius(air("").temperature) == 20);
  CHECK(in_Pa(air("").pressure) == 101325);
  CHECK(in_Pa(air("pressure_Pa = 0\n").pressure) == 0);
}

TEST_CASE("parse_train: a byte-order mark and CRLF change nothing") {
  std::string text = "\xEF\xBB\xBF";
  for (const char c : minimal(visible)) text += c == '\n' ? "\r\n" : std::string(1, c);
  CHECK(same(parsed(text), parsed(minimal(visible))));
}

// ---- writing ----

TEST_CASE("train_text: the whole format, as it is written") {
  const TrainFile file = parse_train(whole_file, catalog());
  const std::string text = train_text(file, catalog());
  const TrainFile again = parse_train(text, catalog());
  CHECK(same(again.train, file.train));
  CHECK(same(again.may_vary, file.may_vary));
  CHECK(same(again.required, file.required));
  CHECK(train_text(again, catalog()) == text);
  CHECK(text == content(std::string(CHROMACORE_FOLDER) + "/tests/written_train.toml"));
}

namespace {

// Random trains; every figure has all its digits.
class Draw {
 public:
  explicit Draw(std::uint64_t seed) : random_(seed) {}

  double number(double from, double to) {
    return std::uniform_real_distribution(from, to)(random_);
  }
  int integer(int from, int to) { return std::uniform_int_distribution(from, to)(random_); }
  bool coin() { return integer(0, 1) == 1; }

  TrainFile train_file() {
    TrainFile file;
    Train& t = file.train;
    t.name = coin() ? "" : "a \"quoted\" \\ name\twith \x01 and \xC3\xA9";
    t.band = band();
    t.object_distance = coin() ? infinity : number(10, 1000) * mm;
    t.aperture = aperture(t.object_distance != infinity);
    t.field = field(t.object_distance != infinity);
    if (coin()) t.pixel = number(1, 20) / 1000.0 * mm;  // in um, as files have it
    if (coin()) t.surroundings = surroundings();
    const int count = integer(1, 6);
    for (int i = 0; i < count; ++i) add_element(t);
    t.stop = stop(t);
    for (int i = 1; i <= count; ++i) file.may_vary.push_back(vary(i, t));
    for (int i = 1; i <= count; ++i) file.required.push_back(requirement(i));
    return file;
  }

 private:
  Line line() { return coin() ? Line(number(0.45, 0.7) * um) : Line(coin() ? "F" : "C'"); }

  Band band() {
    Band b;
    b.reference = coin() ? Line("d") : line();
    b.wavelengths = {Line("g"), Line(number(0.45, 0.65) * um), Line(number(0.66, 0.8) * um)};
    if (coin()) b.weights = {number(0, 1), number(0.1, 1), number(0, 1)};
    return b;
  }

  Aperture aperture(bool near) {
    if (near && coin()) return ObjectNa{number(0.01, 0.5)};
    if (coin()) return FNumber{number(1, 20)};
    return EntrancePupilDiameter{number(1, 100) * mm};
  }

  Field field(bool near) {
    if (near && coin()) return ObjectHeight{number(-50, 50) * mm};
    if (coin()) return HalfAngle{number(-30, 30) * deg};
    return ImageHeight{number(-20, 20) * mm};
  }

  Surroundings surroundings() {
    return {number(15, 25) * celsius, number(5e4, 1.1e5) * Pa, number(0, 1), number(0, 1000)};
  }

  Material material() {
    switch (integer(0, 4)) {
      case 0:
        return catalog().at("N-BK7");
      case 1:
        return catalog().at("SCHOTT/F2");
      case 2:
        return own_lines_;
      case 3:
        return own_formula_;
      default:
        return own_constant_;
    }
  }

  Curvature curvature() {
    if (integer(0, 9) == 0) return flat;
    // From a radius, or any curvature, as a solve may leave it.
    return coin() ? radius(number(-500, 500) * mm) : number(-0.05, 0.05) * per_mm;
  }

  void add_element(Train& t) {
    const Length gap = coin() ? Length{} : number(0, 20) * mm;
    const auto* const before =
        t.elements.empty() ? nullptr : std::get_if<Thick>(&t.elements.back());
    const int kind = before != nullptr && before->cemented ? 1 : integer(0, 2);
    if (kind == 0) t.elements.push_back(Thin{material(), number(-0.1, 0.1) * per_mm, gap});
    if (kind == 2) t.elements.push_back(Diffractive{number(-0.01, 0.01) * per_mm, gap});
    if (kind != 1) return;
    Thick thick{material(), curvature(), curvature(), number(0, 9) * mm, {}, gap, false};
    if (coin()) thick.clear_diameter = number(1, 60) * mm;
    if (before != nullptr && before->cemented) thick.front = before->back;
    t.elements.push_back(thick);
    if (t.elements.size() > 5 || coin()) return;
    Thick last{material(), thick.back, curvature(), number(0, 9) * mm, {}, gap, false};
    std::get<Thick>(t.elements.back()).cemented = true;
    std::get<Thick>(t.elements.back()).gap_after = Length{};
    t.elements.push_back(last);
  }

  Stop stop(const Train& t) {
    const int element = integer(1, static_cast<int>(t.elements.size()));
    const Length gap = gap_after(t.elements[static_cast<std::size_t>(element) - 1]);
    if (coin()) return {element, Side::front, element == 1 ? -number(0, 9) * mm : 0.0 * mm};
    return {element, Side::back, gap * number(0, 1)};
  }

  Vary vary(int element, const Train& t) {
    const bool last = element == static_cast<int>(t.elements.size());
    const auto* const thick =
        std::get_if<Thick>(&t.elements[static_cast<std::size_t>(element) - 1]);
    const Parameter parameter = thick != nullptr ? Parameter::thickness
                                : last || coin() ? Parameter::power
                                                 : Parameter::gap_after;
    Vary v{.element = element, .parameter = parameter};
    if (coin()) v.max = number(20, 30);
    return v;
  }

  Requirement requirement(int element) {
    Requirement r{.quantity = coin() ? Quantity::axial_sum : Quantity::axial_color};
    if (r.quantity == Quantity::axial_sum && coin()) r.element = element;
    if (coin()) r.between = LinePair{"F", number(0.66, 0.7) * um};
    if (coin()) {
      r.target = number(-1, 1);
    } else {
      r.at_least = number(-2, -1);
      if (coin()) r.at_most = number(-1, 1);
    }
    r.budget = number(0.001, 1);
    return r;
  }

  std::mt19937_64 random_;
  Material own_lines_{MaterialData{.name = "lines of mine",
                                   .form = DispersionForm::through_lines,
                                   .coefficients = {0.4358343, 1.53, 0.5875618, 1.52, 0.9, 1.51}}};
  Material own_formula_{MaterialData{.name = "formula of mine",
                                     .maker = "BENCH",
                                     .form = DispersionForm::polynomial,
                                     .coefficients = {2.27, -0.0101, 2, 0.0105, -2},
                                     .shortest = 0.36 * um,
                                     .longest = 1.5 * um,
                                     .index_relative_to = Medium::vacuum,
                                     .temperature = 22.0 * celsius,
                                     .thermal_constant = ThermalConstant{1e-6, Medium::air},
                                     .cautions = {"soluble"},
                                     .source = "measured \"here\""}};
  Material own_constant_{MaterialData{
      .name = "constant", .form = DispersionForm::through_lines, .coefficients = {1, 1.5}}};
};

}  // namespace

TEST_CASE("train_text: whatever the train, it reads back to the last bit") {
  const std::uint64_t seed = test_seed();
  CAPTURE(seed);
  Draw draw(seed);
  for (int i = 0; i < 300; ++i) {
    CAPTURE(i);
    const TrainFile file = draw.train_file();
    const std::string text = train_text(file, catalog());
    CAPTURE(text);
    const TrainFile again = parse_train(text, catalog());
    REQUIRE(again.train.name == file.train.name);
    REQUIRE(same(again.train, file.train));
    REQUIRE(same(again.may_vary, file.may_vary));
    REQUIRE(same(again.required, file.required));
    REQUIRE(train_text(again, catalog()) == text);
  }
}

TEST_CASE("train_text: a material keeps its plain name unless several have it") {
  TrainFile file = parse_train(minimal(visible), catalog());
  CHECK(train_text(file, catalog()).find("material     = \"N-BK7\"\n") != std::string::npos);
  std::get<Thin>(file.train.elements[0]).material = catalog().at("SCHOTT/F2");
  CHECK(train_text(file, catalog()).find("material     = \"SCHOTT/F2\"\n") != std::string::npos);
}

TEST_CASE("train_text: one's own material of a maker's name does not hide the maker's") {
  TrainFile file = parse_train(minimal(visible), catalog());
  const Material own(MaterialData{.name = "N-BK7",
                                  .form = DispersionForm::through_lines,
                                  .coefficients = {0.4, 1.53, 0.5875618, 1.52, 0.9, 1.51}});
  file.train.elements.push_back(Thin{.material = own, .power = 0.001 * per_mm});
  const Train again = parsed(train_text(file, catalog()));
  CHECK(same(again, file.train));
}

TEST_CASE("train_text: a material of one index, in whatever form") {
  TrainFile file = parse_train(minimal(visible), catalog());
  const Material own(
      MaterialData{.name = "constant", .form = DispersionForm::polynomial, .coefficients = {2.25}});
  std::get<Thin>(file.train.elements[0]).material = own;
  const Train again = parsed(train_text(file, catalog()));
  CHECK(index(std::get<Thin>(again.elements[0]).material, 5.0 * um) == 1.5);
}

TEST_CASE("train_text: numbers, great and small") {
  TrainFile file = parse_train(minimal(visible), catalog());
  for (const double value : {1e-300, 9.9e-5, 1e-4, 0.0005, 1.0, 123456789012345680.0, 1e300}) {
    file.train.object_distance = value * mm;
    CHECK(parsed(train_text(file, catalog())).object_distance == file.train.object_distance);
  }
  file.train.object_distance = 0.0005 * mm;
  CHECK(train_text(file, catalog()).find("distance_mm = 0.0005\n") != std::string::npos);
}

TEST_CASE("train_text: a train that could not be read back is refused") {
  CHECK(message_of([] { return train_text({}, catalog()); }) ==
        "not_set: band: no reference wavelength");
}

TEST_CASE("train_text: a long list goes on in the next line") {
  const Train t = parsed(minimal("reference_um = \"d\"\nends_um = [0.4, 0.7]\nsamples = 40\n"));
  const std::string text = train_text({.train = t}, catalog());
  std::istringstream lines(text);
  for (std::string line; std::getline(lines, line);) CHECK(line.size() <= 100);
  CHECK(same(parsed(text), t));
}

// ---- surface lists ----

namespace {

constexpr const char* surfaces_csv =
    "radius_mm,thickness_mm,material,clear_diameter_mm\n"
    "310,8,N-BK7,50\n"
    "-230,5,SCHOTT/F2,50\n"
    "-900,,,50\n";

}  // namespace

TEST_CASE("parse_surfaces: the list that every engineer has") {
  const TrainFile file = parse_surfaces(surfaces_csv, catalog(), "lens/surfaces.csv");
  CHECK(file.train.name == "surfaces");
  REQUIRE(file.train.elements.size() == 2);
  const auto& first = std::get<Thick>(file.train.elements[0]);
  CHECK(first.cemented);
  CHECK(in_per_mm(first.front) == 1 / 310.0);
  CHECK(std::get<FNumber>(file.train.aperture).value == 10);
  CHECK(std::get<HalfAngle>(file.train.field).value == 1.0 * deg);
  CHECK(file.train.band.reference.letter() == "d");
}

TEST_CASE("parse_surfaces: byte-order mark, CRLF, order of columns, empty lines and comments") {
  const TrainFile file = parse_surfaces(
      "\xEF\xBB\xBFmaterial,stop,thickness_mm,radius_mm\r\n"
      "# a comment\r\n"
      "\r\n"
      "Air,,inf,inf\r\n"
      "n-bk7,,8,310\r\n"
      "air,,5,-inf\r\n"
      ",stop,2,inf\r\n"
      "\"N-BK7\",,8,-100\r\n"
      ",,,50\r\n",
      catalog());
  CHECK(file.train.name == "surfaces");
  REQUIRE(file.train.elements.size() == 2);
  CHECK(std::get<Thick>(file.train.elements[0]).back == flat);
  CHECK(in_mm(gap_after(file.train.elements[0])) == 7);
  CHECK(file.train.stop.side == Side::back);
  CHECK(in_mm(file.train.stop.offset) == 5);
}

TEST_CASE("parse_surfaces: the imported file says what was assumed") {
  const std::string text = train_text(parse_surfaces(surfaces_csv, catalog()), catalog());
  CHECK(text == R"(format = 1
name   = "surfaces"

[band]
reference_um   = "d"  # assumed: replace it by yours
wavelengths_um = ["F", "d", "C"]  # assumed: replace it by yours

[aperture]
f_number = 10  # assumed: replace it by yours

[field]
half_angle_deg = 1  # assumed: replace it by yours

[object]
distance_mm = inf

[stop]
element   = 1
side      = "front"
offset_mm = 0

[[element]]
material          = "N-BK7"
radii_mm          = [310, -230]
thickness_mm      = 8
clear_diameter_mm = 50
cemented          = true

[[element]]
material          = "SCHOTT/F2"
radii_mm          = [-230, -900]
thickness_mm      = 5
clear_diameter_mm = 50
)");
}

// ---- write_file ----

TEST_CASE("write_file: a new file, and an old one whole or not at all") {
  const Folder folder;
  const std::string path = folder / "train.toml";
  write_file(path, "first\n");
  CHECK(content(path) == "first\n");
  write_file(path, "second\n");
  CHECK(content(path) == "second\n");
  CHECK(folder.files() == 1);
}

TEST_CASE("write_file: permissions of the old file stay, links are followed") {
  const Folder folder;
  const std::string path = folder / "train.toml";
  const std::string link = folder / "link.toml";
  write_file(path, "first\n");
  REQUIRE(::chmod(path.c_str(), 0640) == 0);
  fs::create_symlink("train.toml", link);
  write_file(link, "second\n");
  CHECK(content(path) == "second\n");
  CHECK(fs::is_symlink(link));
  struct stat status {};
  REQUIRE(::stat(path.c_str(), &status) == 0);
  CHECK((status.st_mode & 07777U) == 0640U);
  CHECK(folder.files() == 2);
}

TEST_CASE("write_file: what is no regular file is written to as it is") {
  write_file("/dev/null", "gone\n");
  CHECK(fs::is_character_file("/dev/null"));
}

TEST_CASE("write_file: where it cannot write, it says why and leaves nothing") {
  const Folder folder;
  CHECK(message_of([&] { write_file(folder / "no/train.toml", "x"); }) ==
        "file_access: " + (folder / "no/train.toml") +
            ": cannot write the file: its folder does not exist");
  fs::create_directory(folder / "a");
  CHECK(message_of([&] { write_file(folder / "a", "x"); }) ==
        "file_access: " + (folder / "a") + ": cannot write the file: it is a folder");
  CHECK(message_of([] { write_file("/dev/full", "x"); }) ==
        "file_access: /dev/full: cannot write the file: no space left");
  CHECK(folder.files() == 1);
  CHECK(message_of([] { write_file("", "x"); }) ==
        "file_access: cannot write a file without a name");
}
