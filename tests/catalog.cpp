// Look-up, and what holds for every built-in record. Published figures: catalog_data.cpp.
#include <doctest/doctest.h>

#include <algorithm>
#include <chromacore/catalog.hpp>
#include <chromacore/error.hpp>
#include <cmath>
#include <map>
#include <set>
#include <string>
#include <thread>
#include <vector>

#include "catalog_contents.hpp"
#include "close.hpp"
#include "message_of.hpp"

using namespace chromacore;
using namespace chromacore::units;
using chromacore::test::close;
using chromacore::test::message_of;

namespace {

const Catalog built_in = Catalog::built_in();

std::string failure_of(std::string_view name) {
  return message_of([&] { (void)built_in.at(name); });
}

Material made(const std::string& maker, const std::string& name, double n = 1.5) {
  MaterialData data;
  data.name = name;
  data.maker = maker;
  data.form = DispersionForm::through_lines;
  data.coefficients = {0.4861327, n + 0.01, 0.6562725, n};
  return Material(data);
}

bool has_note(const Material& m, std::string_view text) {
  const auto& notes = m.data().notes;
  return std::any_of(notes.begin(), notes.end(), [text](const std::string& note) {
    return note.find(text) != std::string::npos;
  });
}

}  // namespace

// ---- every record ----

TEST_CASE("catalogue: it holds every record of the reference tables") {
  std::map<std::string, int> count;
  for (const Material& m : built_in.materials()) ++count[m.maker()];
  CHECK(built_in.materials().size() == 1628 + 51 + 96);
  CHECK(count["SCHOTT"] == 163 + 6);  // six infrared glasses
  CHECK(count["OHARA"] == 410);
  CHECK(count["HOYA"] == 190);
  CHECK(count["HIKARI"] == 375);
  CHECK(count["CDGM"] == 314);
  CHECK(count["SUMITA"] == 176);
  CHECK(count["LZOS"] == 51);
  CHECK(count["VITRON"] == 5);
  CHECK(count["AMI"] == 4);
  CHECK(count["LIGHTPATH"] == 3);
}

TEST_CASE("catalogue: statuses of the six makers' glasses are counted as in the reference tables") {
  std::map<Status, int> count;
  for (const Material& m : built_in.materials().first(1628)) ++count[m.data().status];
  CHECK(count[Status::current] == 278 + 597);  // preferred and standard
  CHECK(count[Status::on_request] == 50);
  CHECK(count[Status::withdrawn] == 527);
  CHECK(count[Status::unknown] == 176);
}

TEST_CASE("catalogue: every record has its source, and its own name among its maker's") {
  std::set<std::string> names;
  for (const Material& m : built_in.materials()) {
    CAPTURE(m.full_name());
    CHECK(names.insert(m.full_name()).second);
    CHECK(!m.data().source.empty());
    CHECK((m.data().code.empty() || m.data().code.size() == 6));
    for (const auto* texts : {&m.data().notes, &m.data().cautions}) {
      for (const std::string& text : *texts) CHECK((!text.empty() && text.size() < 100));
    }
    const std::string& axis = m.data().axis;
    CHECK((axis.empty() || axis == "ordinary" || axis == "extraordinary"));
  }
}

TEST_CASE("catalogue: the index of every record exists over its range and falls with wavelength") {
  // Where it rises, the record's notes warn of it: a kink, and noisy measurements.
  const std::set<std::string> rising = {"CdTe (Crystran)", "polycarbonate (Zhang)",
                                        "polystyrene (Zhang)", "diamond (Phillip)"};
  constexpr int steps = 200;
  for (const Material& m : built_in.materials()) {
    CAPTURE(m.full_name());
    const double from = in_um(m.data().shortest);
    const double ratio = in_um(m.data().longest) / from;
    double before = 6;
    bool falls = true;
    for (int i = 0; i <= steps; ++i) {
      const double n = index(m, from * std::pow(ratio, double(i) / steps) * um);
      falls = falls && n < before;
      before = n;
    }
    CHECK(before > 1);
    CHECK(falls == !rising.contains(m.full_name()));
  }
}

TEST_CASE("catalogue: dn/dT of every record that has one is of a possible size") {
  for (const Material& m : built_in.materials()) {
    if (!m.data().thermal && !m.data().thermal_constant) continue;
    CAPTURE(m.full_name());
    const Wavelength middle = 0.5 * (m.data().shortest + m.data().longest);
    const double t0 = in_celsius(m.data().temperature);
    const Surroundings warm{.temperature = (t0 + 10) * celsius};
    const double slope = (index(m, middle, warm) - index(m, middle)) / 10;
    CHECK(std::abs(slope) < 6e-4);
  }
}

TEST_CASE("catalogue: expansion and density are of a possible size") {
  for (const Material& m : built_in.materials()) {
    CAPTURE(m.full_name());
    if (const auto a = m.data().expansion_per_K) CHECK((*a > 0 && *a < 8e-5));
    if (const auto d = m.data().density_kg_m3) CHECK((*d > 1500 && *d < 8000));
  }
}

// ---- what was refused, and says so ----

TEST_CASE("catalogue: thermal coefficients with a pole inside the range were refused") {
  for (const char* name : {"L-BBH2", "S-LAL13", "S-LAL52", "S-NPH4", "TIH53", "NIFS-V", "D-ZK79",
                           "D-ZK79-25", "FCD1", "J-KZFH4", "IRG25"}) {
    CAPTURE(name);
    const Material m = built_in.at(name);
    CHECK(!m.data().thermal);
    CHECK(has_note(m, "refused"));
  }
}

TEST_CASE("catalogue: suspect cells are absent, and a note says so") {
  CHECK(built_in.at("K-VC89(M)").data().code.empty());
  CHECK(has_note(built_in.at("K-VC89(M)"), "before moulding"));
  CHECK(built_in.at("K-VC89").data().code == "810410");
  for (const char* name : {"KZFH1", "KZFH2", "IRG24"}) {
    CAPTURE(name);
    CHECK(!built_in.at(name).data().density_kg_m3);
    CHECK(has_note(built_in.at(name), "density"));
  }
  CHECK(!built_in.at("fused silica").data().thermal_constant);
  CHECK(!built_in.at("CsBr").data().thermal_constant);
  CHECK(has_note(built_in.at("CsBr"), "wrong sign"));
  CHECK(has_note(built_in.at("CTK8"), "1.5296 um"));
  CHECK(index(built_in.at("CTK8"), 1.5296 * um) < 1.6815);  // the refused one: 1.68236
}

TEST_CASE("catalogue: dn/dT without dispersion is marked as useless for colour") {
  int marked = 0;
  for (const Material& m : built_in.materials()) {
    const auto& c = m.data().thermal;
    const bool flat = c && c->d1 == 0 && c->d2 == 0 && c->e0 == 0 && c->e1 == 0;
    CHECK(flat == has_note(m, "without dispersion of dn/dT"));
    marked += flat;
  }
  CHECK(marked == 130 + 112);  // OHARA, HOYA
}

TEST_CASE("catalogue: fused silica keeps the range that its paper states") {
  const Material m = built_in.at("fused silica");
  CHECK(m.data().longest == 3.71 * um);
  CHECK(message_of([&] { (void)index(m, 5.0 * um); }) ==
        "out_of_range: material fused silica: no index at 5 um; its source covers 0.21 to 3.71 um");
}

TEST_CASE("catalogue: a term whose leading coefficient is 0 is skipped, as at 1 um in YAG") {
  // 0/(x^2 - 0^0) is 0/0 there; n^2 = 1.882 + 1.404 x^2/(x^2 - 0.1338^2) - 0.0137 x^2.
  const double n2 = 1.882 + 1.404 / (1 - 0.1338 * 0.1338) - 0.0137;
  CHECK(close(index(built_in.at("YAG (Hrabovsky)"), 1.0 * um), std::sqrt(n2), {.rel = 1e-14}));
}

TEST_CASE("catalogue: plastics by a one-term fit are marked as approximate") {
  for (const char* name : {"PMMA (Sultanova)", "polycarbonate", "polystyrene", "SMMA NAS-21",
                           "COP Zeonex E48R", "Optorez 1330"}) {
    CAPTURE(name);
    CHECK(has_note(built_in.at(name), "approximate"));
  }
  CHECK(!has_note(built_in.at("PMMA"), "approximate"));
}

TEST_CASE("catalogue: birefringent materials keep their axis; the plain name is the ordinary ray") {
  for (const std::string name : {"sapphire", "quartz", "MgF2"}) {
    CAPTURE(name);
    CHECK(built_in.at(name).data().axis == "ordinary");
    CHECK(built_in.at(name + " (e)").data().axis == "extraordinary");
    CHECK(has_note(built_in.at(name + " (e)"), "extraordinary ray"));
  }
}

TEST_CASE("catalogue: water is absolute, by vacuum wavelengths") {
  const MaterialData& water = built_in.at("water").data();
  CHECK(water.index_relative_to == Medium::vacuum);
  CHECK(water.wavelength_in == Medium::vacuum);
  CHECK(built_in.at("CaF2").data().index_relative_to == Medium::unknown);
  CHECK(built_in.at("N-BK7").data().index_relative_to == Medium::air);
}

TEST_CASE("catalogue: what is out of production is withdrawn") {
  CHECK(built_in.at("IRG23").data().status == Status::withdrawn);
  CHECK(built_in.at("AMTIR-3").data().status == Status::withdrawn);
  CHECK(built_in.at("KZFSN4").data().status == Status::withdrawn);
  CHECK(has_note(built_in.at("KZFSN4"), "replaced by N-KZFS4"));
  CHECK(built_in.at("N-BK7").data().status == Status::current);
}

TEST_CASE("catalogue: the data name their version") {
  CHECK(Catalog::data_version() ==
        "refractiveindex.info database, commit ff11b58 (2026-06-14), CC0 1.0");
}

// ---- look-up ----

TEST_CASE("look-up: by name in any case, by maker and name, by code") {
  CHECK(built_in.at("n-bk7").full_name() == "SCHOTT/N-BK7");
  CHECK(built_in.at("schott/f2").full_name() == "SCHOTT/F2");
  CHECK(built_in.at("CDGM/F2").full_name() == "CDGM/F2");
  CHECK(built_in.at("022291").full_name() == "SCHOTT/LASF35");
  CHECK(built_in.at("hoya/517642").full_name() == "HOYA/BSC7");
  CHECK(built_in.at("IRG22").full_name() == "SCHOTT/IRG22");
  CHECK(built_in.at("caf2").full_name() == "CaF2");
  CHECK(built_in.at("/CaF2").full_name() == "CaF2");
}

TEST_CASE("look-up: every record is found by its own shortest name") {
  for (const Material& m : built_in.materials()) {
    const std::string name = built_in.shortest_name(m);
    CAPTURE(name);
    const Material found = built_in.at(name);
    CHECK(&found.record() == &m.record());
  }
}

TEST_CASE("look-up: the shortest name is plain unless several makers have it") {
  CHECK(built_in.shortest_name(built_in.at("N-BK7")) == "N-BK7");
  CHECK(built_in.shortest_name(built_in.at("SCHOTT/F2")) == "SCHOTT/F2");
  CHECK(built_in.shortest_name(made("", "crown of 1931")) == "crown of 1931");
}

TEST_CASE("look-up: a name of several makers asks which") {
  CHECK(failure_of("F2") ==
        "ambiguous: several materials are \"F2\"; say which: SCHOTT/F2, HIKARI/F2, CDGM/F2");
  CHECK(failure_of("517642") ==
        "ambiguous: several materials are \"517642\"; say which: SCHOTT/N-BK7, SCHOTT/N-BK7HT, "
        "SCHOTT/N-BK7HTi, HOYA/BSC7, CDGM/H-K9L, CDGM/H-K9LA, CDGM/H-K9LAGT, CDGM/H-K9LGT or 1 "
        "more");
}

TEST_CASE("look-up: a miss names the nearest") {
  CHECK(failure_of("NBK7") == "not_found: no material \"NBK7\"; nearest: N-BK7, N-BK7HT, N-ZK7");
  CHECK(failure_of("schott/NBK7") ==
        "not_found: no material \"schott/NBK7\"; nearest: SCHOTT/N-BK7, SCHOTT/N-BK7HT, "
        "SCHOTT/N-ZK7");
  CHECK(failure_of("quarz") == "not_found: no material \"quarz\"; nearest: quartz, quartz (e)");
  CHECK(failure_of("zzz") == "not_found: no material \"zzz\"");
  CHECK(failure_of("") == "not_found: no material \"\"");
  CHECK(failure_of("NIKON/J-BK7A") ==
        "not_found: no maker \"NIKON\"; the makers are AMI, CDGM, HIKARI, HOYA, LIGHTPATH, LZOS, "
        "OHARA, SCHOTT, SUMITA, VITRON");
  CHECK(message_of([] { (void)Catalog().at("N-BK7"); }) == "not_found: no material \"N-BK7\"");
}

// ---- the user's own ----

TEST_CASE("own materials: they come first, and the built-in ones stay within reach") {
  Catalog catalog = built_in;
  catalog.add(made("MELT", "N-BK7"));
  CHECK(catalog.at("N-BK7").maker() == "MELT");
  CHECK(catalog.at("SCHOTT/N-BK7").maker() == "SCHOTT");
  CHECK(catalog.shortest_name(built_in.at("N-BK7")) == "SCHOTT/N-BK7");
  CHECK(catalog.shortest_name(catalog.at("N-BK7")) == "N-BK7");
  CHECK(catalog.materials().size() == built_in.materials().size() + 1);
  CHECK(catalog.materials().back().maker() == "MELT");
  CHECK(built_in.at("N-BK7").maker() == "SCHOTT");  // the copy changed, not the original
}

TEST_CASE("own materials: one that hides a crystal leaves it as /NAME") {
  Catalog catalog = built_in;
  catalog.add(made("MELT", "CaF2"));
  const std::string name = catalog.shortest_name(built_in.at("CaF2"));
  CHECK(name == "/CaF2");
  CHECK(catalog.at(name).maker() == "");
}

TEST_CASE("own materials: where two names differ only by case, the exact one wins") {
  Catalog catalog;
  catalog.add(made("A", "crown", 1.51));
  catalog.add(made("A", "Crown", 1.52));
  CHECK(catalog.at("crown").name() == "crown");
  CHECK(catalog.at("Crown").name() == "Crown");
  CHECK(message_of([&] { (void)catalog.at("CROWN"); }) ==
        "ambiguous: several materials are \"CROWN\"; say which: A/crown, A/Crown");
}

TEST_CASE("own materials: the same maker and name twice is refused") {
  Catalog catalog = built_in;
  catalog.add(made("", "crown of 1931"));
  CHECK(message_of([&] { catalog.add(made("", "crown of 1931")); }) ==
        "bad_value: a material \"crown of 1931\" is in the catalogue already");
  CHECK(message_of([&] { catalog.add(built_in.at("N-BK7")); }) ==
        "bad_value: a material \"SCHOTT/N-BK7\" is in the catalogue already");
}

TEST_CASE("own materials: a name with a slash is found as it stands") {
  Catalog catalog = built_in;
  catalog.add(made("", "lot 1/2"));
  CHECK(catalog.at("LOT 1/2").name() == "lot 1/2");
}

TEST_CASE("catalogue: a material outlives it, and threads may load it at once") {
  Material m;
  {
    Catalog catalog;
    catalog.add(made("", "lens"));
    m = catalog.at("lens");
  }
  CHECK(m.name() == "lens");
  std::vector<std::size_t> sizes(4);
  std::vector<std::thread> threads;
  for (std::size_t& size : sizes) {
    threads.emplace_back([&size] { size = Catalog::built_in().materials().size(); });
  }
  for (std::thread& thread : threads) thread.join();
  CHECK(std::count(sizes.begin(), sizes.end(), built_in.materials().size()) == 4);
}

TEST_CASE("catalogue: read anew it is the same") {
  const auto again = detail::load_built_in();
  const auto known = built_in.materials();
  REQUIRE(again->materials.size() == known.size());
  for (std::size_t i = 0; i < known.size(); ++i) {
    CHECK(again->materials[i].full_name() == known[i].full_name());
  }
}
