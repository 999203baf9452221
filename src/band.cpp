#include <algorithm>
#include <array>
#include <chromacore/band.hpp>
#include <chromacore/error.hpp>
#include <cmath>
#include <utility>

#include "text.hpp"

namespace chromacore {
namespace {

using detail::number_text;
using units::um;

// ISO 7944 (e and d with F', C' and F, C); the digits and the other lines as printed in
// R. Paschotta, RP Photonics Encyclopedia, "Standard spectral lines", A' in OHARA's table of lines.
constexpr std::array lines = {
    NamedLine{"i", 0.3650146 * um, "Hg"},  NamedLine{"h", 0.4046561 * um, "Hg"},
    NamedLine{"g", 0.4358343 * um, "Hg"},  NamedLine{"F'", 0.4799914 * um, "Cd"},
    NamedLine{"F", 0.4861327 * um, "H"},   NamedLine{"e", 0.5460740 * um, "Hg"},
    NamedLine{"d", 0.5875618 * um, "He"},  NamedLine{"D", 0.5892938 * um, "Na"},
    NamedLine{"C'", 0.6438469 * um, "Cd"}, NamedLine{"C", 0.6562725 * um, "H"},
    NamedLine{"r", 0.7065188 * um, "He"},  NamedLine{"A'", 0.76819 * um, "K"},
    NamedLine{"s", 0.85211 * um, "Cs"},    NamedLine{"t", 1.01398 * um, "Hg"},
};

constexpr int most_samples = 10000;

std::string all_letters() {
  std::vector<std::string> letters;
  for (const NamedLine& line : lines) letters.emplace_back(line.letter);
  return detail::joined(letters);
}

[[noreturn]] void refuse_letter(std::string_view letter) {
  const std::string shown = "no spectral line \"" + std::string(letter) + "\"; ";
  if (detail::parse_number(letter))
    throw Error(ErrorCode::not_found, shown + "a wavelength is a number in um, without quotes");
  throw Error(ErrorCode::not_found, shown + "the letters are " + all_letters());
}

const NamedLine& line_of(std::string_view letter) {
  const auto found = std::find_if(lines.begin(), lines.end(), [letter](const NamedLine& line) {
    return line.letter == letter;
  });
  if (found == lines.end()) refuse_letter(letter);
  return *found;
}

bool shorter(const Line& a, const Line& b) { return a.wavelength() < b.wavelength(); }

[[noreturn]] void refuse(ErrorCode code, const std::string& message) {
  throw Error(code, "band: " + message);
}

void check_wavelengths(const std::vector<Line>& wavelengths) {
  if (wavelengths.size() < 2)
    refuse(ErrorCode::not_set, std::to_string(wavelengths.size()) +
                                   " wavelengths; expected two or more, a short and a long end");
  std::vector<Line> sorted = wavelengths;
  std::sort(sorted.begin(), sorted.end(), shorter);
  if (!sorted.front().is_set()) refuse(ErrorCode::not_set, "a wavelength that is not set");
  const auto same = std::adjacent_find(sorted.begin(), sorted.end(),
                                       [](const Line& a, const Line& b) { return !shorter(a, b); });
  if (same != sorted.end())
    refuse(ErrorCode::bad_value, "wavelength " + same->name() + " twice; expected different ones");
}

void check_weights(const Band& band) {
  if (band.weights.empty()) return;
  if (band.weights.size() != band.wavelengths.size())
    refuse(ErrorCode::bad_value, std::to_string(band.weights.size()) + " weights for " +
                                     std::to_string(band.wavelengths.size()) +
                                     " wavelengths; expected one each");
  for (const double weight : band.weights)
    if (!(weight >= 0) || !std::isfinite(weight))
      refuse(ErrorCode::bad_value,
             "a weight of " + number_text(weight) + "; expected 0 or a positive number");
  if (*std::max_element(band.weights.begin(), band.weights.end()) == 0)
    refuse(ErrorCode::bad_value, "all weights are 0; expected one above 0 at least");
}

}  // namespace

std::span<const NamedLine> named_lines() { return lines; }

Line::Line(Wavelength wavelength) : wavelength_(wavelength) {
  if (!(wavelength.value() > 0) || !std::isfinite(wavelength.value()))
    throw Error(ErrorCode::bad_value, "a wavelength of " + number_text(wavelength.value()) +
                                          " um; expected a positive number");
}

Line::Line(std::string_view letter) : wavelength_(line_of(letter).wavelength), letter_(letter) {}

Line::Line(const char* letter) : Line(std::string_view(letter == nullptr ? "" : letter)) {}

std::string Line::name() const {
  if (!letter_.empty()) return letter_;
  return is_set() ? number_text(wavelength_.value()) + " um" : "not set";
}

Band Band::of_lines(std::vector<Line> wavelengths, Line reference) {
  Band band;
  band.reference = std::move(reference);
  band.wavelengths = std::move(wavelengths);
  check(band);
  return band;
}

Band Band::of_range(Line from, Line to, int samples, Line reference) {
  if (samples < 2)
    refuse(ErrorCode::bad_value, std::to_string(samples) + " samples; expected 2 or more");
  if (samples > most_samples)
    refuse(ErrorCode::too_large,
           std::to_string(samples) + " samples; expected at most " + std::to_string(most_samples));
  if (!from.is_set() || !to.is_set()) refuse(ErrorCode::not_set, "an end that is not set");
  const Wavelength step = (to.wavelength() - from.wavelength()) / double(samples - 1);
  std::vector<Line> wavelengths = {from};
  for (int i = 1; i < samples - 1; ++i)
    wavelengths.emplace_back(from.wavelength() + double(i) * step);
  wavelengths.push_back(std::move(to));
  return of_lines(std::move(wavelengths), std::move(reference));
}

const Line& Band::shortest() const {
  if (wavelengths.empty()) refuse(ErrorCode::not_set, "no wavelengths");
  return *std::min_element(wavelengths.begin(), wavelengths.end(), shorter);
}

const Line& Band::longest() const {
  if (wavelengths.empty()) refuse(ErrorCode::not_set, "no wavelengths");
  return *std::max_element(wavelengths.begin(), wavelengths.end(), shorter);
}

std::vector<double> Band::normalized_weights() const {
  check(*this);
  if (weights.empty())
    return std::vector<double>(wavelengths.size(), 1.0 / double(wavelengths.size()));
  // By the largest first, so that no sum overflows.
  const double largest = *std::max_element(weights.begin(), weights.end());
  std::vector<double> result = weights;
  double sum = 0;
  for (double& weight : result) sum += weight /= largest;
  for (double& weight : result) weight /= sum;
  return result;
}

void check(const Band& band) {
  if (!band.reference.is_set()) refuse(ErrorCode::not_set, "no reference wavelength");
  check_wavelengths(band.wavelengths);
  check_weights(band);
}

}  // namespace chromacore
