#include <doctest/doctest.h>

#include <algorithm>
#include <chromacore/band.hpp>
#include <limits>
#include <set>

#include "close.hpp"
#include "message_of.hpp"

using namespace chromacore;
using namespace chromacore::units;
using chromacore::test::close;
using chromacore::test::message_of;

namespace {

constexpr double inf = std::numeric_limits<double>::infinity();
constexpr double not_a_number = std::numeric_limits<double>::quiet_NaN();

std::string said(const Band& band) {
  return message_of([&] { check(band); });
}

Band visible() { return Band::of_lines({"F", "d", "C"}, "d"); }

}  // namespace

TEST_CASE("lines: wavelengths as printed") {
  // R. Paschotta, RP Photonics Encyclopedia, "Standard spectral lines", table 1, nm; ISO 7944 takes
  // d and e as its references, F, C, F' and C' as the ends.
  CHECK(in_um(Line("i").wavelength()) == 0.3650146);
  CHECK(in_um(Line("h").wavelength()) == 0.4046561);
  CHECK(in_um(Line("g").wavelength()) == 0.4358343);
  CHECK(in_um(Line("F'").wavelength()) == 0.4799914);
  CHECK(in_um(Line("F").wavelength()) == 0.4861327);
  CHECK(in_um(Line("e").wavelength()) == 0.546074);
  CHECK(in_um(Line("d").wavelength()) == 0.5875618);
  CHECK(in_um(Line("D").wavelength()) == 0.5892938);
  CHECK(in_um(Line("C'").wavelength()) == 0.6438469);
  CHECK(in_um(Line("C").wavelength()) == 0.6562725);
  CHECK(in_um(Line("r").wavelength()) == 0.7065188);
  CHECK(in_um(Line("s").wavelength()) == 0.85211);
  CHECK(in_um(Line("t").wavelength()) == 1.01398);
  // OHARA, technical information, table of lines.
  CHECK(in_um(Line("A'").wavelength()) == 0.76819);
}

TEST_CASE("lines: D is the middle of the sodium pair") {
  // Pair 588.995095 and 589.592424 nm from memory; D is printed to 0.1 pm.
  CHECK(close(in_um(Line("D").wavelength()), (0.588995095 + 0.589592424) / 2, {.abs = 0.5e-7}));
}

TEST_CASE("lines: the list runs from short to long, each letter once") {
  const auto lines = named_lines();
  CHECK(lines.size() == 14);
  CHECK(std::is_sorted(lines.begin(), lines.end(), [](const NamedLine& a, const NamedLine& b) {
    return a.wavelength < b.wavelength;
  }));
  std::set<std::string_view> letters;
  for (const NamedLine& line : lines) {
    CHECK(letters.insert(line.letter).second);
    CHECK_FALSE(line.emitter.empty());
    CHECK(Line(line.letter).name() == line.letter);
  }
}

TEST_CASE("line: a letter or a plain wavelength") {
  CHECK(Line("F'").letter() == "F'");
  CHECK(Line("F'").name() == "F'");
  CHECK(Line(0.55 * um).name() == "0.55 um");
  CHECK(Line(0.55 * um).letter().empty());
  CHECK(Line(0.5875618 * um).wavelength() == Line("d").wavelength());
  CHECK_FALSE(Line().is_set());
  CHECK(Line().name() == "not set");
}

TEST_CASE("line: what is none") {
  const auto letter = [](const char* text) { return message_of([&] { (void)Line(text); }); };
  CHECK(letter("x") ==
        "not_found: no spectral line \"x\"; the letters are i, h, g, F', F, e, d, D, C', C, r, A', "
        "s, t");
  CHECK(letter("f").starts_with("not_found: no spectral line \"f\"; the letters are"));
  CHECK(letter("0.55") ==
        "not_found: no spectral line \"0.55\"; a wavelength is a number in um, without quotes");
  CHECK(letter("").starts_with("not_found"));
  CHECK(letter(nullptr).starts_with("not_found"));
  for (const double bad : {0.0, -0.5, not_a_number, inf})
    CHECK(message_of([&] { (void)Line(bad * um); }).starts_with("bad_value: a wavelength of "));
  CHECK(message_of([] { (void)Line(0.0 * um); }) ==
        "bad_value: a wavelength of 0 um; expected a positive number");
}

TEST_CASE("band: the ends are the shortest and the longest, in whatever order") {
  const Band band = Band::of_lines({"d", "C", "F", "e"}, "d");
  CHECK(band.shortest().name() == "F");
  CHECK(band.longest().name() == "C");
  CHECK(band.primary_pair().first.name() == "F");
  CHECK(band.primary_pair().second.name() == "C");
  CHECK(band.wavelengths[0].name() == "d");
}

TEST_CASE("band: equal steps from end to end") {
  const Band band = Band::of_range(0.4 * um, 0.8 * um, 5, 0.6 * um);
  REQUIRE(band.wavelengths.size() == 5);
  for (std::size_t i = 0; i < 5; ++i)
    CHECK(close(in_um(band.wavelengths[i].wavelength()), 0.4 + 0.1 * double(i), {.rel = 1e-15}));
  CHECK(Band::of_range("C", "F", 21, "d").longest().name() == "C");
  CHECK(Band::of_range("F", "C", 2, "d").wavelengths.size() == 2);
  const auto range = [](Line from, Line to, int samples) {
    return message_of([&] { (void)Band::of_range(from, to, samples, "d"); });
  };
  CHECK(range("F", "C", 1) == "bad_value: band: 1 samples; expected 2 or more");
  CHECK(range("F", "C", 2000000000).starts_with("too_large"));
  CHECK(range("F", {}, 3) == "not_set: band: an end that is not set");
  CHECK(range("F", "F", 3).starts_with("bad_value: band: wavelength F twice"));
}

TEST_CASE("band: weights are scaled to the sum 1") {
  Band band = visible();
  for (const double weight : band.normalized_weights())
    CHECK(close(weight, 1.0 / 3, {.rel = 1e-15}));
  band.weights = {1, 2, 1};
  CHECK(band.normalized_weights() == std::vector<double>{0.25, 0.5, 0.25});
  band.weights = {0, 1e308, 1e308};
  CHECK(band.normalized_weights() == std::vector<double>{0, 0.5, 0.5});
  band.weights = {5e-324, 0, 0};
  CHECK(band.normalized_weights() == std::vector<double>{1, 0, 0});
}

TEST_CASE("band: what is none") {
  Band band;
  CHECK(said(band) == "not_set: band: no reference wavelength");
  band.reference = "d";
  CHECK(said(band) == "not_set: band: 0 wavelengths; expected two or more, a short and a long end");
  CHECK(message_of([&] { (void)band.shortest(); }) == "not_set: band: no wavelengths");
  CHECK(message_of([&] { (void)band.longest(); }) == "not_set: band: no wavelengths");
  band.wavelengths = {"F", Line()};
  CHECK(said(band) == "not_set: band: a wavelength that is not set");
  band.wavelengths = {"F", "C", 0.4861327 * um};
  CHECK(said(band).starts_with("bad_value: band: wavelength "));
  band = visible();
  band.weights = {1, 1};
  CHECK(said(band) == "bad_value: band: 2 weights for 3 wavelengths; expected one each");
  CHECK(message_of([&] { (void)band.normalized_weights(); }) == said(band));
  band.weights = {1, -1, 1};
  CHECK(said(band) == "bad_value: band: a weight of -1; expected 0 or a positive number");
  band.weights = {1, not_a_number, 1};
  CHECK(said(band).starts_with("bad_value"));
  band.weights = {1, inf, 1};
  CHECK(said(band).starts_with("bad_value"));
  band.weights = {0, 0, 0};
  CHECK(said(band) == "bad_value: band: all weights are 0; expected one above 0 at least");
}

TEST_CASE("band: the reference may lie outside the ends") {
  CHECK(said(Band::of_lines({"F", "C"}, "t")) == "no error");
}
