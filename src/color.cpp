#include <algorithm>
#include <chromacore/color.hpp>
#include <cmath>

#include "evaluate.hpp"
#include "first_order_result.hpp"
#include "text.hpp"
#include "train_check.hpp"

namespace chromacore {
namespace detail {
namespace {

// All that the parts of an analysis are made from.
struct Work {
  const Train& train;
  const Model model;
  const Layout<double> layout;
  Evaluator<double> evaluator;
  PlacePair primary;
  PlacePair ref_long;

  Work(const Train& t, std::span<const Line> further)
      : train(t), model(t, further), layout(layout_of(t)), evaluator(model) {
    evaluator.at(layout);
    primary = {model.place(t.band.shortest()), model.place(t.band.longest())};
    ref_long = {0, primary.second};
  }
  [[nodiscard]] const Reference<double>& reference() const { return evaluator.reference(); }
};

void note_why(Analysis& analysis, std::string key, std::string reason) {
  analysis.why.emplace_back(std::move(key), std::move(reason));
}

void explain_no_power(Analysis& analysis) {
  const std::string reason = "the train has no power at the reference wavelength (afocal)";
  note_why(analysis, "focal_length_mm", reason);
  note_why(analysis, "back_focal_distance_mm", reason);
  if (analysis.f_number) note_why(analysis, "f_number", reason);
}

void explain_no_entrance_pupil(Analysis& analysis) {
  const std::string reason = "the entrance pupil is at infinity (telecentric in object space)";
  for (const char* key : {"entrance_pupil_position_mm", "entrance_pupil_diameter_mm", "f_number"}) {
    note_why(analysis, key, reason);
  }
}

void fill_first_order(Analysis& analysis, const Work& work) {
  static_cast<FirstOrder&>(analysis) =
      first_order_result(work.model, work.layout, work.reference());
  if (analysis.focal_length == infinity) explain_no_power(analysis);
  if (!analysis.entrance_pupil_position) explain_no_entrance_pupil(analysis);
  if (!analysis.exit_pupil_position) {
    note_why(analysis, "exit_pupil_position_mm",
             "the exit pupil is at infinity (telecentric in image space)");
  }
}

Length rms_about_best_focus(const Curves& curves, const std::vector<double>& weights) {
  double mean = 0;
  for (std::size_t i = 0; i < weights.size(); ++i) {
    mean += weights[i] * in_mm(curves.focus_difference[i]);
  }
  double square = 0;
  for (std::size_t i = 0; i < weights.size(); ++i) {
    const double from_best = in_mm(curves.focus_difference[i]) - mean;
    square += weights[i] * from_best * from_best;
  }
  return std::sqrt(square) * units::mm;
}

void fill_curves(Analysis& analysis, Work& work) {
  using units::mm;
  Evaluator<double>& at = work.evaluator;
  Curves& curves = analysis.curves;
  curves.wavelengths = work.train.band.wavelengths;
  for (const Line& line : curves.wavelengths) {
    const std::size_t w = work.model.place(line);
    curves.focus_difference.push_back((at.focus(w) - at.focus(0)) * mm);
    curves.lateral_difference.push_back((at.lateral(w) - at.lateral(0)) * mm);
    curves.focal_length.push_back(at.focal_length(w) * mm);
  }
  analysis.rms_focus = rms_about_best_focus(curves, work.train.band.normalized_weights());
}

void fill_totals(Analysis& analysis, Work& work) {
  using units::mm;
  const auto exact = [&](Quantity quantity) {
    return work.evaluator.value({quantity, work.primary, kAllElements}) * mm;
  };
  analysis.axial_color = exact(Quantity::axial_color);
  analysis.lateral_color = exact(Quantity::lateral_color);
  analysis.secondary_axial = exact(Quantity::secondary_axial);
  analysis.secondary_lateral = exact(Quantity::secondary_lateral);
  const auto sums = [&](const PlacePair& pair) {
    return color_sums(work.model, work.layout, work.reference(), pair, kAllElements);
  };
  const Sums<double> primary = sums(work.primary);
  const Sums<double> secondary = sums(work.ref_long);
  analysis.axial_sum = primary.axial * mm;
  analysis.lateral_sum = primary.lateral * mm;
  analysis.secondary_axial_sum = secondary.axial * mm;
  analysis.secondary_lateral_sum = secondary.lateral * mm;
  const double slope = work.reference().marginal_behind.w;
  analysis.axial_color_from_sums = -primary.axial / (slope * slope) * mm;
  analysis.lateral_color_from_sums = primary.lateral / slope * mm;
}

// V and P(ref, long) of a thick or thin element in the surroundings.
void fill_glass_numbers(ElementColor& color, Analysis& analysis, const Work& work, std::size_t e) {
  const Model& model = work.model;
  const double n = model.index(0, e);
  const double dispersion =
      model.index(work.primary.first, e) - model.index(work.primary.second, e);
  const std::string path = "elements[" + std::to_string(e) + "].";
  if (dispersion != 0.0) {
    color.v = (n - 1.0) / dispersion;
    color.p_ref_long = (n - model.index(work.primary.second, e)) / dispersion;
  } else {
    note_why(analysis, path + "v", "its material has no dispersion over the band");
    note_why(analysis, path + "p_ref_long", "its material has no dispersion over the band");
  }
}

void fill_abbe_number(ElementColor& color, Analysis& analysis, const Material& material) {
  const std::string path = "elements[" + std::to_string(color.element - 1) + "].abbe_number";
  try {
    const double abbe = abbe_number(material);
    if (std::isfinite(abbe)) {
      color.abbe_number = abbe;
    } else {
      note_why(analysis, path, "its material has no dispersion from F to C");
    }
  } catch (const Error& error) {
    if (error.code() != ErrorCode::out_of_range) throw;
    note_why(analysis, path, "its source does not cover F, d and C");
  }
}

void fill_diffractive_numbers(ElementColor& color, const Work& work) {
  const auto wavelength = [&](std::size_t w) { return work.model.wavelength_um(w); };
  const double span = wavelength(work.primary.first) - wavelength(work.primary.second);
  color.v = wavelength(0) / span;
  color.p_ref_long = (wavelength(0) - wavelength(work.primary.second)) / span;
  const auto line = [](const char* letter) { return in_um(Line(letter).wavelength()); };
  color.abbe_number = line("d") / (line("F") - line("C"));
}

void fill_elements(Analysis& analysis, const Work& work) {
  for (std::size_t e = 0; e < work.layout.size(); ++e) {
    ElementColor color;
    color.element = static_cast<int>(e) + 1;
    color.power = element_power(work.model, work.layout, e) * units::per_mm;
    if (const Material* material = material_of(work.train.elements[e])) {
      color.material = material->name();
      fill_glass_numbers(color, analysis, work, e);
      fill_abbe_number(color, analysis, *material);
    } else {
      fill_diffractive_numbers(color, work);
    }
    analysis.elements.push_back(std::move(color));
  }
}

void fill_contributions(Analysis& analysis, const Work& work) {
  using units::mm;
  for_each_surface_sum(work.model, work.layout, work.reference(), work.primary,
                       [&](std::size_t e, Side side, const Ray<double>& marginal,
                           const Ray<double>& chief, const Sums<double>& sums) {
                         ElementColor& element = analysis.elements[e];
                         if (side == Side::front) {
                           element.marginal_height = marginal.y * mm;
                           element.chief_height = chief.y * mm;
                         }
                         element.axial_sum += sums.axial * mm;
                         element.lateral_sum += sums.lateral * mm;
                         if (work.model.kind(e) != Kind::thick) return;
                         const ElementLayout<double>& at = work.layout[e];
                         const double curvature = side == Side::front ? at.front : at.back;
                         analysis.surfaces.push_back(
                             {static_cast<int>(e) + 1, curvature * units::per_mm, marginal.y * mm,
                              chief.y * mm, sums.axial * mm, sums.lateral * mm});
                       });
}

void fill_requirements(Analysis& analysis, Work& work, const std::vector<Requirement>& required) {
  for (const Requirement& requirement : required) {
    RequirementResult result{requirement};
    result.value = work.evaluator.value(look_up(work.model, work.train, requirement));
    result.requirement.budget = budget_of(requirement, work.train, analysis.working_f_number);
    result.residual = residual(requirement, *result.requirement.budget, result.value);
    analysis.requirements.push_back(std::move(result));
  }
}

void add_note(std::vector<std::string>& notes, const std::string& note) {
  if (std::find(notes.begin(), notes.end(), note) == notes.end()) notes.push_back(note);
}

void fill_notes(Analysis& analysis, const Train& train) {
  for (const Element& element : train.elements) {
    const Material* material = material_of(element);
    if (material == nullptr) continue;
    for (const std::string& note : material->data().notes) {
      add_note(analysis.notes, material->name() + ": " + note);
    }
    if (!train.surroundings) continue;
    for (const std::string& note : thermal_notes(*material, *train.surroundings)) {
      add_note(analysis.notes, note);
    }
  }
  if (!train.surroundings) return;
  for (const std::string& note : air_notes(*train.surroundings, train.band.shortest().wavelength(),
                                           train.band.longest().wavelength())) {
    add_note(analysis.notes, note);
  }
}

}  // namespace
}  // namespace detail

Analysis analyze(const Train& train, const std::vector<Requirement>& required) {
  check(train);
  detail::Work work(train, detail::lines_of(train, required));
  Analysis analysis;
  detail::fill_first_order(analysis, work);
  detail::fill_curves(analysis, work);
  detail::fill_totals(analysis, work);
  detail::fill_elements(analysis, work);
  detail::fill_contributions(analysis, work);
  detail::fill_requirements(analysis, work, required);
  detail::fill_notes(analysis, train);
  return analysis;
}

ColorSums color_sums(const Train& train, const LinePair& pair, int element) {
  using units::mm;
  check(train);
  if (element < 0 || element > static_cast<int>(train.elements.size())) {
    throw Error(ErrorCode::bad_value, "element " + std::to_string(element) +
                                          " is not there; the train has " +
                                          std::to_string(train.elements.size()));
  }
  const Line lines[] = {pair.first, pair.second};
  const detail::Model model(train, lines);
  const detail::Layout<double> layout = detail::layout_of(train);
  const std::size_t which =
      element == 0 ? detail::kAllElements : static_cast<std::size_t>(element) - 1;
  const detail::Sums<double> sums =
      detail::color_sums(model, layout, detail::reference_of(model, layout),
                         {model.place(pair.first), model.place(pair.second)}, which);
  return {sums.axial * mm, sums.lateral * mm};
}

}  // namespace chromacore
