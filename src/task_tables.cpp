// [[require]] and [[vary]] of a train.
#include "evaluate.hpp"
#include "solve_variables.hpp"
#include "train_tables.hpp"

namespace chromacore::detail {
namespace {

LinePair read_pair(const TableView& table, std::string_view key) {
  const std::vector<Line> lines = table.lines(key);
  if (lines.size() == 2) return {lines[0], lines[1]};
  table.fail(ErrorCode::bad_value,
             std::string(key) + " needs two wavelengths; it has " + std::to_string(lines.size()),
             key);
}

// 0 where the key is absent.
int read_element_number(const TableView& table) {
  const auto element = table.maybe_integer("element");
  if (element && *element < 1) {
    table.fail(ErrorCode::bad_value,
               "element is " + std::to_string(*element) + "; elements count from 1", "element");
  }
  return element.value_or(0);
}

Vary read_vary(const TableView& table) {
  table.allow({"element", "parameter", "min", "max"});
  Vary vary;
  vary.element = table.integer("element");
  const std::string name = table.text("parameter");
  vary.parameter = placed(table.place("parameter"), [&] { return parameter(name); });
  vary.min = table.maybe_number("min", Infinite::allowed).value_or(vary.min);
  vary.max = table.maybe_number("max", Infinite::allowed).value_or(vary.max);
  return vary;
}

// Throws what a solve of the first `count` would say of them.
void check_first(const std::vector<Vary>& may_vary, std::size_t count, const Train& train,
                 const Model& model) {
  const auto end = may_vary.begin() + static_cast<std::ptrdiff_t>(count);
  constexpr double any_focal_length_mm = 1;  // it sets units only
  static_cast<void>(Variables(train, model, {may_vary.begin(), end}, any_focal_length_mm));
}

bool fits(const std::vector<Vary>& may_vary, std::size_t count, const Train& train,
          const Model& model) {
  try {
    check_first(may_vary, count, train, model);
    return true;
  } catch (const Error&) {
    return false;
  }
}

// Where the list does not fit: at the first one that does not fit to those before it, found by
// halving.
void check_may_vary(const std::vector<Vary>& may_vary, const std::vector<TableView>& tables,
                    const Train& train) {
  if (may_vary.empty()) return;
  const Model model(train, {});
  if (fits(may_vary, may_vary.size(), train, model)) return;
  std::size_t good = 0;
  std::size_t bad = may_vary.size();
  while (bad - good > 1) {
    const std::size_t middle = good + (bad - good) / 2;
    (fits(may_vary, middle, train, model) ? good : bad) = middle;
  }
  placed(tables[bad - 1].place(), [&] { check_first(may_vary, bad, train, model); });
}

}  // namespace

Requirement read_requirement(const TableView& table, const Train& train) {
  table.allow({"quantity", "element", "between_um", "target", "at_least", "at_most", "budget"});
  Requirement r;
  const std::string name = table.text("quantity");
  r.quantity = placed(table.place("quantity"), [&] { return quantity(name); });
  r.element = read_element_number(table);
  if (table.has("between_um")) r.between = read_pair(table, "between_um");
  r.target = table.maybe_number("target");
  r.at_least = table.maybe_number("at_least");
  r.at_most = table.maybe_number("at_most");
  r.budget = table.maybe_number("budget");
  placed(table.place(), [&] {
    check(r, train);
    static_cast<void>(budget_of(r, train, 1.0));  // not_set where there is no default
  });
  return r;
}

std::vector<Vary> read_may_vary(const TableView& file, const Train& train) {
  const std::vector<TableView> tables = file.tables("vary");
  std::vector<Vary> may_vary;
  for (const TableView& table : tables) may_vary.push_back(read_vary(table));
  check_may_vary(may_vary, tables, train);
  return may_vary;
}

}  // namespace chromacore::detail
