// Bad input: each gives its one line, compared whole, with file, line and column.
#include <doctest/doctest.h>
#include <sys/stat.h>
#include <unistd.h>

#include <array>
#include <chromacore/closed_form.hpp>
#include <chromacore/result_json.hpp>
#include <chromacore/train_file.hpp>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <random>

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

// A good train file of four lines and whatever elements and tables follow.
const std::string head =
    "format = 1\n"
    "band = {reference_um = \"d\", wavelengths_um = [\"F\", \"d\", \"C\"]}\n"
    "aperture = {f_number = 8}\n"
    "field = {half_angle_deg = 1}\n";
const std::string thin = "[[element]]\nmaterial = \"N-BK7\"\npower_per_mm = 0.01\n";
const std::string thick =
    "[[element]]\nmaterial = \"N-BK7\"\nradii_mm = [50, -60]\nthickness_mm = 6\n";

std::string said(const std::string& text) {
  return message_of([&] { return parse_train(text, catalog(), "train.toml"); });
}

// What is said of a good head with these elements and tables behind it; they begin in line 5.
std::string said_of(const std::string& rest) { return said(head + rest); }

// What is said of a train with one element and this band, which is in lines 2 and following.
std::string said_of_band(const std::string& band) {
  return said("format = 1\n[band]\n" + band +
              "[aperture]\nf_number = 8\n[field]\nhalf_angle_deg = 1\n" + thin);
}

std::string said_of_surfaces(const std::string& rows) {
  return message_of([&] {
    return parse_surfaces("radius_mm,thickness_mm,material,clear_diameter_mm\n" + rows, catalog(),
                          "list.csv");
  });
}

std::string replaced(std::string text, const std::string& from, const std::string& to) {
  const std::size_t at = text.find(from);
  REQUIRE(at != std::string::npos);
  return text.replace(at, from.size(), to);
}

std::string repeated(const std::string& text, int times) {
  std::string all;
  for (int i = 0; i < times; ++i) all += text;
  return all;
}

}  // namespace

TEST_CASE("the good parts of these tests are good") {
  CHECK(said_of(thin) == "no error");
  CHECK(said_of(thick) == "no error");
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4, 0.7]\n") == "no error");
  CHECK(said_of_surfaces("50,6,N-BK7,20\n-60,,,20\n") == "no error");
}

TEST_CASE("bad input: the file as a whole") {
  CHECK(said("") == "not_set: train.toml: the file is empty; a train file begins with format = 1");
  CHECK(said("# nothing but a comment\n") ==
        "not_set: train.toml: the file is empty; a train file begins with format = 1");
  CHECK(said("name = \"no format\"\n") == "not_set: train.toml: the file has no format");
  CHECK(said(replaced(head, "format = 1", "format = 2") + thin) ==
        "bad_value: train.toml:1:10: format is 2; this version reads format 1");
  CHECK(said(replaced(head, "format = 1", "format = \"1\"") + thin) ==
        "bad_value: train.toml:1:10: format is \"1\"; expected a number");
  CHECK(said(replaced(head, "format = 1", "format = 1.5") + thin) ==
        "bad_value: train.toml:1:10: format is 1.5; expected a whole number");
  CHECK(said(head) == "not_set: train.toml: the train has no element; expected [[element]] tables");
  CHECK(said("format = 1\n" + thin) == "not_set: train.toml: the file has no [band]");
  CHECK(said(replaced(head, "aperture = {f_number = 8}\n", "") + thin) ==
        "not_set: train.toml: the file has no [aperture]");
  CHECK(said(replaced(head, "field = {half_angle_deg = 1}\n", "") + thin) ==
        "not_set: train.toml: the file has no [field]");
}

TEST_CASE("bad input: an unknown key, with the nearest") {
  CHECK(said("format = 1\nbnad = 3\n") ==
        "unknown_key: train.toml:2:8: unknown key \"bnad\"; nearest: band");
  CHECK(said_of("[[element]]\nmaterial = \"N-BK7\"\npower_per_m = 0.01\n") ==
        "unknown_key: train.toml:7:15: element 1: unknown key \"power_per_m\" in [[element]]; "
        "nearest: power_per_mm");
  CHECK(said_of("[stop]\nelment = 1\n" + thin) ==
        "unknown_key: train.toml:6:10: unknown key \"elment\" in [stop]; nearest: element");
  CHECK(said_of("[object]\nxyz = 1\n" + thin) ==
        "unknown_key: train.toml:6:7: unknown key \"xyz\" in [object]; one of: distance_mm");
  CHECK(said_of(thin + "[[require]]\nquantity = \"strength\"\nbuget = 1\n") ==
        "unknown_key: train.toml:10:9: unknown key \"buget\" in [[require]]; nearest: budget");
  CHECK(said_of(thin + "[[vary]]\nelement = 1\nparamter = \"power_per_mm\"\n") ==
        "unknown_key: train.toml:10:12: unknown key \"paramter\" in [[vary]]; nearest: parameter");
  CHECK(said_of(thin + "[[material]]\nnmae = \"x\"\n") ==
        "unknown_key: train.toml:9:8: unknown key \"nmae\" in [[material]]; nearest: name");
}

TEST_CASE("bad input: a text that is no TOML") {
  CHECK(said_of("[[element]]\nmaterial = N-BK7\n") ==
        "bad_syntax: train.toml:6:12: a text without quotes; expected \"N-BK7\"");
  CHECK(said_of("[[element]]\nmaterial = \"N-BK7\n") ==
        "bad_syntax: train.toml:6:18: not TOML: Error while parsing string: unescaped control "
        "characters other than TAB (U+0009) are explicitly prohibited");
  CHECK(said_of("[[element]]\npower_per_mm = 0,0112\n") ==
        "bad_syntax: train.toml:6:17: a decimal comma; numbers have a decimal point");
  CHECK(said_of("[[element]]\nradii_mm = [12,5, -20]\nthickness_mm = 1\nmaterial = \"N-BK7\"\n") ==
        "bad_value: train.toml:6:12: element 1: radii_mm needs two values, front and back; it has "
        "3; a decimal comma? numbers have a decimal point");
  CHECK(said_of("[[element]]\nradii_mm = \"12,5\"\n") ==
        "bad_value: train.toml:6:12: element 1: radii_mm is \"12,5\"; expected a list in [ ]");
  CHECK(said_of("[[element]]\nmaterial = \"N-BK7\"\npower_per_mm = \"0,01\"\n") ==
        "bad_value: train.toml:7:16: element 1: power_per_mm is \"0,01\"; expected a number with a "
        "decimal point");
  CHECK(said_of(thin + "power_per_mm = 0.02\n") ==
        "bad_syntax: train.toml:8:16: not TOML: Error while parsing key-value pair: cannot "
        "redefine existing floating-point 'power_per_mm'");
  CHECK(said("format = 1\nname = \"\xE9t\xE9\"\n") ==
        "bad_syntax: train.toml:2:8: not TOML: Encountered invalid utf-8 sequence");
  CHECK(said("format = 1\nname = 1\n") ==
        "bad_value: train.toml:2:8: name is 1; expected a text in quotes");
  CHECK(said(std::string("format = 1\n\0\n", 13)) ==
        "bad_syntax: train.toml:2:1: not TOML: Error while parsing root table: expected keys, "
        "tables, whitespace or comments, saw '\\u0000'");
}

TEST_CASE("bad input: values of another type") {
  CHECK(said_of("[[element]]\nmaterial = 7\npower_per_mm = 0.01\n") ==
        "bad_value: train.toml:6:12: element 1: material is 7; expected a text in quotes");
  CHECK(said_of("[[element]]\nmaterial = \"N-BK7\"\npower_per_mm = true\n") ==
        "bad_value: train.toml:7:16: element 1: power_per_mm is true; expected a number");
  CHECK(said_of("[[element]]\nmaterial = \"N-BK7\"\nradii_mm = 50\nthickness_mm = 3\n") ==
        "bad_value: train.toml:7:12: element 1: radii_mm is 50; expected a list in [ ]");
  CHECK(said_of(thick + "cemented = \"yes\"\n") ==
        "bad_value: train.toml:9:12: element 1: cemented is \"yes\"; expected true or false");
  CHECK(said_of("[element]\nmaterial = \"N-BK7\"\n") ==
        "bad_value: train.toml:5:1: element is a table; expected tables [[element]]");
  CHECK(said_of("[[stop]]\nelement = 1\n" + thin) ==
        "bad_value: train.toml:5:1: stop is a list; expected the table [stop]");
  CHECK(said_of("[stop]\nelement = 1.5\n" + thin) ==
        "bad_value: train.toml:6:11: element is 1.5; expected a whole number");
  CHECK(said_of("[stop]\nside = \"left\"\n" + thin) ==
        "bad_value: train.toml:6:8: side is \"left\"; expected \"front\" or \"back\"");
  CHECK(said_of("element = [1, 2]\n") ==
        "bad_value: train.toml:5:12: element is 1; expected tables [[element]]");
  CHECK(said("format = 1\nname = 2026-01-01\n") ==
        "bad_value: train.toml:2:8: name is a date; expected a text in quotes");
}

TEST_CASE("bad input: bands and lines") {
  CHECK(said_of_band("wavelengths_um = [0.4, 0.7]\n") ==
        "not_set: train.toml:2:1: [band] has no reference_um");
  CHECK(said_of_band("reference_um = \"d\"\n") ==
        "not_set: train.toml:2:1: [band] has no wavelengths; give wavelengths_um, ends_um and "
        "samples, or weight_file");
  CHECK(said_of_band("reference_um = \"x\"\nwavelengths_um = [0.4, 0.7]\n") ==
        "not_found: train.toml:3:16: no spectral line \"x\"; the letters are i, h, g, F', F, e, d, "
        "D, C', C, r, A', s, t");
  CHECK(said_of_band("reference_um = \"0.5\"\nwavelengths_um = [0.4, 0.7]\n") ==
        "not_found: train.toml:3:16: no spectral line \"0.5\"; a wavelength is a number in um, "
        "without quotes");
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4, -0.7]\n") ==
        "bad_value: train.toml:4:24: a wavelength of -0.7 um; expected a positive number");
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4, nan]\n") ==
        "bad_value: train.toml:4:24: a wavelength of nan um; expected a positive number");
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4]\n") ==
        "not_set: train.toml:4:18: band: 1 wavelengths; expected two or more, a short and a long "
        "end");
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4, 0.4]\n") ==
        "bad_value: train.toml:4:18: band: wavelength 0.4 um twice; expected different ones");
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4, 0.7]\nweights = [1]\n") ==
        "bad_value: train.toml:5:11: band: 1 weights for 2 wavelengths; expected one each");
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4, 0.7]\nweights = [0, 0]\n") ==
        "bad_value: train.toml:5:11: band: all weights are 0; expected one above 0 at least");
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4, 0.7]\nweights = [1, -1]\n") ==
        "bad_value: train.toml:5:11: band: a weight of -1; expected 0 or a positive number");
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4, 0.7]\nsamples = 5\n") ==
        "bad_value: train.toml:5:11: samples goes with ends_um, not with wavelengths_um");
  CHECK(said_of_band("reference_um = \"d\"\nends_um = [0.4, 0.7]\nsamples = 5\nweights = [1]\n") ==
        "bad_value: train.toml:6:11: weights goes with wavelengths_um, not with ends_um");
  CHECK(said_of_band("reference_um = \"d\"\nends_um = [0.4, 0.7]\nwavelengths_um = [0.4, 0.7]\n") ==
        "bad_value: train.toml:4:11: wavelengths_um and ends_um in one [band]; give one");
  CHECK(said_of_band("reference_um = \"d\"\nends_um = [0.4]\nsamples = 5\n") ==
        "bad_value: train.toml:4:11: ends_um needs two wavelengths; it has 1");
  CHECK(said_of_band("reference_um = \"d\"\nends_um = [0.4, 0.7]\n") ==
        "not_set: train.toml:2:1: [band] has no samples");
  CHECK(said_of_band("reference_um = \"d\"\nends_um = [0.4, 0.7]\nsamples = 1\n") ==
        "bad_value: train.toml:5:11: band: 1 samples; expected 2 or more");
  CHECK(said_of_band("reference_um = \"d\"\nends_um = [0.4, 0.7]\nsamples = 10001\n") ==
        "too_large: train.toml:4:11: band: 10001 samples; expected at most 10000");
  CHECK(said_of_band("reference_um = \"d\"\nweight_file = \"no-such.csv\"\n") ==
        "file_access: train.toml:4:15: weight_file \"no-such.csv\": cannot read the file: no such "
        "file");
}

TEST_CASE("bad input: a wavelength outside a source's range") {
  CHECK(said_of_band("reference_um = \"d\"\nwavelengths_um = [0.4, 3.2]\n") ==
        "out_of_range: train.toml:4:24: element 1: material N-BK7: no index at 3.2 um; its source "
        "covers 0.3 to 2.5 um");
  CHECK(said_of_band("reference_um = 0.2\nwavelengths_um = [0.4, 0.7]\n") ==
        "out_of_range: train.toml:3:16: element 1: material N-BK7: no index at 0.2 um; its source "
        "covers 0.3 to 2.5 um");
  CHECK(said_of_band("reference_um = \"d\"\nends_um = [0.4, 3.2]\nsamples = 3\n") ==
        "out_of_range: train.toml:4:11: element 1: material N-BK7: no index at 3.2 um; its source "
        "covers 0.3 to 2.5 um");
  CHECK(said_of(
            thin +
            "[[require]]\nquantity = \"axial_color_mm\"\nbetween_um = [\"F\", 4]\ntarget = 0\n") ==
        "out_of_range: train.toml:10:20: element 1: material N-BK7: no index at 4 um; its source "
        "covers 0.3 to 2.5 um");
  CHECK(said_of("[[element]]\nmaterial = \"mine\"\npower_per_mm = 0.01\n[[material]]\nname = "
                "\"mine\"\nlines_um = [\"F\", \"d\"]\nindices = [1.52, 1.51]\n") ==
        "out_of_range: train.toml:2:57: element 1: material mine: no index at 0.6562725 um; its "
        "source covers 0.4861327 to 0.5875618 um");
}

TEST_CASE("bad input: a weight file") {
  const fs::path folder =
      fs::temp_directory_path() / ("chromacore-bad-" + std::to_string(::getpid()));
  fs::create_directory(folder);
  const std::string file = (folder / "train.toml").string();
  const auto said_of_weights = [&](const std::string& csv) {
    std::ofstream(folder / "w.csv") << csv;
    const std::string text = "format = 1\nband = {reference_um = \"d\", weight_file = \"w.csv\"}\n";
    const std::string message = message_of([&] { return parse_train(text, catalog(), file); });
    return replaced(message, folder.string(), "FOLDER");
  };
  CHECK(said_of_weights("wavelength_um,wieght\n0.4,1\n") ==
        "unknown_key: FOLDER/w.csv:1:15: unknown column \"wieght\"; nearest: weight");
  CHECK(said_of_weights("wavelength_um,weight\n0.4,1\n0.5,x\n") ==
        "bad_syntax: FOLDER/w.csv:3:5: weight is \"x\"; expected a number");
  CHECK(said_of_weights("wavelength_um,weight\n0.4,1\nq,1\n") ==
        "not_found: FOLDER/w.csv:3:1: no spectral line \"q\"; the letters are i, h, g, F', F, e, "
        "d, D, C', C, r, A', s, t");
  CHECK(said_of_weights("wavelength_um;weight\n0,4;1\n") ==
        "bad_syntax: FOLDER/w.csv:1:1: ';' between cells; expected commas, and numbers with a "
        "decimal point");
  CHECK(said_of_weights("wavelength_um,weight\n0.4,1\n") ==
        "not_set: FOLDER/w.csv: band: 1 wavelengths; expected two or more, a short and a long end");
  fs::remove_all(folder);
}

TEST_CASE("bad input: materials") {
  CHECK(said_of("[[element]]\nmaterial = \"NBK7\"\npower_per_mm = 0.01\n") ==
        "not_found: train.toml:6:12: element 1: no material \"NBK7\"; nearest: N-BK7, N-BK7HT, "
        "N-ZK7");
  CHECK(said_of("[[element]]\nmaterial = \"F2\"\npower_per_mm = 0.01\n") ==
        "ambiguous: train.toml:6:12: element 1: several materials are \"F2\"; say which: "
        "SCHOTT/F2, HIKARI/F2, CDGM/F2");
  CHECK(said_of("[[element]]\npower_per_mm = 0.01\n") ==
        "not_set: train.toml:5:1: element 1: [[element]] has no material");
  CHECK(said_of(thin +
                repeated("[[material]]\nname = \"x\"\nlines_um = [\"d\"]\nindices = [1.5]\n", 2)) ==
        "bad_value: train.toml:13:8: a material \"x\" is in the catalogue already");
  CHECK(said_of(thin + "[[material]]\nname = \"x\"\n") ==
        "not_set: train.toml:8:1: [[material]] has no index; expected form and coefficients, "
        "lines_um and indices, or n_ref and v");
  CHECK(
      said_of(thin + "[[material]]\nname = \"x\"\nlines_um = [\"d\", \"F\"]\nindices = [1.5]\n") ==
      "bad_value: train.toml:11:11: indices has 1 numbers, lines_um 2");
  CHECK(said_of(thin +
                "[[material]]\nname = \"x\"\nlines_um = [\"d\", \"d\"]\nindices = [1.5, 1.6]\n") ==
        "bad_value: train.toml:8:1: material x: two indices at 0.5875618 um; expected one");
}

TEST_CASE("bad input: figures of an element") {
  const auto radii = [](const std::string& values) {
    return said_of("[[element]]\nmaterial = \"N-BK7\"\nradii_mm = " + values +
                   "\nthickness_mm = 6\n");
  };
  CHECK(radii("[0, -60]") ==
        "bad_value: train.toml:7:13: element 1: radii_mm[1] is 0; a radius is a number other than "
        "0, or inf for flat");
  CHECK(radii("[50, 0.0]") ==
        "bad_value: train.toml:7:17: element 1: radii_mm[2] is 0; a radius is a number other than "
        "0, or inf for flat");
  CHECK(radii("[50, nan]") ==
        "bad_value: train.toml:7:17: element 1: radii_mm[2] is nan; expected a finite number");
  CHECK(
      radii("[50]") ==
      "bad_value: train.toml:7:12: element 1: radii_mm needs two values, front and back; it has 1");
  CHECK(radii("[50, -60, 70]") ==
        "bad_value: train.toml:7:12: element 1: radii_mm needs two values, front and back; it has "
        "3; a decimal comma? numbers have a decimal point");
  CHECK(radii("[1e-320, -60]") ==
        "bad_value: train.toml:5:1: element 1: curvatures_per_mm[1] is inf; expected a finite "
        "number");
  CHECK(said_of(replaced(thick, "thickness_mm = 6", "thickness_mm = -6")) ==
        "bad_value: train.toml:8:16: element 1: thickness_mm is -6; expected a finite number, 0 or "
        "more");
  CHECK(said_of(replaced(thick, "thickness_mm = 6", "thickness_mm = nan")) ==
        "bad_value: train.toml:8:16: element 1: thickness_mm is nan; expected a finite number");
  CHECK(said_of(replaced(thick, "thickness_mm = 6\n", "")) ==
        "not_set: train.toml:5:1: element 1: [[element]] has no thickness_mm");
  CHECK(said_of(replaced(thin, "0.01", "nan")) ==
        "bad_value: train.toml:7:16: element 1: power_per_mm is nan; expected a finite number");
  CHECK(said_of(replaced(thin, "0.01", "inf")) ==
        "bad_value: train.toml:7:16: element 1: power_per_mm is inf; expected a finite number");
  CHECK(said_of(thin + thick + "gap_after_mm = -1\n") ==
        "bad_value: train.toml:12:16: element 2: gap_after_mm is -1; expected a finite number, 0 "
        "or more");
  CHECK(said_of(thick + "clear_diameter_mm = 0\n") ==
        "bad_value: train.toml:9:21: element 1: clear_diameter_mm is 0; expected a positive finite "
        "number");
  CHECK(said_of(thick + "power_per_mm = 0.01\n") ==
        "bad_value: train.toml:9:16: element 1: power_per_mm does not belong to a thick element "
        "(radii_mm or curvatures_per_mm)");
  CHECK(said_of(thin + "thickness_mm = 2\n") ==
        "bad_value: train.toml:8:16: element 1: thickness_mm does not belong to a thin element "
        "(power_per_mm)");
  CHECK(said_of(thick + "curvatures_per_mm = [0, 0]\n") ==
        "bad_value: train.toml:9:21: element 1: radii_mm and curvatures_per_mm in one element; "
        "give one");
  CHECK(said_of("[[element]]\nmaterial = \"N-BK7\"\n") ==
        "not_set: train.toml:5:1: element 1: no figures; give power_per_mm (thin), or radii_mm and "
        "thickness_mm (thick)");
  CHECK(
      said_of("[[element]]\nkind = \"mirror\"\nradii_mm = [50, 50]\n") ==
      "bad_value: train.toml:6:8: element 1: kind is \"mirror\"; this version has no mirrors yet");
  CHECK(said_of("[[element]]\nkind = \"lens\"\n") ==
        "bad_value: train.toml:6:8: element 1: kind is \"lens\"; expected \"diffractive\", or "
        "leave it out for a refracting element");
  CHECK(
      said_of("[[element]]\nkind = \"diffractive\"\npower_per_mm = 0.01\nmaterial = \"N-BK7\"\n") ==
      "bad_value: train.toml:8:12: element 1: material does not belong to a diffractive surface");
}

TEST_CASE("bad input: a joint marked cemented") {
  CHECK(said_of(thick + "cemented = true\n") ==
        "bad_value: train.toml:5:1: element 1: cemented, but no element with two radii follows");
  CHECK(said_of(thick + "cemented = true\n" + thin) ==
        "bad_value: train.toml:5:1: element 1: cemented, but no element with two radii follows");
  CHECK(said_of(thick + "cemented = true\ngap_after_mm = 1\n" + thick) ==
        "bad_value: train.toml:5:1: element 1: cemented to the next element, but gap_after_mm is "
        "1; expected 0");
  CHECK(said_of(thick + "cemented = true\n" + thick) ==
        "bad_value: train.toml:5:1: element 1: cemented to the next element, but the radii of the "
        "joint are -60 and 50 mm; expected equal ones");
}

TEST_CASE("bad input: stop, object, aperture, field, detector, surroundings") {
  CHECK(said_of("[stop]\nelement = 2\n" + thin) ==
        "bad_value: train.toml:6:11: stop: element is 2; the train has elements 1 to 1");
  CHECK(said_of("[stop]\nelement = 0\n" + thin) ==
        "bad_value: train.toml:6:11: stop: element is 0; the train has elements 1 to 1");
  CHECK(said_of("[stop]\noffset_mm = 3\n" + thick) ==
        "bad_value: train.toml:6:13: stop: offset_mm is 3 from the front of element 1, inside it; "
        "expected a place in the gap before it, 0 or less");
  CHECK(said_of("[stop]\nside = \"back\"\noffset_mm = 3\n" + thin + "gap_after_mm = 2\n" + thin) ==
        "bad_value: train.toml:7:13: stop: offset_mm is 3 from the back of element 1, past its "
        "neighbour; the gap there is 2 mm");
  CHECK(said_of("[object]\ndistance_mm = -5\n" + thin) ==
        "bad_value: train.toml:6:15: distance_mm is -5; expected a positive number, or inf for an "
        "object at infinity");
  CHECK(said_of("[object]\ndistance_mm = nan\n" + thin) ==
        "bad_value: train.toml:6:15: distance_mm is nan; expected a finite number");
  CHECK(said(replaced(head, "f_number = 8", "f_number = 0") + thin) ==
        "bad_value: train.toml:3:24: f_number is 0; expected a positive finite number");
  CHECK(said(replaced(head, "f_number = 8", "") + thin) ==
        "not_set: train.toml:3:12: [aperture] is empty; give one of: entrance_pupil_diameter_mm, "
        "f_number, object_na");
  CHECK(said(replaced(head, "f_number = 8", "f_number = 8, object_na = 0.1") + thin) ==
        "bad_value: train.toml:3:39: [aperture] has f_number and object_na; give one");
  CHECK(said(replaced(head, "f_number = 8", "object_na = 0.1") + thin) ==
        "bad_value: train.toml:3:25: object_na needs an object at a distance; for one at infinity "
        "give entrance_pupil_diameter_mm or f_number");
  CHECK(said(replaced(head, "half_angle_deg = 1", "half_angle_deg = 90") + thin) ==
        "bad_value: train.toml:4:27: half_angle_deg is 90; expected a number between -90 and 90");
  CHECK(said(replaced(head, "half_angle_deg = 1", "object_height_mm = 3") + thin) ==
        "bad_value: train.toml:4:29: object_height_mm needs an object at a distance; for one at "
        "infinity give half_angle_deg or image_height_mm");
  CHECK(said_of("[detector]\npixel_um = 0\n" + thin) ==
        "bad_value: train.toml:6:12: pixel_um is 0; expected a positive finite number");
  CHECK(said_of("[surroundings]\ntemperature_C = -300\n" + thin) ==
        "bad_value: train.toml:5:1: surroundings: temperature in C -300; expected a number above "
        "absolute zero, -273.15");
  CHECK(said_of("[surroundings]\npressure_Pa = 1\naltitude_m = 1\n" + thin) ==
        "bad_value: train.toml:7:14: pressure_Pa and altitude_m in one table; give one");
  CHECK(said_of("[surroundings]\naltitude_m = 99000\n" + thin) ==
        "out_of_range: train.toml:6:14: surroundings: no standard atmosphere at an altitude of "
        "99000 m; it is given from -2000 to 20000 m");
  CHECK(said_of("[surroundings]\nhumidity = 50\n" + thin) ==
        "bad_value: train.toml:5:1: surroundings: humidity 50; expected 0 (dry) to 1 (saturated)");
  CHECK(said_of("[surroundings]\npressure_Pa = 500\nhumidity = 1\n" + thin) ==
        "bad_value: train.toml:5:1: surroundings: humidity 1 at 20 C is 2341.17 Pa of vapour, more "
        "than the whole pressure of 500 Pa");
  CHECK(said_of("[surroundings]\ntemperature_C = 60\n[[element]]\nmaterial = \"x\"\npower_per_mm = "
                "0.01\n[[material]]\nname = \"x\"\nlines_um = [\"d\"]\nindices = [1.5]\n") ==
        "out_of_range: train.toml:8:12: element 1: material x: no index at 60 C; it has no dn/dT, "
        "and its index at 20 C is used unchanged within 5 K only");
}

TEST_CASE("bad input: what may vary") {
  const auto vary = [](const std::string& rows) { return said_of(thin + "[[vary]]\n" + rows); };
  CHECK(vary("element = 2\nparameter = \"power_per_mm\"\n") ==
        "bad_value: train.toml:8:1: cannot vary power_per_mm of element 2; the train has 1");
  CHECK(vary("element = 0\nparameter = \"power_per_mm\"\n") ==
        "bad_value: train.toml:8:1: cannot vary power_per_mm of element 0; the train has 1");
  CHECK(vary("element = 1\nparameter = \"powr_per_mm\"\n") ==
        "not_found: train.toml:10:13: no parameter \"powr_per_mm\"; nearest: power_per_mm, "
        "gap_after_mm, curvature_back_per_mm");
  CHECK(vary("element = 1\nparameter = \"thickness_mm\"\n") ==
        "bad_value: train.toml:8:1: element 1: it has no thickness_mm, being without thickness; "
        "power_per_mm and gap_after_mm are what it has");
  CHECK(vary("element = 1\nparameter = \"power_per_mm\"\nmin = 0.1\nmax = -0.1\n") ==
        "bad_value: train.toml:8:1: element 1: power_per_mm: min 0.1 is above max -0.1");
  CHECK(vary("element = 1\nparameter = \"power_per_mm\"\nmin = nan\n") ==
        "bad_value: train.toml:11:7: min is nan; expected a finite number");
  CHECK(vary("parameter = \"power_per_mm\"\n") ==
        "not_set: train.toml:8:1: [[vary]] has no element");
  CHECK(vary("element = 1\nparameter = \"power_per_mm\"\n[[vary]]\nelement = 1\nparameter = "
             "\"power_per_mm\"\n") ==
        "bad_value: train.toml:11:1: element 1: power_per_mm is to vary twice; name it once");
}

TEST_CASE("bad input: what is required") {
  const auto require = [](const std::string& rows) {
    return said_of(thin + "[[require]]\n" + rows);
  };
  CHECK(require("quantity = \"focal_lenght_mm\"\ntarget = 100\n") ==
        "not_found: train.toml:9:12: no quantity \"focal_lenght_mm\"; nearest: focal_length_mm, "
        "track_length_mm, back_focal_distance_mm");
  CHECK(require("quantity = \"focal_length_mm\"\n") ==
        "bad_value: train.toml:8:1: focal_length_mm: nothing is asked; give target, at_least or "
        "at_most");
  CHECK(require("quantity = \"focal_length_mm\"\ntarget = 100\nbudget = 0\n") ==
        "bad_value: train.toml:8:1: focal_length_mm: budget is 0; a budget is a number above 0");
  CHECK(require("quantity = \"focal_length_mm\"\ntarget = 100\nat_least = 1\n") ==
        "bad_value: train.toml:8:1: focal_length_mm: target stands beside at_least or at_most; "
        "give one or the other");
  CHECK(require("quantity = \"strength\"\nat_least = 3\nat_most = 2\nbudget = 1\n") ==
        "bad_value: train.toml:8:1: strength: at_least 3 is above at_most 2");
  CHECK(require("quantity = \"strength\"\nat_most = 2\n") ==
        "not_set: train.toml:8:1: strength: it has no default budget; give budget");
  CHECK(require("quantity = \"axial_sum_mm\"\nelement = 2\nat_most = 2\nbudget = 1\n") ==
        "bad_value: train.toml:8:1: axial_sum_mm: element 2 is not there; the train has 1");
  CHECK(require("quantity = \"axial_sum_mm\"\nelement = -1\nat_most = 2\nbudget = 1\n") ==
        "bad_value: train.toml:10:11: element is -1; elements count from 1");
  CHECK(require("quantity = \"strength\"\nelement = 1\nat_most = 2\nbudget = 1\n") ==
        "bad_value: train.toml:8:1: strength: it belongs to the whole train; leave element out");
  CHECK(require("quantity = \"axial_color_mm\"\nbetween_um = [\"F\"]\ntarget = 0\n") ==
        "bad_value: train.toml:10:14: between_um needs two wavelengths; it has 1");
  CHECK(require("quantity = \"axial_color_mm\"\nbetween_um = [\"F\", \"F\"]\ntarget = 0\n") ==
        "bad_value: train.toml:8:1: axial_color_mm: between_um names one line twice; give two");
}

TEST_CASE("bad input: nested too deeply, in every way, a few levels and very many") {
  for (const int levels : {20, 200000}) {
    CAPTURE(levels);
    // `start`, so many times `level`, `end`.
    const auto deep = [&](std::string start, const std::string& level, const std::string& end) {
      return said(start.append(repeated(level, levels)).append(end));
    };
    CHECK(deep("x = ", "[", "") ==
          "too_large: train.toml:1:21: nested too deeply; at most 16 levels");
    CHECK(deep("x = ", "{a = ", "") ==
          "too_large: train.toml:1:85: nested too deeply; at most 16 levels");
    CHECK(deep("x", ".a", " = 1\n") ==
          "too_large: train.toml:1:34: nested too deeply; at most 16 levels");
    CHECK(deep("[x", ".a", "]\n") ==
          "too_large: train.toml:1:35: nested too deeply; at most 16 levels");
    CHECK(deep("[[x", ".a", "]]\n") ==
          "too_large: train.toml:1:36: nested too deeply; at most 16 levels");
  }
}

TEST_CASE("bad input: a surface list") {
  const auto with_header = [](const std::string& text) {
    return message_of([&] { return parse_surfaces(text, catalog(), "list.csv"); });
  };
  CHECK(with_header("") ==
        "bad_syntax: list.csv: no header line; expected column names with commas between");
  CHECK(with_header("radius_mm,thickness_mm,material\n") == "not_set: list.csv: no surface");
  CHECK(with_header("radius_mm,thickness_mm\n1,2\n") ==
        "not_set: list.csv: no column material; expected "
        "radius_mm,thickness_mm,material,clear_diameter_mm");
  CHECK(with_header("radius,thickness_mm,material\n1,2,\n") ==
        "unknown_key: list.csv:1:1: unknown column \"radius\"; nearest: radius_mm");
  CHECK(with_header("radius_mm;thickness_mm;material\n1,5;2;\n") ==
        "bad_syntax: list.csv:1:1: ';' between cells; expected commas, and numbers with a decimal "
        "point");
  CHECK(with_header("50,6,N-BK7,20\n-60,,,20\n") ==
        "unknown_key: list.csv:1:1: unknown column \"50\"; one of: radius_mm, thickness_mm, "
        "material, clear_diameter_mm, stop");
  CHECK(said_of_surfaces("50,6,NBK7,20\n-60,,,20\n") ==
        "not_found: list.csv:2:6: no material \"NBK7\"; nearest: N-BK7, N-BK7HT, N-ZK7");
  CHECK(said_of_surfaces("50,6,F2,20\n-60,,,20\n") ==
        "ambiguous: list.csv:2:6: several materials are \"F2\"; say which: SCHOTT/F2, HIKARI/F2, "
        "CDGM/F2");
  CHECK(said_of_surfaces("0,6,N-BK7,20\n-60,,,20\n") ==
        "bad_value: list.csv:2:1: radius_mm is 0; a radius is a number other than 0, or inf for "
        "flat");
  CHECK(said_of_surfaces("nan,6,N-BK7,20\n-60,,,20\n") ==
        "bad_value: list.csv:2:1: radius_mm is \"nan\"; expected a finite number");
  CHECK(said_of_surfaces(",6,N-BK7,20\n-60,,,20\n") == "not_set: list.csv:2: no radius_mm");
  CHECK(said_of_surfaces("50,,N-BK7,20\n-60,,,20\n") == "not_set: list.csv:2: no thickness_mm");
  CHECK(
      said_of_surfaces("50,-6,N-BK7,20\n-60,,,20\n") ==
      "bad_value: list.csv:2: surface 1: thickness_mm is -6; expected a finite number, 0 or more");
  CHECK(said_of_surfaces("\"50,5\",6,N-BK7,20\n-60,,,20\n") ==
        "bad_syntax: list.csv:2:1: radius_mm is \"50,5\"; expected a number with a decimal point");
  CHECK(said_of_surfaces("50,5,6,N-BK7,20\n-60,,,20\n") ==
        "bad_syntax: list.csv:2:14: the row has 5 cells, the header 4; a decimal comma? numbers "
        "have a decimal point");
  CHECK(said_of_surfaces("50,6,N-BK7,20\n") ==
        "bad_value: list.csv:2: surface 1: glass (SCHOTT/N-BK7) behind the last surface; expected "
        "a list that ends in the surroundings");
  CHECK(said_of_surfaces("50,6,N-BK7,20\n-60,,,-20\n") ==
        "bad_value: list.csv:3:7: clear_diameter_mm is -20; expected a positive finite number");
  CHECK(
      said_of_surfaces("50,6,N-BK7,20\n-60,1,,20\n70,1,,\n") ==
      "bad_value: list.csv:4: surface 3: a curved surface between equal media (the surroundings)");
  CHECK(with_header("radius_mm,thickness_mm,material,stop\n50,6,N-BK7,yes\n-60,,,\n") ==
        "bad_value: list.csv:2:12: stop is \"yes\"; expected \"stop\" in the stop's row and "
        "nothing elsewhere");
}

TEST_CASE("bad input: files that cannot be read") {
  const fs::path folder =
      fs::temp_directory_path() / ("chromacore-bad-" + std::to_string(::getpid()));
  fs::create_directory(folder);
  const auto said_of_file = [&](const std::string& path) {
    const std::string message = message_of([&] { return read_train(path, catalog()); });
    return path.find(folder.string()) == 0 ? replaced(message, folder.string(), "FOLDER") : message;
  };
  CHECK(said_of_file("no-such.toml") ==
        "file_access: no-such.toml: cannot read the file: no such file");
  CHECK(said_of_file("/") == "file_access: /: cannot read the file: it is a folder");
  CHECK(said_of_file("") == "file_access: cannot read the file: no such file");

  const std::string large = (folder / "large.toml").string();
  std::ofstream(large) << "";
  fs::resize_file(large, 100u << 20);  // sparse
  CHECK(said_of_file(large) ==
        "too_large: FOLDER/large.toml: the file has 104857600 bytes; at most 4194304 are read");
  CHECK(said_of_file("/dev/zero") ==
        "too_large: /dev/zero: the file has more than 4194304 bytes; at most 4194304 are read");
  CHECK(replaced(message_of([&] { return read_surfaces(large, catalog()); }), folder.string(),
                 "FOLDER") ==
        "too_large: FOLDER/large.toml: the file has 104857600 bytes; at most 4194304 are read");

  const std::string locked = (folder / "locked.toml").string();
  std::ofstream(locked) << head;
  fs::permissions(locked, fs::perms::none);
  if (::geteuid() != 0) {
    CHECK(said_of_file(locked) ==
          "file_access: FOLDER/locked.toml: cannot read the file: no permission");
  }
  fs::remove_all(folder);
}

TEST_CASE("bad input: no line is longer than 400 characters, and none has two") {
  const std::string name(5000, 'x');
  for (const std::string& message :
       {said("format = 1\n" + name + " = 1\n"), said("format = 1\nname = 1\n\n\n"),
        said_of("[[element]]\nmaterial = \"" + name + "\"\n"),
        said_of("[[element]]\nmaterial = \"a\\nb\"\npower_per_mm = 1\n")}) {
    CHECK(message.size() <= 400 + std::string("unknown_key: ").size());
    CHECK(message.find('\n') == std::string::npos);
    CHECK(message.find("train.toml:") != std::string::npos);
  }
}

namespace {

using Random = std::mt19937_64;

std::size_t below(std::size_t n, Random& random) { return static_cast<std::size_t>(random() % n); }

// Another number in the place of one of those in the text.
std::string with_another_number(std::string text, Random& random) {
  constexpr std::array others = {"0",   "-0.0", "1",      "-1",     "7",     "0.55",   "1e308",
                                 "inf", "nan",  "1e-320", "-1e-30", "99999", "-1e308", "1e15"};
  std::vector<std::pair<std::size_t, std::size_t>> numbers;  // place and length
  constexpr std::string_view digits = "0123456789.e";
  for (std::size_t at = text.find_first_of("0123456789"); at != text.npos;) {
    const std::size_t end = std::min(text.find_first_not_of(digits, at), text.size());
    numbers.emplace_back(at, end - at);
    at = text.find_first_of("0123456789", end);
  }
  const auto [at, length] = numbers[below(numbers.size(), random)];
  return text.replace(at, length, others[below(others.size(), random)]);
}

// Bytes taken away, doubled, or replaced by what files are made of.
std::string with_other_bytes(std::string text, Random& random) {
  constexpr std::string_view pieces = "[]{}=.,\"'#\n-+e0159_ infa\\\xFF";
  const std::size_t at = below(text.size(), random);
  const std::size_t length = 1 + below(std::min<std::size_t>(text.size() - at, 40), random);
  switch (below(4, random)) {
    case 0:
      return text.erase(at, length);
    case 1:
      return text.insert(at, text.substr(at, length));
    case 2:
      text[at] = pieces[below(pieces.size(), random)];
      return text;
    default:
      return text.insert(at, 1, pieces[below(pieces.size(), random)]);
  }
}

// Extreme values may leave no focus, which is an answer; anything else but an error is none.
void analyze_or_say_why(const TrainFile& file) {
  try {
    const std::string json = to_json(file.train, analyze(file.train, file.required));
    CHECK(json.find("nan") == std::string::npos);
  } catch (const Error& error) {
    CHECK(error.code() != ErrorCode::internal);
  }
}

std::string damaged(std::string text, Random& random) {
  for (std::size_t changes = 1 + below(2, random); changes > 0; --changes) {
    text =
        below(2, random) == 0 ? with_other_bytes(text, random) : with_another_number(text, random);
  }
  return text;
}

}  // namespace

TEST_CASE("bad input: a damaged file is read, or refused in one line with its place") {
  const std::uint64_t seed = test_seed();
  CAPTURE(seed);
  Random random(seed);
  std::ifstream file(std::string(CHROMACORE_FOLDER) + "/tests/written_train.toml");
  const std::string good{std::istreambuf_iterator<char>(file), std::istreambuf_iterator<char>()};
  REQUIRE(said(good) == "no error");
  int read = 0;
  for (int i = 0; i < 3000; ++i) {
    const std::string text = damaged(good, random);
    CAPTURE(text);
    const std::string message = message_of([&] {
      const TrainFile train = parse_train(text, catalog(), "train.toml");
      ++read;
      // What was read can be written and read again.
      static_cast<void>(parse_train(train_text(train, catalog()), catalog(), "written"));
      analyze_or_say_why(train);
    });
    if (message == "no error") continue;
    REQUIRE(message.find(": train.toml:") != std::string::npos);
    REQUIRE(message.find('\n') == std::string::npos);
  }
  CHECK(read > 100);
}

TEST_CASE("bad input: a damaged surface list is read, or refused in one line with its place") {
  const std::uint64_t seed = test_seed();
  CAPTURE(seed);
  Random random(seed);
  const std::string good =
      "radius_mm,thickness_mm,material,clear_diameter_mm,stop\n310,8,N-BK7,50,\n"
      "-230,5,SCHOTT/F2,50,\n-900,2.5,,50,\ninf,20,,,stop\n80,4,N-BK7,,\ninf,0,,,\n";
  const auto said_of_list = [](const std::string& text) {
    return message_of([&] {
      const TrainFile file = parse_surfaces(text, catalog(), "list.csv");
      static_cast<void>(parse_train(train_text(file, catalog()), catalog(), "written"));
    });
  };
  REQUIRE(said_of_list(good) == "no error");
  for (int i = 0; i < 1000; ++i) {
    const std::string text = damaged(good, random);
    CAPTURE(text);
    const std::string message = said_of_list(text);
    if (message == "no error") continue;
    REQUIRE(message.find(": list.csv") != std::string::npos);
    REQUIRE(message.find('\n') == std::string::npos);
  }
}

TEST_CASE("bad input: what only the trace or a closed form can find out") {
  const auto analyzed = [](const std::string& elements) {
    const TrainFile file = parse_train(head + elements, catalog(), "train.toml");
    return message_of([&] { return analyze(file.train, file.required); });
  };
  CHECK(analyzed(replaced(thin, "0.01", "0")) ==
        "degenerate: no focus: the train's total power is 0 per mm; it needs a power other than 0 "
        "at the reference wavelength, from power_per_mm of its elements");
  CHECK(analyzed(thin + replaced(thin, "0.01", "-0.01")) ==
        "degenerate: no focus: the train's total power is 0 per mm; it needs a power other than 0 "
        "at the reference wavelength, from power_per_mm of its elements");
  const Material crown = catalog().at("N-BK7");
  const Band band = Band::of_lines({"F", "d", "C"}, "d");
  CHECK(message_of([&] { return contact_achromat(0.01 * per_mm, crown, crown, band); }) ==
        "degenerate: the two materials have equal V, 64.1673 and 64.1673: no powers of theirs "
        "cancel their colour; take materials of different V");
}
