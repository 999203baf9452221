#include "account.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <utility>

namespace chromacore::cli {
namespace {

std::string with_unit(const std::optional<Length>& length) {
  const bool finite = length && std::isfinite(in_mm(*length));
  return finite ? number(in_mm(*length), 6) + " mm" : "at infinity";
}

std::string field_text(const Field& field) {
  if (const auto* angle = std::get_if<HalfAngle>(&field)) {
    return fmt::format("half angle {} deg", number(in_deg(angle->value), 4));
  }
  if (const auto* height = std::get_if<ObjectHeight>(&field)) {
    return fmt::format("object height {} mm", number(in_mm(height->value), 4));
  }
  if (const auto* height = std::get_if<ImageHeight>(&field)) {
    return fmt::format("image height {} mm", number(in_mm(height->value), 4));
  }
  return "not set";
}

Material material_of(const Element& element) {  // not set for a diffractive surface
  if (const auto* thin = std::get_if<Thin>(&element)) return thin->material;
  if (const auto* thick = std::get_if<Thick>(&element)) return thick->material;
  return {};
}

std::string element_name(const Element& element, const Catalog& catalog) {
  const Material material = material_of(element);
  return material.is_set() ? catalog.shortest_name(material) : "diffractive";
}

// Of each material once: "ZnSe: toxic ...".
std::vector<std::string> cautions_of(const Train& train) {
  std::vector<std::string> cautions;
  for (const Element& element : train.elements) {
    const Material material = material_of(element);
    if (!material.is_set()) continue;
    for (const std::string& caution : material.data().cautions) {
      const std::string line = material.name() + ": " + caution;
      const bool known = std::find(cautions.begin(), cautions.end(), line) != cautions.end();
      if (!known) cautions.push_back(line);
    }
  }
  return cautions;
}

// Each value's share of the sum of all magnitudes, in per cent, with its sign.
Numbers shares(const Numbers& values) {
  double all = 0;
  for (const auto& value : values) all += std::abs(value.value_or(0));
  Numbers result;
  for (const auto& value : values) {
    result.push_back(all > 0 ? std::optional(100 * value.value_or(0) / all) : std::nullopt);
  }
  return result;
}

// The place of the largest magnitude, of equal ones (to rounding) the first; nothing where all are
// 0.
std::optional<std::size_t> largest(const Numbers& values) {
  std::optional<std::size_t> place;
  double most = 0;
  for (std::size_t i = 0; i < values.size(); ++i) {
    const double size = std::abs(values[i].value_or(0));
    if (size > most * (1 + 1e-9)) {
      most = size;
      place = i;
    }
  }
  return place;
}

std::string pair_name(const LinePair& pair) {
  return pair.first.name() + " - " + pair.second.name();
}

}  // namespace

LeftOver left_over(const Train& train) {
  const LinePair ends = train.band.primary_pair();
  const std::vector<RequirementResult> results =
      analyze(train,
              {require::axial_color(ends.first, ends.second), require::secondary_axial(),
               require::lateral_color(ends.first, ends.second), require::secondary_lateral()})
          .requirements;
  return {.axial = results.at(0),
          .secondary_axial = results.at(1),
          .lateral = results.at(2),
          .secondary_lateral = results.at(3)};
}

std::string heading_text(const Train& train, const Paint& paint) {
  const Band& band = train.band;
  const std::string object =
      std::isinf(in_mm(train.object_distance))
          ? "at infinity"
          : fmt::format("{} mm ahead", number(in_mm(train.object_distance), 6));
  return fmt::format("{}\n  band {} to {} ({} to {} um), reference {}; object {}; {}\n",
                     paint.title(train.name.empty() ? "train without a name" : train.name),
                     band.shortest().name(), band.longest().name(),
                     number(in_um(band.shortest().wavelength()), 4),
                     number(in_um(band.longest().wavelength()), 4), band.reference.name(), object,
                     field_text(train.field));
}

std::string first_order_text(const Analysis& a, const Paint& paint) {
  Table left;
  left.text("", {"focal length", "back focal distance", "image distance", "track length",
                 "magnification", "Petzval sum"});
  left.text("", {with_unit(a.focal_length), with_unit(a.back_focal_distance),
                 with_unit(a.image_distance), with_unit(a.track_length), number(a.magnification, 5),
                 number(in_per_mm(a.petzval), 5) + " per mm"});
  left.text("", {"f-number", "working f-number", "entrance pupil position",
                 "entrance pupil diameter", "exit pupil position", "Lagrange invariant"});
  left.text("", {a.f_number ? number(*a.f_number, 5) : "none", number(a.working_f_number, 5),
                 with_unit(a.entrance_pupil_position), with_unit(a.entrance_pupil_diameter),
                 with_unit(a.exit_pupil_position), with_unit(a.lagrange_invariant)});
  return paint.title("First order") + " (pupils and image from the first and the last vertex)\n" +
         left.str(paint);
}

std::string elements_text(const Train& train, const Analysis& a, const Catalog& catalog,
                          const Paint& paint) {
  const auto& elements = a.elements;
  const Numbers axial = column(elements, [](const auto& e) { return in_mm(e.axial_sum); });
  const Numbers lateral = column(elements, [](const auto& e) { return in_mm(e.lateral_sum); });
  const auto add = [&](auto&& cells, const auto& sum) {  // the row of sums below a column
    cells.emplace_back(sum);
    return cells;
  };
  const auto blank = [&](Numbers cells) { return add(cells, std::nullopt); };
  Table table;
  table.text("element",
             add(words(elements, [](const auto& e) { return std::to_string(e.element); }), "sum"));
  table.text(
      "material",
      add(words(train.elements, [&](const Element& e) { return element_name(e, catalog); }), ""));
  table.numbers("power\nper mm",
                blank(column(elements, [](const auto& e) { return in_per_mm(e.power); })), 5);
  table.fixed("V", blank(column(elements, [](const auto& e) { return e.v; })), 2);
  table.fixed("P", blank(column(elements, [](const auto& e) { return e.p_ref_long; })), 4);
  table.numbers("marginal\nheight mm",
                blank(column(elements, [](const auto& e) { return in_mm(e.marginal_height); })), 4);
  table.numbers("chief\nheight mm",
                blank(column(elements, [](const auto& e) { return in_mm(e.chief_height); })), 4);
  table.numbers("axial\nsum mm", add(Numbers(axial), in_mm(a.axial_sum)), 5);
  table.fixed("share\n%", blank(shares(axial)), 0);
  table.numbers("lateral\nsum mm", add(Numbers(lateral), in_mm(a.lateral_sum)), 5);
  table.fixed("share\n%", blank(shares(lateral)), 0);
  if (const auto most = largest(axial)) table.mark(*most, "most axial");
  if (const auto most = largest(lateral)) table.mark(*most, "most lateral");
  return fmt::format(
      "{} ({}; share of the sum of all magnitudes)\n{}"
      "  as lengths, to first order: axial {} mm, lateral {} mm\n",
      paint.title("Which element makes the colour"), pair_name(train.band.primary_pair()),
      table.str(paint), number_by(in_mm(a.axial_color_from_sums), 0.01),
      number_by(in_mm(a.lateral_color_from_sums), 0.01));
}

std::string left_over_text(const Train& train, const LeftOver& left, const Paint& paint) {
  const std::string ends = pair_name(train.band.primary_pair());
  const std::string middle = fmt::format("{} - mean of {} and {}", train.band.reference.name(),
                                         train.band.shortest().name(), train.band.longest().name());
  const std::vector<RequirementResult> rows = {left.axial, left.secondary_axial, left.lateral,
                                               left.secondary_lateral};
  Table table;
  table.text(
      "", {"on axis, focus", "on axis, focus", "edge of field, height", "edge of field, height"});
  table.text("", {ends, middle, ends, middle});
  const int decimals = decimals_by(std::min(left.axial_budget(), left.lateral_budget()));
  table.fixed("left\nmm", column(rows, [](const auto& r) { return r.value; }), decimals);
  table.fixed("budget\n+- mm", column(rows, [](const auto& r) { return r.requirement.budget; }),
              decimals);
  table.fixed("spent\n%", column(rows, [](const auto& r) { return 100 * r.spent(); }), 0);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (!rows[i].met()) table.mark(i, "over");
  }
  return fmt::format("{} (budgets: a quarter wave on axis, the {} at the edge)\n{}",
                     paint.title("What is left over the band"),
                     train.pixel ? "pixel" : "Airy radius", table.str(paint));
}

std::string curves_text(const Analysis& a, const LeftOver& left, const Paint& paint) {
  const Curves& c = a.curves;
  const auto mm = [](const Length& length) { return in_mm(length); };
  const Numbers focus = column(c.focus_difference, mm);
  const Numbers lateral = column(c.lateral_difference, mm);
  const auto spent = [](const Numbers& values, double budget) {
    return column(values, [&](const auto& value) { return 100 * std::abs(*value) / budget; });
  };
  const Numbers focus_spent = spent(focus, left.axial_budget());
  const Numbers lateral_spent = spent(lateral, left.lateral_budget());
  Table table;
  table.text("line", words(c.wavelengths, [](const Line& line) { return line.letter(); }));
  table.fixed("wavelength\num",
              column(c.wavelengths, [](const Line& l) { return in_um(l.wavelength()); }), 4);
  table.fixed("focus\nmm", focus, decimals_by(left.axial_budget()));
  table.fixed("spent\n%", focus_spent, 0);
  table.fixed("image height\nmm", lateral, decimals_by(left.lateral_budget()));
  table.fixed("spent\n%", lateral_spent, 0);
  table.numbers("focal length\nmm", column(c.focal_length, mm), 7);
  for (std::size_t i = 0; i < focus.size(); ++i) {
    if (*focus_spent[i] > 100) table.mark(i, "focus over");
    if (*lateral_spent[i] > 100) table.mark(i, "height over");
  }
  return fmt::format("{} (against the reference)\n{}  focus about its best: {} mm RMS\n",
                     paint.title("Over the band"), table.str(paint), number(in_mm(a.rms_focus), 4));
}

std::string name_of(const Requirement& requirement) {
  std::string name(to_string(requirement.quantity));
  if (requirement.between) name += ' ' + pair_name(*requirement.between);
  if (requirement.element != 0) name += fmt::format(" of element {}", requirement.element);
  return name;
}

std::string wish_of(const Requirement& r) {
  std::string text;
  if (r.target) text += fmt::format("{}", *r.target);
  if (r.at_least) text += fmt::format("at least {}", *r.at_least);
  if (r.at_least && r.at_most) text += ", ";
  if (r.at_most) text += fmt::format("at most {}", *r.at_most);
  return text;
}

std::string budget_of(const RequirementResult& result) {
  return "+- " + number(*result.requirement.budget, 4);
}

std::string value_of(const RequirementResult& result) {
  return number_by(result.value, *result.requirement.budget);
}

std::string requirements_text(const Analysis& a, const Paint& paint) {
  const auto& rows = a.requirements;
  if (rows.empty()) return paint.title("Requirements") + "\n  none in the file\n";
  Table table;
  table.text("quantity", words(rows, [](const auto& r) { return name_of(r.requirement); }));
  table.text("wanted", words(rows, [](const auto& r) { return wish_of(r.requirement); }));
  table.text("budget", words(rows, budget_of));
  table.text("is", words(rows, value_of));
  table.fixed("spent %", column(rows, [](const auto& r) { return 100 * r.spent(); }), 1);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (!rows[i].met()) table.mark(i, "over budget");
  }
  return paint.title("Requirements") + '\n' + table.str(paint);
}

std::string notes_text(const Train& train, const Analysis& a, const Paint& paint) {
  std::string text;
  for (const std::string& caution : cautions_of(train)) {
    text += paint.warning("  caution: " + caution) + '\n';
  }
  for (const std::string& note : a.notes) text += "  " + note + '\n';
  for (const auto& [key, reason] : a.why) {
    const bool of_a_row = key.find('[') != std::string::npos;  // the tables show a dash there
    if (!of_a_row) text += fmt::format("  {}: {}\n", key, reason);
  }
  return text.empty() ? text : '\n' + paint.title("Notes") + '\n' + text;
}

}  // namespace chromacore::cli
