// chromacore materials: what there is to choose from.
#include <fmt/format.h>

#include <algorithm>
#include <limits>
#include <memory>

#include "command.hpp"
#include "material_page.hpp"

namespace chromacore::cli {
namespace {

constexpr const char* verb = "materials";
const std::vector<std::string> sort_keys = {"name", "n", "v", "p", "deviation"};
const std::vector<std::string> statuses = {"current", "on_request", "withdrawn", "unknown"};

struct Options {
  std::optional<std::string> name = {};
  std::vector<std::string> makers = {};
  std::vector<std::string> status = {};
  std::optional<std::string> covers = {};
  std::optional<std::string> band = {};
  std::optional<std::string> reference = {};
  std::optional<std::string> sort = {};
  bool descending = false;
  std::optional<std::string> limit = {};
};

bool has(const std::vector<std::string>& words, std::string_view word) {
  return std::find(words.begin(), words.end(), word) != words.end();
}

std::string known(const std::string& word, const std::vector<std::string>& choices,
                  const std::string& option) {
  if (has(choices, word)) return word;
  throw usage_error(verb, option + " " + word + " is not known" + suggestion(word, choices));
}

// The middle one of the band's lines, from short to long.
Line middle(std::vector<Line> lines) {
  std::sort(lines.begin(), lines.end(),
            [](const Line& a, const Line& b) { return a.wavelength() < b.wavelength(); });
  return lines.at((lines.size() - 1) / 2);
}

Band band_of(const Options& options) {
  std::vector<Line> lines;
  for (const std::string& line : split(options.band.value_or("F,d,C"), ',')) {
    lines.push_back(line_of(line));
  }
  const Line reference = options.reference ? line_of(*options.reference) : middle(lines);
  return Band::of_lines(lines, reference);
}

// The range of `--covers 0.4:1.0` as a band of its two ends.
Band range_of(const std::string& text) {
  const std::vector<std::string> ends = split(text, ':');
  if (ends.size() != 2) {
    throw usage_error(verb, "--covers " + text + ": two ends in um or as letters were expected, " +
                                "as in 0.4:1.0");
  }
  return Band::of_lines({line_of(ends[0]), line_of(ends[1])}, line_of(ends[0]));
}

// One material with the figures that a list shows and sorts by.
struct Row {
  Material material = {};
  std::optional<double> n = {};
  std::optional<double> v = {};
  std::optional<double> p = {};
  std::optional<double> deviation = {};
};

Row row_of(const Material& material, const Band& band) {
  static const Band blue_to_red = Band::of_lines({"g", "F", "d", "C"}, "d");
  Row row{.material = material};
  if (covers(material, band)) {
    row.n = index(material, band.reference.wavelength());
    row.v = v_number(material, band);
    row.p = partial_dispersion(material, {band.reference, band.longest()}, band);
  }
  if (covers(material, blue_to_red)) row.deviation = deviation_from_normal_line(material);
  return row;
}

// What a row is sorted by; those without it come last.
double key_of(const Row& row, const std::string& sort, bool descending) {
  const std::optional<double> value = sort == "n"   ? row.n
                                      : sort == "v" ? row.v
                                      : sort == "p" ? row.p
                                                    : row.deviation;
  if (!value) return std::numeric_limits<double>::infinity();
  return descending ? -*value : *value;
}

void sort_rows(std::vector<Row>& rows, const std::string& sort, bool descending) {
  std::stable_sort(rows.begin(), rows.end(), [&](const Row& a, const Row& b) {
    if (sort == "name") {
      return descending ? a.material.name() > b.material.name()
                        : a.material.name() < b.material.name();
    }
    return key_of(a, sort, descending) < key_of(b, sort, descending);
  });
}

std::string upper_case(std::string text) {
  for (char& c : text) {
    if (c >= 'a' && c <= 'z') c = static_cast<char>(c - 'a' + 'A');
  }
  return text;
}

std::vector<std::string> makers_in(const Catalog& catalog) {
  std::vector<std::string> makers;
  for (const Material& material : catalog.materials()) {
    const std::string& maker = material.maker();
    if (!maker.empty() && !has(makers, maker)) makers.push_back(maker);
  }
  return makers;
}

// The makers wanted, in the catalogue's spelling. @throws Error  bad_value: none of that name
std::vector<std::string> makers_of(const Options& options, const Catalog& catalog) {
  const std::vector<std::string> makers = makers_in(catalog);
  std::vector<std::string> wanted;
  for (const std::string& name : options.makers) {
    const auto same = [&](const auto& maker) { return upper_case(maker) == upper_case(name); };
    const auto found = std::find_if(makers.begin(), makers.end(), same);
    if (found == makers.end()) {
      throw usage_error(verb, "no maker " + name + suggestion(upper_case(name), makers));
    }
    wanted.push_back(*found);
  }
  return wanted;
}

std::vector<Row> filtered(const Options& options, const Catalog& catalog, const Band& band) {
  const std::vector<std::string> makers = makers_of(options, catalog);
  const std::optional<Band> range =
      options.covers ? std::optional(range_of(*options.covers)) : std::nullopt;
  std::vector<Row> rows;
  for (const Material& material : catalog.materials()) {
    const MaterialData& data = material.data();
    if (!makers.empty() && !has(makers, data.maker)) continue;
    if (!options.status.empty() && !has(options.status, to_string(data.status))) continue;
    if (range && !covers(material, *range)) continue;
    if (options.band && !covers(material, band)) continue;
    rows.push_back(row_of(material, band));
  }
  return rows;
}

std::string list_text(const std::vector<Row>& rows, const Catalog& catalog, const Band& band,
                      const Paint& paint) {
  const std::string reference = band.reference.name();
  const std::string shortest = band.shortest().name();
  const std::string longest = band.longest().name();
  const auto data = [](const Row& row) -> const MaterialData& { return row.material.data(); };
  Table table;
  table.text("material",
             words(rows, [&](const Row& row) { return catalog.shortest_name(row.material); }));
  table.text("code", words(rows, [&](const Row& row) { return data(row).code; }));
  table.text("status", words(rows, [&](const Row& row) { return to_string(data(row).status); }));
  table.fixed("n\n" + reference, column(rows, [](const Row& row) { return row.n; }), 5);
  table.fixed("V\n" + shortest + " to " + longest,
              column(rows, [](const Row& row) { return row.v; }), 2);
  table.fixed("P\n" + reference + " to " + longest,
              column(rows, [](const Row& row) { return row.p; }), 4);
  table.fixed("P(g,F) off\nnormal line", column(rows, [](const Row& row) { return row.deviation; }),
              4);
  table.fixed("from\num", column(rows, [&](const Row& row) { return in_um(data(row).shortest); }),
              3);
  table.fixed("to\num", column(rows, [&](const Row& row) { return in_um(data(row).longest); }), 3);
  table.text(
      "", words(rows, [&](const Row& row) { return data(row).cautions.empty() ? "" : "caution"; }));
  return table.str(paint);
}

Answer list(const Options& options, const Common& common, const Paint& paint) {
  const Band band = band_of(options);
  const Catalog catalog = catalog_of(common);
  std::vector<Row> rows = filtered(options, catalog, band);
  if (options.sort) sort_rows(rows, known(*options.sort, sort_keys, "--sort"), options.descending);
  const std::size_t found = rows.size();
  if (options.limit) {
    const auto limit = static_cast<std::size_t>(count_of(*options.limit, verb, "--limit"));
    rows.resize(std::min(rows.size(), limit));
  }
  if (common.json) {
    std::vector<Material> materials;
    for (const Row& row : rows) materials.push_back(row.material);
    return {.text = to_json(materials, band) + '\n'};
  }
  std::string text = list_text(rows, catalog, band, paint);
  text += fmt::format("{} of {} materials", found, catalog.materials().size());
  if (rows.size() < found) text += fmt::format(", the first {} shown", rows.size());
  return {.text = text + "; one in full: chromacore materials NAME\n"};
}

Answer run(const Options& options, const Common& common, const Paint& paint) {
  for (const std::string& status : options.status) known(status, statuses, "--status");
  if (!options.name) return list(options, common, paint);
  const Material material = catalog_of(common).at(*options.name);
  const Band band = band_of(options);
  if (common.json) return {.text = to_json(std::vector<Material>{material}, band) + '\n'};
  return {.text = material_page(material, band, paint)};
}

constexpr const char* example = R"(Examples:
  chromacore materials --maker SCHOTT --status current --sort v --limit 20
  chromacore materials --band g,F,d,C,r --reference d --sort deviation --descending --limit 10
  chromacore materials --band 3,4,5 --sort v
  chromacore materials N-BK7
)";

}  // namespace

Verb materials_verb(CLI::App& parent) {
  auto options = std::make_shared<Options>();
  CLI::App* app = parent.add_subcommand(verb, "List materials, or show one in full");
  CLI::Option* name =
      app->add_option("NAME", options->name, "one in full: N-BK7, SCHOTT/F2 or a six-digit code");
  name->type_name("");
  const auto filter = [&](const char* option, auto& value, const char* type, const char* help) {
    return app->add_option(option, value, help)->type_name(type)->excludes(name);
  };
  filter("--maker", options->makers, "MAKER", "only of this maker; may be repeated")
      ->allow_extra_args(false);
  filter("--status", options->status, "STATUS",
         "only current, on_request, withdrawn or unknown; may be repeated")
      ->allow_extra_args(false);
  filter("--covers", options->covers, "FROM:TO",
         "only those whose source covers a range, in um or lines: 0.4:1.0, g:C");
  filter("--sort", options->sort, "KEY", "by name, n, v, p or deviation");
  app->add_flag("--descending", options->descending, "largest first")->excludes(name);
  filter("--limit", options->limit, "COUNT", "the first so many");
  app->add_option("--band", options->band,
                  "lines or um for n, V and P, only materials that cover them: F,d,C")
      ->type_name("LINES");
  app->add_option("--reference", options->reference, "its reference; left out: the middle one")
      ->type_name("LINE");
  app->footer(example);
  return {app, [options](const Common& common, const Paint& paint) {
            return run(*options, common, paint);
          }};
}

}  // namespace chromacore::cli
