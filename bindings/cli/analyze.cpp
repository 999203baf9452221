// chromacore analyze: where a train's colour comes from, and what is left of it.
#include <algorithm>
#include <memory>

#include "account.hpp"
#include "command.hpp"

namespace chromacore::cli {
namespace {

struct Options {
  std::string train = {};
  bool strict = false;
};

std::string report(const std::string& path, const TrainFile& file, const Analysis& analysis,
                   const Catalog& catalog, const Paint& paint) {
  const LeftOver left = left_over(file.train);
  return heading_text(file.train, paint) + '\n' + first_order_text(analysis, paint) + '\n' +
         elements_text(file.train, analysis, catalog, paint) + '\n' +
         left_over_text(file.train, left, paint) + '\n' + curves_text(analysis, left, paint) +
         '\n' + requirements_text(analysis, paint) + notes_text(file.train, analysis, paint) +
         '\n' + advice(path, file, analysis, left);
}

Answer answer(const Options& options, const Common& common, const Catalog& catalog,
              const Paint& paint) {
  const TrainFile file = read_train(options.train, catalog);
  const Analysis analysis = analyze(file.train, file.required);
  const bool met = std::all_of(analysis.requirements.begin(), analysis.requirements.end(),
                               [](const RequirementResult& result) { return result.met(); });
  return {.text = common.json ? to_json(file.train, analysis, catalog) + '\n'
                              : report(options.train, file, analysis, catalog, paint),
          .exit_code = options.strict && !met ? 1 : 0};
}

Answer run(const Options& options, const Common& common, const Paint& paint) {
  const Catalog catalog = catalog_of(common);
  return about_file(options.train, [&] { return answer(options, common, catalog, paint); });
}

constexpr const char* example = R"(Examples:
  chromacore analyze examples/achromat.toml
  chromacore analyze examples/wide-field.toml --json --out wide-field.json
)";

}  // namespace

Verb analyze_verb(CLI::App& parent) {
  auto options = std::make_shared<Options>();
  CLI::App* app =
      parent.add_subcommand("analyze", "Say where a train's colour comes from, and what is left");
  app->add_option("TRAIN", options->train, "a train file (TOML)")->required()->type_name("");
  app->add_flag("--strict", options->strict, "exit 1 where a requirement is not met");
  app->footer(example);
  return {app, [options](const Common& common, const Paint& paint) {
            return run(*options, common, paint);
          }};
}

}  // namespace chromacore::cli
