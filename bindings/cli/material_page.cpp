#include "material_page.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <utility>

namespace chromacore::cli {
namespace {

// The formula in the words of the library's header.
std::string_view formula(DispersionForm form) {
  switch (form) {
    case DispersionForm::sellmeier:
      return "n^2 - 1 = c0 + c1 x^2/(x^2 - c2^2) + c3 x^2/(x^2 - c4^2) + ...";
    case DispersionForm::sellmeier_squared:
      return "n^2 - 1 = c0 + c1 x^2/(x^2 - c2) + c3 x^2/(x^2 - c4) + ...";
    case DispersionForm::polynomial:
      return "n^2 = c0 + c1 x^c2 + c3 x^c4 + ...";
    case DispersionForm::rational_polynomial:
      return "n^2 = c0 + c1 x^c2/(x^2 - c3^c4) + c5 x^c6/(x^2 - c7^c8) + c9 x^c10 + ...";
    case DispersionForm::cauchy:
      return "n = c0 + c1 x^c2 + c3 x^c4 + ...";
    case DispersionForm::herzberger:
      return "n = c0 + c1 L + c2 L^2 + c3 x^2 + c4 x^4 + c5 x^6, L = 1/(x^2 - 0.028)";
    case DispersionForm::through_lines:
      return "n^2 = polynomial in 1/x^2 through the points (x, n) = (c0, c1), (c2, c3), ...";
    case DispersionForm::table:
      return "n^2 = cubic spline in 1/x^2 through the points (x, n) = (c0, c1), (c2, c3), ...";
  }
  return "";
}

std::string_view words(Medium medium) {
  switch (medium) {
    case Medium::air:
      return "air";
    case Medium::vacuum:
      return "vacuum";
    case Medium::unknown:
      break;
  }
  return "air (the source does not say)";
}

// Labels and values, one line each.
class Facts {
 public:
  void add(std::string label, std::string value) {
    labels_.push_back(std::move(label));
    values_.push_back(std::move(value));
  }
  [[nodiscard]] std::string str(const Paint& paint) const {
    Table table;
    table.text("", labels_);
    table.text("", values_);
    return table.str(paint);
  }

 private:
  std::vector<std::string> labels_ = {};
  std::vector<std::string> values_ = {};
};

void add_identity(Facts& facts, const MaterialData& data) {
  facts.add("maker", data.maker.empty() ? "-" : data.maker);
  facts.add("code", data.code.empty() ? "-" : data.code);
  facts.add("status", std::string(to_string(data.status)));
  if (!data.axis.empty()) facts.add("axis", data.axis + " ray of a birefringent material");
  facts.add("range", fmt::format("{} to {} um", in_um(data.shortest), in_um(data.longest)));
}

void add_dispersion(Facts& facts, const Material& material, const Band& band) {
  if (!covers(material, band)) return;
  const LinePair pair = band.primary_pair();
  const LinePair red = {band.reference, band.longest()};
  facts.add(
      fmt::format("V({}; {}, {})", band.reference.name(), pair.first.name(), pair.second.name()),
      fmt::format("{:.3f}", v_number(material, band)));
  facts.add(fmt::format("P({}, {})", red.first.name(), red.second.name()),
            fmt::format("{:.5f}", partial_dispersion(material, red, band)));
  if (covers(material, Band::of_lines({"g", "F", "d", "C"}, "d"))) {
    facts.add("P(g, F) off the normal line",
              fmt::format("{:+.4f}", deviation_from_normal_line(material)));
  }
}

void add_thermal(Facts& facts, const MaterialData& data) {
  if (data.thermal) {
    const ThermalCoefficients& t = *data.thermal;
    facts.add("dn/dT, absolute",
              fmt::format("D0 {} /K, D1 {} /K^2, D2 {} /K^3, E0 {} um^2/K, E1 {} um^2/K^2, "
                          "wavelength {} um",
                          t.d0, t.d1, t.d2, t.e0, t.e1, t.lambda_tk_um));
  }
  if (data.thermal_constant) {
    facts.add("dn/dT", fmt::format("{} /K relative to {}", data.thermal_constant->dn_dt_per_K,
                                   words(data.thermal_constant->relative_to)));
  }
  if (!data.thermal && !data.thermal_constant) facts.add("dn/dT", "not in the source");
  facts.add("expansion", data.expansion_per_K ? fmt::format("{} /K", *data.expansion_per_K)
                                              : "not in the source");
  facts.add("density", data.density_kg_m3 ? fmt::format("{} kg/m^3", *data.density_kg_m3)
                                          : "not in the source");
}

void add_formula(Facts& facts, const MaterialData& data) {
  facts.add("formula", fmt::format("{}: {}", to_string(data.form), formula(data.form)));
  facts.add("", fmt::format("x in um, in {}; n relative to {}, at {} C", words(data.wavelength_in),
                            words(data.index_relative_to), in_celsius(data.temperature)));
  for (std::size_t i = 0; i < data.coefficients.size(); ++i) {
    facts.add(fmt::format("  c{}", i), fmt::format("{}", data.coefficients[i]));
  }
}

bool in_range(const Material& material, const Line& line) {
  const MaterialData& data = material.data();
  return line.wavelength() >= data.shortest && line.wavelength() <= data.longest;
}

// Index at the lines that have a letter and at the band's wavelengths, at some in the infrared, as
// far as the range goes.
std::string index_table(const Material& material, const Band& band, const Paint& paint) {
  std::vector<Line> lines = band.wavelengths;
  for (const NamedLine& line : named_lines()) lines.emplace_back(line.letter);
  for (const double um : {1.5, 2.0, 3.0, 4.0, 5.0, 8.0, 10.0, 12.0})
    lines.emplace_back(um * units::um);
  std::stable_sort(lines.begin(), lines.end(),
                   [](const Line& a, const Line& b) { return a.wavelength() < b.wavelength(); });
  std::vector<std::string> names;
  Numbers wavelengths;
  Numbers indices;
  for (const Line& line : lines) {
    const double um = in_um(line.wavelength());
    const bool twice = !wavelengths.empty() && wavelengths.back() == um;
    if (twice || !in_range(material, line)) continue;
    names.push_back(line.letter());
    wavelengths.emplace_back(um);
    indices.emplace_back(index(material, line.wavelength()));
  }
  Table table;
  table.text("line", names);
  table.fixed("wavelength um", wavelengths, 5);
  table.fixed("index n", indices, 6);
  return table.str(paint);
}

}  // namespace

std::string material_page(const Material& material, const Band& band, const Paint& paint) {
  const MaterialData& data = material.data();
  Facts facts;
  add_identity(facts, data);
  add_dispersion(facts, material, band);
  add_thermal(facts, data);
  add_formula(facts, data);
  facts.add("source", data.source.empty() ? "not stated" : data.source);
  for (const std::string& note : data.notes) facts.add("note", note);
  std::string text = paint.title(material.full_name()) + '\n' + facts.str(paint);
  for (const std::string& caution : data.cautions) {
    text += paint.warning("  caution: " + caution) + '\n';
  }
  text += "\nIndex relative to air\n" + index_table(material, band, paint);
  if (!data.cautions.empty()) {
    text += "\nFollow the maker's safety sheet and the local rules.\n";
  }
  return text;
}

}  // namespace chromacore::cli
