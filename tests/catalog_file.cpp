// The user's own materials: what files say, and what is wrong with bad ones (messages whole).
#include <doctest/doctest.h>

#include <chromacore/catalog_file.hpp>
#include <chromacore/error.hpp>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <string>
#include <string_view>
#include <vector>

#include "close.hpp"
#include "message_of.hpp"
#include "text.hpp"

using namespace chromacore;
using namespace chromacore::units;
using chromacore::detail::number_text;
using chromacore::test::close;
using chromacore::test::message_of;

namespace {

std::vector<Material> from_toml(const std::string& text) {
  return parse_catalog("format = 1\n" + text, "own.toml");
}
std::string toml_failure(const std::string& text) {
  return message_of([&] { (void)from_toml(text); });
}
std::vector<Material> from_csv(const std::string& text) { return parse_catalog(text, "own.csv"); }
std::string csv_failure(const std::string& text) {
  return message_of([&] { (void)from_csv(text); });
}

double index_at(const Material& m, const Line& line) { return index(m, line.wavelength()); }

// SCHOTT N-BK7, catalogue of 2017.
const std::string n_bk7 = R"([[material]]
name = "N-BK7 again"
form = "sellmeier_squared"
coefficients = [0, 1.03961212, 0.00600069867, 0.231792344, 0.0200179144, 1.01046945, 103.560653]
range_um = [0.3, 2.5]
)";

std::string repeated(std::string_view text, int times) {
  std::string result;
  for (int i = 0; i < times; ++i) result += text;
  return result;
}

// A file that is there while the test runs.
class TemporaryFile {
 public:
  explicit TemporaryFile(const std::string& name)
      : path_((std::filesystem::temp_directory_path() / name).string()) {}
  TemporaryFile(const std::string& name, const std::string& text) : TemporaryFile(name) {
    std::ofstream(path_, std::ios::binary) << text;
  }
  TemporaryFile(const TemporaryFile&) = delete;
  TemporaryFile& operator=(const TemporaryFile&) = delete;
  ~TemporaryFile() { std::filesystem::remove(path_); }
  [[nodiscard]] const std::string& path() const { return path_; }

 private:
  std::string path_;
};

}  // namespace

// ---- TOML ----

TEST_CASE("TOML catalogue: a formula with all that may be known") {
  const auto materials = from_toml(n_bk7 + R"(maker = "OWN"
code = "517642"
status = "current"
source = "data sheet"
temperature_C = 22
index_relative_to = "air"
thermal = [1.86e-06, 1.31e-08, -1.37e-11, 4.34e-07, 6.27e-10, 0.17]
expansion_per_K = 7.1e-6
density_kg_m3 = 2510
cautions = ["none known"]
notes = ["lot 17"]
)");
  REQUIRE(materials.size() == 1);
  const MaterialData& m = materials[0].data();
  CHECK(materials[0].full_name() == "OWN/N-BK7 again");
  CHECK(m.code == "517642");
  CHECK(m.status == Status::current);
  CHECK(m.temperature == 22.0 * celsius);
  CHECK(m.thermal->lambda_tk_um == 0.17);
  CHECK(m.expansion_per_K == 7.1e-6);
  CHECK(m.density_kg_m3 == 2510.0);
  CHECK(m.cautions == std::vector<std::string>{"none known"});
  CHECK(m.notes == std::vector<std::string>{"lot 17"});
  CHECK(close(index_at(materials[0], "d"), 1.5168, {.abs = 5e-6}));  // the maker's list
}

TEST_CASE("TOML catalogue: indices at lines are gone through exactly") {
  const auto materials = from_toml(R"([[material]]
name = "crown of 1931"
lines_um = ["F", "d", 0.6562725]
indices = [1.52238, 1.51700, 1.51432]
)");
  CHECK(close(index_at(materials[0], "F"), 1.52238, {.rel = 1e-15}));
  CHECK(close(index_at(materials[0], "d"), 1.51700, {.rel = 1e-15}));
  CHECK(close(index_at(materials[0], "C"), 1.51432, {.rel = 1e-15}));
  CHECK(materials[0].data().notes.empty());
  CHECK(message_of([&] {
          (void)index_at(materials[0], "g");
        }).find("out_of_range: material crown of 1931") == 0);
}

TEST_CASE("TOML catalogue: one line has no dispersion") {
  const Material m = from_toml(R"([[material]]
name = "ideal"
lines_um = ["d"]
indices = [1.5]
)")[0];
  CHECK(index_at(m, "g") == 1.5);
  CHECK(std::isinf(abbe_number(m)));
}

TEST_CASE("TOML catalogue: n and V, and P where it is known, are approximate and say so") {
  const auto materials = from_toml(R"([[material]]
name = "from n and V"
n_ref = 1.5168
v = 64.17
[[material]]
name = "from n, V and P"
lines_um = ["e", "F'", "C'"]
n_ref = 1.51872
v = 63.96
p_ref_long = 0.4936
)");
  CHECK(close(index_at(materials[0], "d"), 1.5168, {.rel = 1e-15}));
  CHECK(close(abbe_number(materials[0]), 64.17, {.rel = 1e-12}));
  CHECK(materials[0].data().notes ==
        std::vector<std::string>{"approximate: from n, V at F, d, C; P is that of n = A + B/x^2"});
  const LinePair pair = {"F'", "C'"};
  CHECK(close(v_number(materials[1], "e", pair), 63.96, {.rel = 1e-12}));
  const Band band = Band::of_lines({"F'", "e", "C'"}, "e");
  CHECK(close(partial_dispersion(materials[1], {"e", "C'"}, band), 0.4936, {.rel = 1e-12}));
  CHECK(materials[1].data().notes ==
        std::vector<std::string>{"approximate: from n, V and P at F', e, C'"});
}

TEST_CASE("TOML catalogue: a table of indices is fitted, and the note has the residual") {
  // Five-decimal indices of N-BK7 as its formula gives them: the fit finds the formula again to
  // the rounding of the list.
  const Material exact = from_toml(n_bk7)[0];
  std::string lines;
  std::string indices;
  for (const double at : {0.365, 0.4047, 0.4358, 0.4861, 0.5461, 0.5876, 0.6563, 0.7065, 0.8521,
                          1.014, 1.53, 1.97, 2.325}) {
    lines += number_text(at) + ", ";
    indices += number_text(1e-5 * std::round(1e5 * index(exact, at * um)), 6) + ", ";
  }
  const Material m = from_toml("[[material]]\nname = \"fitted\"\nfit = true\nlines_um = [" + lines +
                               "]\nindices = [" + indices + "]\n")[0];
  CHECK(m.data().form == DispersionForm::polynomial);
  CHECK(m.data().shortest == 0.365 * um);
  CHECK(m.data().longest == 2.325 * um);
  REQUIRE(m.data().notes.size() == 1);
  CHECK(m.data().notes[0].find("terms to 13 indices; largest residual") != std::string::npos);
  for (double x = 0.37; x < 2.3; x += 0.05) {
    CHECK(close(index(m, x * um), index(exact, x * um), {.abs = 1e-5}));
  }
  CHECK(close(abbe_number(m), abbe_number(exact), {.rel = 1e-3}));
}

TEST_CASE("TOML catalogue: a spline through the indices, where the form is table") {
  const Material m = from_toml(R"([[material]]
name = "splined"
form = "table"
lines_um = [3, 4, 5, 8, 10, 12]
indices = [2.6637, 2.6588, 2.6561, 2.6508, 2.6472, 2.643]
)")[0];
  CHECK(close(index(m, 8.0 * um), 2.6508, {.rel = 1e-15}));
}

TEST_CASE("TOML catalogue: mistakes are told by line, column and name") {
  CHECK(toml_failure("[[material]]\nname = \"x\"\n") ==
        "not_set: own.toml:2:1: [[material]] has no index; expected form and coefficients, "
        "lines_um and indices, or n_ref and v");
  CHECK(toml_failure(n_bk7 + "densty_kg_m3 = 2510\n") ==
        "unknown_key: own.toml:7:16: unknown key \"densty_kg_m3\" in [[material]]; nearest: "
        "density_kg_m3");
  CHECK(toml_failure("[[material]]\nnam = \"x\"\n") ==
        "unknown_key: own.toml:3:7: unknown key \"nam\" in [[material]]; nearest: name");
  CHECK(toml_failure("[[material]]\nform = \"sellmeier\"\n") ==
        "not_set: own.toml:2:1: [[material]] has no name");
  CHECK(toml_failure("[[material]]\nname = \"x\"\nform = \"selmeier\"\ncoefficients = [0]\n") ==
        "not_found: own.toml:4:8: no dispersion form \"selmeier\"; the forms are sellmeier, "
        "sellmeier_squared, polynomial, rational_polynomial, cauchy, herzberger, through_lines, "
        "table");
  CHECK(toml_failure("[[material]]\nname = \"x\"\nlines_um = [\"F\", \"d\"]\nindices = [1.5]\n") ==
        "bad_value: own.toml:5:11: indices has 1 numbers, lines_um 2");
  CHECK(
      toml_failure("[[material]]\nname = \"x\"\nlines_um = [\"F\", \"q\"]\nindices = [1.5, 1.4]\n")
          .find("not_found: own.toml:4:18: ") == 0);
  CHECK(toml_failure(n_bk7 + "thermal = [1, 2]\n") ==
        "bad_value: own.toml:7:11: thermal needs six numbers: D0 D1 D2 E0 E1 lambda_TK");
  CHECK(toml_failure(n_bk7 + "status = \"old\"\n") ==
        "bad_value: own.toml:7:10: status is \"old\"; expected current, on_request, withdrawn or "
        "unknown");
  CHECK(toml_failure(n_bk7 + "code = \"51764\"\n") ==
        "bad_value: own.toml:7:8: code is \"51764\"; expected six digits, as \"517642\"");
  CHECK(toml_failure(n_bk7 + "v = 64\n") ==
        "bad_value: own.toml:7:5: v does not go with coefficients");
  CHECK(toml_failure(n_bk7 + "index_relative_to = \"helium\"\n") ==
        "bad_value: own.toml:7:21: no medium \"helium\"; expected air, vacuum or unknown");
  CHECK(toml_failure(n_bk7 + "density_kg_m3 = nan\n") ==
        "bad_value: own.toml:7:17: density_kg_m3 is nan; expected a finite number");
  CHECK(toml_failure(n_bk7 + "density_kg_m3 = \"2510\"\n") ==
        "bad_value: own.toml:7:17: density_kg_m3 is \"2510\"; expected a number");
  CHECK(toml_failure("[[material]]\nname = \"x\"\nn_ref = 1.5\nv = 0\n") ==
        "bad_value: own.toml:4:9: v is 0; expected a positive number");
  CHECK(toml_failure("[[material]]\nname = \"x\"\nform = \"sellmeier\"\nlines_um = [\"F\", \"C\"]\n"
                     "indices = [1.52, 1.51]\n") ==
        "bad_value: own.toml:6:11: form is sellmeier; with lines_um and indices it is "
        "through_lines or table");
  CHECK(toml_failure(n_bk7 + n_bk7) ==
        "bad_value: own.toml:7:1: \"N-BK7 again\" is here twice; first in line 2");
  CHECK(toml_failure("name = \"nothing\"\n") == "not_set: own.toml: the file has no material");
  CHECK(message_of([] { (void)parse_catalog("format = 2\n", "own.toml"); }) ==
        "bad_value: own.toml:1:10: format is not 1, the only one there is");
  CHECK(message_of([] { (void)parse_catalog("name = \"x\"\n", "own.toml"); }) ==
        "not_set: own.toml: the file has no format");
}

TEST_CASE("TOML catalogue: what is not TOML is told by line and column") {
  CHECK(toml_failure("[[material]]\nname = \"x\"\nn_ref = 1,5\n") ==
        "bad_syntax: own.toml:4:10: a decimal comma; numbers have a decimal point");
  CHECK(toml_failure("[[material]\n").find("bad_syntax: own.toml:2:") == 0);
  CHECK(toml_failure("name = \"never closed\n").find("bad_syntax: own.toml:2:") == 0);
  CHECK(toml_failure(std::string("name = \"\0\"\n", 11)).find("bad_syntax: own.toml:2:") == 0);
  CHECK(toml_failure("name = \"\xff\"\n").find("bad_syntax: own.toml:") == 0);
}

TEST_CASE("TOML catalogue: deep nesting is refused before it is parsed") {
  const int deep = 200000;
  const std::string end = "nested too deeply; at most 16 levels";
  CHECK(toml_failure(std::string("x = ") + repeated("[", deep) + "\n") ==
        "too_large: own.toml:2:21: " + end);
  CHECK(toml_failure(std::string("x = ") + repeated("{a=", deep) + "\n") ==
        "too_large: own.toml:2:53: " + end);
  CHECK(toml_failure(std::string("a") + repeated(".a", deep) + " = 1\n") ==
        "too_large: own.toml:2:34: " + end);
  CHECK(toml_failure(std::string("[a") + repeated(".a", deep) + "]\n") ==
        "too_large: own.toml:2:35: " + end);
  CHECK(toml_failure(std::string("[[a") + repeated(" . a", deep) + "]]\n")
            .find("too_large: own.toml:2:") == 0);
  CHECK(
      toml_failure(std::string("\"a\"") + repeated(".\"a\"", deep) + " = 1\n").find("too_large") ==
      0);
  // What is in a text or behind a # has no depth.
  CHECK(toml_failure(std::string("name = \"") + repeated("[a.", 1000) + "\" # " +
                     repeated("{.", 1000) + "\n") == "not_set: own.toml: the file has no material");
  CHECK(toml_failure(std::string("name = '''") + repeated("[\n", 1000) + "'''\n") ==
        "not_set: own.toml: the file has no material");
}

TEST_CASE("TOML catalogue: a file past 4 MiB is refused before it is read") {
  const TemporaryFile file("chromacore_large.toml");
  std::ofstream(file.path()) << "format = 1\n";
  std::filesystem::resize_file(file.path(), 100'000'000);
  CHECK(message_of([&] { (void)read_catalog_file(file.path()); }) ==
        "too_large: " + file.path() + ": the file has 100000000 bytes; at most 4194304 are read");
  CHECK(toml_failure(std::string("# ") + repeated("x", 5 << 20)) ==
        "too_large: own.toml: the file has 5242893 bytes; at most 4194304 are read");
}

// ---- files ----

TEST_CASE("catalogue file: what cannot be read is told with its path") {
  CHECK(message_of([] { (void)read_catalog_file("/nowhere/own.toml"); }) ==
        "file_access: /nowhere/own.toml: cannot read the file: no such file");
  const std::string folder = std::filesystem::temp_directory_path().string();
  CHECK(message_of([&] { (void)read_catalog_file(folder); }) ==
        "file_access: " + folder + ": cannot read the file: it is a folder");
}

TEST_CASE("catalogue file: what kind it is, its name says, else its text") {
  const TemporaryFile toml("chromacore_own.toml",
                           "\xEF\xBB\xBF"
                           "format = 1\n" +
                               n_bk7);
  CHECK(read_catalog_file(toml.path()).size() == 1);
  CHECK(parse_catalog("# a comment\n\nformat = 1\n" + n_bk7, "own.txt").size() == 1);
  CHECK(parse_catalog("name,n_ref,v\nx,1.5,60\n", "own.txt").size() == 1);
}

// ---- CSV ----

TEST_CASE("CSV catalogue: a line for each material, by formula") {
  const auto materials = from_csv(
      "name,maker,form,c0,c1,c2,shortest_um,longest_um,D0,lambda_TK_um,cautions\n"
      "A,OWN,sellmeier_squared,0,1.4182,0.021304,0.44,1.05,,,\n"
      "B,,cauchy,1.5,0.004,-2,0.4,0.7,1e-6,0.2,\"toxic: lead; soluble\"\n");
  REQUIRE(materials.size() == 2);
  CHECK(materials[0].full_name() == "OWN/A");
  CHECK(!materials[0].data().thermal);
  CHECK(materials[1].data().thermal->d0 == 1e-6);
  CHECK(materials[1].data().cautions == std::vector<std::string>{"toxic: lead", "soluble"});
  CHECK(close(index(materials[1], 0.5 * um), 1.5 + 0.004 * 4, {.rel = 1e-15}));
}

TEST_CASE("CSV catalogue: n, V and P") {
  const auto materials = from_csv(
      "name,n_ref,v,p_ref_long,lines_um\n"
      "A,1.5168,64.17,0.3076,\n"
      "B,2.5,100,,3 4 5\n");
  CHECK(close(abbe_number(materials[0]), 64.17, {.rel = 1e-12}));
  CHECK(close(index(materials[1], 4.0 * um), 2.5, {.rel = 1e-15}));
  CHECK(materials[1].data().notes[0].find("approximate") == 0);
}

TEST_CASE("CSV catalogue: a line for each index; few are gone through, many are fitted") {
  std::string text = "name,line_um,index\n";
  for (const char* row : {"F,1.52238", "d,1.51700", "C,1.51432"}) {
    text += std::string("crown,") + row + "\n";
  }
  for (int i = 0; i < 8; ++i) {
    const int nm = 400 + 50 * i;
    text +=
        "flint," + std::to_string(nm) + "e-3," + number_text(1.6 + 0.008e6 / (nm * nm), 7) + "\n";
  }
  const auto materials = from_csv(text);
  REQUIRE(materials.size() == 2);
  CHECK(materials[0].data().form == DispersionForm::through_lines);
  CHECK(close(index_at(materials[0], "d"), 1.517, {.rel = 1e-15}));
  CHECK(materials[1].data().form == DispersionForm::polynomial);
  CHECK(close(index(materials[1], 0.5 * um), 1.6 + 0.008 / 0.25, {.abs = 1e-6}));
}

TEST_CASE("CSV catalogue: byte-order mark, CRLF, quotes, comments and blanks are accepted") {
  const auto materials = from_csv(
      "\xEF\xBB\xBF# made by hand\r\n\"name\", n_ref ,v\r\n\r\n\"one, \"\"two\"\"\", 1.5 , 60\r\n");
  REQUIRE(materials.size() == 1);
  CHECK(materials[0].name() == "one, \"two\"");
}

TEST_CASE("CSV catalogue: mistakes are told by line, column and name") {
  CHECK(csv_failure("name;n_ref;v\nx;1,5;60\n") ==
        "bad_syntax: own.csv:1:1: ';' between cells; expected commas, and numbers with a decimal "
        "point");
  CHECK(csv_failure("name,n_ref,v\nx,1,5,60\n") ==
        "bad_syntax: own.csv:2:7: the row has 4 cells, the header 3; a decimal comma? numbers have "
        "a decimal point");
  CHECK(csv_failure("name,n_ref,v\nx,\"1,5\",60\n") ==
        "bad_syntax: own.csv:2:3: n_ref is \"1,5\"; expected a number with a decimal point");
  CHECK(csv_failure("name,n_ref,v\nx,1.5\n") ==
        "bad_syntax: own.csv:2:1: the row has 2 cells, the header 3");
  CHECK(csv_failure("name,nref,v\nx,1.5,60\n") ==
        "unknown_key: own.csv:1:6: unknown column \"nref\"; nearest: n_ref");
  CHECK(csv_failure("name,n_ref,v,v\n") ==
        "bad_syntax: own.csv:1:14: two columns are called \"v\"");
  CHECK(csv_failure("") ==
        "bad_syntax: own.csv: no header line; expected column names with commas between");
  CHECK(csv_failure("name,n_ref,v\n") == "not_set: own.csv: the file has no material");
  CHECK(csv_failure("name,n_ref,v\nx,1.5,\n") == "not_set: own.csv:2: no v");
  CHECK(csv_failure("name,n_ref,v\n,1.5,60\n") == "not_set: own.csv:2: no name");
  CHECK(csv_failure("name,n_ref,v\nx,inf,60\n") ==
        "bad_value: own.csv:2:3: n_ref is \"inf\"; expected a finite number");
  CHECK(csv_failure("name,n_ref,v\nx,1.5,-60\n") ==
        "bad_value: own.csv:2: v is -60; expected a positive number");
  CHECK(csv_failure("name,n_ref,v\n\"x,1.5,60\n") ==
        "bad_syntax: own.csv:2:1: a quote is not closed in its line");
  CHECK(csv_failure("name,n_ref,v\n\"x\"y,1.5,60\n") ==
        "bad_syntax: own.csv:2:1: something follows a closed quote");
  CHECK(csv_failure("name,line_um,index\nx,q,1.5\n").find("not_found: own.csv:2:3: ") == 0);
  CHECK(csv_failure("name,line_um,index\nx,d,1.5\nx,d,1.6\n").find("bad_value: own.csv:2: ") == 0);
  CHECK(csv_failure("name,n_ref,v\nx,1.5,60\nx,1.5,60\n") ==
        "bad_value: own.csv:3: \"x\" is here twice; first in line 2");
}
