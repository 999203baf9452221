#include "material_input.hpp"

#include <algorithm>
#include <array>
#include <chromacore/error.hpp>
#include <cmath>
#include <utility>

#include "index_fit.hpp"
#include "text.hpp"

namespace chromacore::detail {
namespace {

[[noreturn]] void refuse(const std::string& message) { throw Error(ErrorCode::bad_value, message); }

double x_of(const Line& line) { return in_um(line.wavelength()); }

void check_listed(const ListedIndices& listed) {
  if (listed.indices.empty()) refuse("no indices; expected one for each line");
  if (listed.indices.size() != listed.lines.size()) {
    refuse("indices has " + std::to_string(listed.indices.size()) + " numbers, lines_um " +
           std::to_string(listed.lines.size()));
  }
}

std::string names_of(const std::vector<Line>& lines) {
  std::vector<std::string> names;
  for (const Line& line : lines) names.push_back(line.name());
  return joined(names);
}

void check_form(DispersionForm form) {
  if (form == DispersionForm::through_lines || form == DispersionForm::table) return;
  refuse("form is " + std::string(to_string(form)) +
         "; with lines_um and indices it is through_lines or table");
}

void check_n_v_p(const NVP& given) {
  if (given.lines.size() != 3) {
    refuse("n_ref and v need three lines_um (short, reference, long), not " +
           std::to_string(given.lines.size()));
  }
  if (!(given.n_ref > 1)) refuse("n_ref is " + number_text(given.n_ref) + "; expected more than 1");
  if (!(given.v > 0)) refuse("v is " + number_text(given.v) + "; expected a positive number");
  const double p = given.p_ref_long.value_or(0.5);
  if (!(p > 0 && p < 1)) {
    refuse("p_ref_long is " + number_text(p) + "; expected between 0 and 1");
  }
}

// P(ref, long) of n = A + B/x^2.
double p_of_two_terms(const std::vector<Line>& lines) {
  const auto term = [&lines](std::size_t i) { return 1 / (x_of(lines[i]) * x_of(lines[i])); };
  return (term(1) - term(2)) / (term(0) - term(2));
}

}  // namespace

void take_listed(MaterialData& data, const ListedIndices& listed, DispersionForm form) {
  check_form(form);
  check_listed(listed);
  data.form = form;
  for (std::size_t i = 0; i < listed.lines.size(); ++i) {
    data.coefficients.push_back(x_of(listed.lines[i]));
    data.coefficients.push_back(listed.indices[i]);
  }
}

void take_fitted(MaterialData& data, const ListedIndices& listed) {
  check_listed(listed);
  MaterialData points = data;  // what is wrong with the points themselves is said of them
  take_listed(points, listed, DispersionForm::table);
  const Material as_listed(std::move(points));
  std::vector<double> x;
  for (const Line& line : listed.lines) x.push_back(x_of(line));
  IndexFit fit = fit_index(x, listed.indices);
  data.form = DispersionForm::polynomial;
  data.coefficients = std::move(fit.coefficients);
  data.shortest = as_listed.data().shortest;
  data.longest = as_listed.data().longest;
  data.notes.push_back("fitted with " + std::to_string(fit.terms) + " terms to " +
                       std::to_string(x.size()) + " indices; largest residual " +
                       number_text(fit.largest_residual, 2));
}

void take_n_v_p(MaterialData& data, const NVP& from) {
  NVP given = from;
  if (given.lines.empty()) given.lines = {Line("F"), Line("d"), Line("C")};
  check_n_v_p(given);
  std::sort(given.lines.begin(), given.lines.end(),
            [](const Line& a, const Line& b) { return x_of(a) < x_of(b); });
  const double spread = (given.n_ref - 1) / given.v;
  const double p = given.p_ref_long.value_or(p_of_two_terms(given.lines));
  const double n_long = given.n_ref - p * spread;
  take_listed(data, {given.lines, {n_long + spread, given.n_ref, n_long}},
              DispersionForm::through_lines);
  data.notes.push_back("approximate: from n, V" + std::string(given.p_ref_long ? " and P" : "") +
                       " at " + names_of(given.lines) +
                       (given.p_ref_long ? "" : "; P is that of n = A + B/x^2"));
}

Status status_of(std::string_view word) {
  for (const Status s : {Status::current, Status::on_request, Status::withdrawn, Status::unknown}) {
    if (word == to_string(s)) return s;
  }
  refuse("status is \"" + std::string(word) +
         "\"; expected current, on_request, withdrawn or unknown");
}

Medium medium_of(std::string_view word) {
  if (word == "air") return Medium::air;
  if (word == "vacuum") return Medium::vacuum;
  if (word == "unknown") return Medium::unknown;
  refuse("no medium \"" + std::string(word) + "\"; expected air, vacuum or unknown");
}

void check_code(std::string_view code) {
  if (code.size() == 6 && code.find_first_not_of("0123456789") == code.npos) return;
  refuse("code is \"" + std::string(code) + "\"; expected six digits, as \"517642\"");
}

}  // namespace chromacore::detail
