// chromacore solve: vary what may vary until every requirement is within its budget.
#include <fmt/format.h>

#include <cmath>
#include <memory>

#include "account.hpp"
#include "command.hpp"
#include "start.hpp"

namespace chromacore::cli {
namespace {

struct Options {
  std::string train = {};
  std::optional<std::string> start = {};
};

// The value that a parameter has in a train, in its own unit.
double parameter_value(const Train& train, const Vary& vary) {
  const Element& element = train.elements.at(static_cast<std::size_t>(vary.element - 1));
  if (vary.parameter == Parameter::gap_after) return in_mm(gap_after(element));
  if (const auto* thin = std::get_if<Thin>(&element)) return in_per_mm(thin->power);
  if (const auto* surface = std::get_if<Diffractive>(&element)) return in_per_mm(surface->power);
  const Thick& thick = std::get<Thick>(element);
  if (vary.parameter == Parameter::thickness) return in_mm(thick.thickness);
  if (vary.parameter == Parameter::curvature_front) return in_per_mm(thick.front);
  if (vary.parameter == Parameter::curvature_back) return in_per_mm(thick.back);
  return (thick.front + thick.back) / (thick.front - thick.back);
}

std::string bound(double value) { return std::isinf(value) ? "free" : fmt::format("{}", value); }

std::string varied_text(const Train& before, const Solution& solution, const Paint& paint) {
  const auto& rows = solution.varied;
  Table table;
  table.text("parameter", words(rows, [](const Varied& row) {
               return fmt::format("element {} {}", row.vary.element, to_string(row.vary.parameter));
             }));
  table.text("before", words(rows, [&](const Varied& row) {
               return number(parameter_value(before, row.vary), 6);
             }));
  table.text("after", words(rows, [](const Varied& row) { return number(row.value, 6); }));
  table.text("bounds", words(rows, [](const Varied& row) {
               return bound(row.vary.min) + " to " + bound(row.vary.max);
             }));
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (rows[i].at_bound) table.mark(i, "at its bound");
  }
  return paint.title("What was varied") + '\n' + table.str(paint);
}

std::string required_text(const Analysis& before, const Analysis& after, const Paint& paint) {
  const auto& rows = after.requirements;
  const auto spent = [](const RequirementResult& row) { return 100 * row.spent(); };
  Table table;
  table.text("quantity", words(rows, [](const auto& row) { return name_of(row.requirement); }));
  table.text("wanted", words(rows, [](const auto& row) { return wish_of(row.requirement); }));
  table.text("budget", words(rows, budget_of));
  table.text("before", words(before.requirements, value_of));
  table.fixed("spent %", column(before.requirements, spent), 0);
  table.text("after", words(rows, value_of));
  table.fixed("spent %", column(rows, spent), 1);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (!rows[i].met()) table.mark(i, "over budget");
  }
  return paint.title("What was required") + '\n' + table.str(paint);
}

std::string status_text(const Solution& solution, const Paint& paint) {
  const std::string status(to_string(solution.status));
  const bool met = solution.status == SolveStatus::met;
  return fmt::format("{}: {}\n  half the sum of squared residuals, in budgets: {}\n",
                     met ? paint.good(status) : paint.warning(status), solution.why,
                     number_by(solution.cost, 1));
}

std::string report(const Train& before, const TrainFile& solved, const Solution& solution,
                   const std::optional<std::string>& out, const Catalog& catalog,
                   const Paint& paint) {
  const LeftOver left = left_over(solved.train);
  const std::string written = out ? "The solved train is in " + *out + '\n'
                                  : "Not kept: --out FILE writes the solved train\n";
  return heading_text(solved.train, paint) + '\n' + status_text(solution, paint) + '\n' +
         varied_text(before, solution, paint) + '\n' +
         required_text(analyze(before, solved.required), solution.analysis, paint) + '\n' +
         elements_text(solved.train, solution.analysis, catalog, paint) + '\n' +
         left_over_text(solved.train, left, paint) +
         notes_text(solved.train, solution.analysis, paint) + '\n' + written +
         advice_after_solve(solution, left);
}

// Nothing to vary, or nothing required: said with the place where a block to paste is.
void check_blocks(const TrainFile& file) {
  const char* lacking = file.may_vary.empty()   ? "nothing may vary; [[vary]]"
                        : file.required.empty() ? "nothing is required; [[require]]"
                                                : nullptr;
  if (lacking == nullptr) return;
  throw Error(ErrorCode::not_set,
              fmt::format("{} blocks to paste are in: chromacore solve --help", lacking));
}

Answer answer(const Options& options, const Common& common, const Catalog& catalog,
              const Paint& paint) {
  TrainFile file = read_train(options.train, catalog);
  check_blocks(file);
  if (options.start) start_from(*options.start, file);
  const Solution solution = solve(file.train, file.may_vary, file.required);
  TrainFile solved = file;
  solved.train = solution.train;
  return {.text = common.json ? to_json(solution, catalog) + '\n'
                              : report(file.train, solved, solution, common.out, catalog, paint),
          .product = train_text(solved, catalog),
          .exit_code = solution.status == SolveStatus::met ? 0 : 1};
}

Answer run(const Options& options, const Common& common, const Paint& paint) {
  if (options.start) check_form(*options.start);
  const Catalog catalog = catalog_of(common);
  return about_file(options.train, [&] { return answer(options, common, catalog, paint); });
}

constexpr const char* example = R"(Example:
  chromacore solve examples/achromat.toml --out solved.toml

Blocks to paste into a train file, one for each thing that may vary and one for each requirement:

  [[vary]]
  element   = 1               # counted from 1
  parameter = "power_per_mm"  # thin and diffractive; of thick ones curvature_front_per_mm,
                              # curvature_back_per_mm, shape, thickness_mm; of all gap_after_mm
  min = -0.1                  # optional
  max = 0.1                   # optional

  [[require]]
  quantity = "focal_length_mm"
  target   = 500              # or at_least, at_most
  budget   = 0.5              # optional where there is a default

  [[require]]
  quantity   = "axial_color_mm"  # or lateral_color_mm, secondary_axial_mm, ...
  between_um = ["F", "C"]        # optional: the ends of the band
  target     = 0

What may be the closed form to start from: achromat (two thin elements in contact), apochromat
(three), dialyte (two and the gap between them).
Exit status: 0 every requirement met, 1 not, 2 bad input. --out is written for 0 and 1.
)";

}  // namespace

Verb solve_verb(CLI::App& parent) {
  auto options = std::make_shared<Options>();
  CLI::App* app = parent.add_subcommand(
      "solve", "Vary powers, curvatures and gaps until the requirements are met");
  app->add_option("TRAIN", options->train, "a train file (TOML) with [[vary]] and [[require]]")
      ->required()
      ->type_name("");
  app->add_option("--start", options->start,
                  "set the powers in closed form first: achromat, apochromat or dialyte")
      ->type_name("FORM");
  app->footer(example);
  return {app, [options](const Common& common, const Paint& paint) {
            return run(*options, common, paint);
          }};
}

}  // namespace chromacore::cli
