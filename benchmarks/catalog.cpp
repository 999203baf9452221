// Loading the built-in catalogue, and one index of refraction.
#include <array>
#include <chromacore/catalog.hpp>
#include <cmath>
#include <cstdlib>
#include <string>
#include <vector>

#include "catalog_contents.hpp"
#include "pairs.hpp"

namespace chromacore::detail {
extern const std::string_view data_glasses;
extern const std::string_view data_materials;
extern const std::string_view data_tables;
}  // namespace chromacore::detail

namespace {

using namespace chromacore;
using namespace chromacore::units;

// The least that any reader must do: every number of the same text, by the C library.
double read_numbers(const std::string& text) {
  double sum = 0;
  const char* at = text.c_str();
  while (*at != '\0') {
    char* end = nullptr;
    const double value = std::strtod(at, &end);
    if (end != at && std::isfinite(value)) sum += value;
    at = end != at ? end : at + 1;
  }
  return sum;
}

bool load() {
  const std::string text = std::string(detail::data_glasses) + std::string(detail::data_materials) +
                           std::string(detail::data_tables);
  const auto candidate = [] { pairs::keep(detail::load_built_in()->materials.size()); };
  const bool pass = pairs::ratio(
      "catalogue: load / strtod of the same text", candidate,
      [&] { pairs::keep(read_numbers(text)); }, 3.0);
  fmt::print("catalogue: {} materials loaded in {:.2f} ms (goal 10 ms)\n",
             detail::load_built_in()->materials.size(), 1e3 * pairs::quickest(candidate, 5));
  return pass;
}

// The formula as its publication writes it.
double plain_index(const MaterialData& data, double x) {
  const std::vector<double>& c = data.coefficients;
  double square = c[0];
  if (data.form == DispersionForm::sellmeier_squared) {
    square += 1.0;
    for (std::size_t i = 1; i + 1 < c.size(); i += 2) square += c[i] * x * x / (x * x - c[i + 1]);
  } else {
    for (std::size_t i = 1; i + 1 < c.size(); i += 2) square += c[i] * std::pow(x, c[i + 1]);
  }
  return std::sqrt(square);
}

constexpr std::array kWavelengths = {0.42, 0.4861, 0.53, 0.5876, 0.6, 0.6563, 0.68, 0.7065};

bool one_index(const char* name, double most_ratio, double goal_ns) {
  const Material material = Catalog::built_in().at(name);
  const auto ours = [&](double x) { return index(material, x * um); };
  for (const double x : kWavelengths) {
    if (std::abs(ours(x) - plain_index(material.data(), x)) > 1e-14) {
      fmt::print("index of {}: library and plain formula differ\n", name);
      return false;
    }
  }
  const auto all = [&](auto&& one) {
    double sum = 0;
    for (const double x : kWavelengths) sum += one(x);
    pairs::keep(sum);
  };
  const auto candidate = [&] { all(ours); };
  const bool pass = pairs::ratio(
      fmt::format("index, {} ({}): library / plain formula", name, to_string(material.data().form)),
      candidate, [&] { all([&](double x) { return plain_index(material.data(), x); }); },
      most_ratio);
  const double ns = 1e9 * pairs::quickest(candidate) / static_cast<double>(kWavelengths.size());
  fmt::print("index, {}: {:.1f} ns (goal {:.0f} ns)\n", name, ns, goal_ns);
  return pass;
}

}  // namespace

int main() {
  const bool loads = load();
  const bool sellmeier = one_index("N-BK7", 2.0, 25.0);
  const bool polynomial = one_index("HOYA/BSC7", 0.5, 50.0);
  return loads && sellmeier && polynomial ? 0 : 1;
}
