// chromacore import: a surface list becomes a train.
#include <fmt/format.h>

#include <memory>

#include "command.hpp"

namespace chromacore::cli {
namespace {

std::string summary(const TrainFile& file, const std::string& out) {
  const Analysis analysis = analyze(file.train);
  return fmt::format(
      "{}: {} elements, focal length {} mm; band F, d, C, F/10 and half angle 1 "
      "degree are assumed: set yours there\nNext: chromacore analyze {}\n",
      out, file.train.elements.size(), number(in_mm(analysis.focal_length), 6), out);
}

Answer answer(const std::string& path, const Common& common, const Catalog& catalog) {
  const TrainFile file = read_surfaces(path, catalog);
  Answer answer;
  answer.product = train_text(file, catalog);
  answer.text = common.json  ? to_json(file.train, analyze(file.train), catalog) + '\n'
                : common.out ? summary(file, *common.out)
                             : *answer.product;
  return answer;
}

Answer run(const std::string& path, const Common& common) {
  const Catalog catalog = catalog_of(common);
  return about_file(path, [&] { return answer(path, common, catalog); });
}

constexpr const char* example = R"(The list has one row a surface, with the columns
  radius_mm,thickness_mm,material,clear_diameter_mm,stop
radius_mm: positive when the centre lies to the right, inf for flat; thickness_mm: to the next
surface; material: behind this surface, empty for air; the last two columns are optional.

Example:
  chromacore import examples/surfaces.csv --out old.toml
)";

}  // namespace

Verb import_verb(CLI::App& parent) {
  auto path = std::make_shared<std::string>();
  CLI::App* app = parent.add_subcommand("import", "Make a train file of a surface list (CSV)");
  app->add_option("CSV", *path, "a surface list")->required()->type_name("");
  app->footer(example);
  return {app, [path](const Common& common, const Paint&) { return run(*path, common); }};
}

}  // namespace chromacore::cli
