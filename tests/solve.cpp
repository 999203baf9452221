// The solver: what it finds, what it says about it, and the laws that its answers obey.
#include <doctest/doctest.h>

#include <algorithm>
#include <chromacore/catalog.hpp>
#include <chromacore/closed_form.hpp>
#include <chromacore/solve.hpp>
#include <cmath>
#include <limits>
#include <utility>
#include <vector>

#include "close.hpp"
#include "message_of.hpp"

using namespace chromacore;
using namespace chromacore::test;
using namespace chromacore::units;

namespace {

const Catalog& catalog() {
  static const Catalog built_in = Catalog::built_in();
  return built_in;
}

Train empty_train() {
  Train train;
  train.band = Band::of_lines({"F", "d", "C"}, "d");
  train.aperture = EntrancePupilDiameter{50.0 * mm};
  train.field = HalfAngle{1.0 * deg};
  return train;
}

Train thin_train(const std::vector<std::pair<const char*, double>>& elements, double gap_mm = 0) {
  Train train = empty_train();
  for (const auto& [name, power] : elements) {
    train.elements.push_back(Thin{catalog().at(name), power * per_mm, gap_mm * mm});
  }
  return train;
}

// The pair of the README's first program.
Train cemented_pair() {
  Train train = empty_train();
  train.elements = {Thick{.material = catalog().at("N-BK7"),
                          .front = radius(310.0 * mm),
                          .back = radius(-230.0 * mm),
                          .thickness = 8.0 * mm,
                          .cemented = true},
                    Thick{.material = catalog().at("SCHOTT/F2"),
                          .front = radius(-230.0 * mm),
                          .back = radius(-900.0 * mm),
                          .thickness = 5.0 * mm}};
  return train;
}

std::vector<Requirement> achromat() {
  return {require::focal_length(500.0 * mm, 0.5 * mm),
          require::axial_color("F", "C", 0.0 * mm, 0.05 * mm)};
}

std::vector<Requirement> apochromat() {
  std::vector<Requirement> required = achromat();
  required.push_back(require::secondary_axial(0.0 * mm, 0.05 * mm));
  return required;
}

const std::vector<Vary> two_powers = {vary::power(1), vary::power(2)};
const std::vector<Vary> three_powers = {vary::power(1), vary::power(2), vary::power(3)};

double value(const Solution& solution, std::size_t i) { return solution.varied.at(i).value; }

void check_same_values(const Solution& got, const Solution& want, Tol tol) {
  REQUIRE(got.varied.size() == want.varied.size());
  for (std::size_t i = 0; i < got.varied.size(); ++i) {
    CAPTURE(i);
    CHECK(close(value(got, i), value(want, i), tol));
  }
}

}  // namespace

// ---- what it finds ----

TEST_CASE("solve: the first program's cemented pair") {
  const Solution solution = solve(cemented_pair(), {vary::back(1), vary::back(2)}, achromat());
  CHECK(solution.status == SolveStatus::met);
  CHECK(solution.why.starts_with("every requirement is within its budget after "));
  // Checked by a calculation of its own: design page "The first hour".
  CHECK(close(1 / value(solution, 0), -173.54, {.abs = 0.005}));
  CHECK(close(1 / value(solution, 1), -663.94, {.abs = 0.005}));
  const auto& front = std::get<Thick>(solution.train.elements[0]);
  const auto& back = std::get<Thick>(solution.train.elements[1]);
  CHECK(front.back == back.front);  // the joint moved as one
  CHECK(close(in_mm(solution.analysis.focal_length), 500, {.rel = 1e-12}));
}

TEST_CASE("solve: a joint is one variable, whichever face is named") {
  const Solution by_back = solve(cemented_pair(), {vary::back(1), vary::back(2)}, achromat());
  const Solution by_front = solve(cemented_pair(), {vary::front(2), vary::back(2)}, achromat());
  check_same_values(by_front, by_back, {.rel = 1e-15});
  CHECK(by_front.varied[0].vary.parameter == Parameter::curvature_front);
}

TEST_CASE("solve: thin elements in contact end at the closed forms") {
  const Train pair = thin_train({{"N-BK7", 0.003}, {"SCHOTT/F2", -0.0005}});
  const Solution two = solve(pair, two_powers, achromat());
  const auto expect = contact_achromat(Power(2.0 * per_m), catalog().at("N-BK7"),
                                       catalog().at("SCHOTT/F2"), pair.band);
  for (std::size_t i = 0; i < 2; ++i) {
    CHECK(close(value(two, i), in_per_mm(expect[i]), {.rel = 1e-11}));
  }
  const Train triple = thin_train({{"N-FK51A", 0.003}, {"N-KZFS4", -0.002}, {"N-SF6", 0.0005}});
  const Solution three = solve(triple, three_powers, apochromat());
  CHECK(three.status == SolveStatus::met);
  const auto powers =
      contact_apochromat(Power(2.0 * per_m), catalog().at("N-FK51A"), catalog().at("N-KZFS4"),
                         catalog().at("N-SF6"), triple.band);
  for (std::size_t i = 0; i < 3; ++i) {
    CHECK(close(value(three, i), in_per_mm(powers[i]), {.rel = 1e-9}));
  }
}

// T23: three lenses in contact, omega 0.066, 0.055, 0.040; f = -22, -11, x cm: x = 5 cm. Source:
// byjus.com, "for an achromatic combination three different lenses are combined".
TEST_CASE("solve: the third lens of a published achromatic combination") {
  Train train = empty_train();
  const auto add = [&](const char* name, double omega, double f_mm) {
    const double spread = 0.5 * omega;
    MaterialData data;
    data.name = name;
    data.form = DispersionForm::through_lines;
    data.shortest = train.band.shortest().wavelength();
    data.longest = train.band.longest().wavelength();
    data.coefficients = {
        in_um(data.shortest), 1.5 + 0.7 * spread, in_um(train.band.reference.wavelength()), 1.5,
        in_um(data.longest),  1.5 - 0.3 * spread};
    train.elements.push_back(Thin{Material(data), 1.0 / (f_mm * mm)});
  };
  add("first", 0.066, -220);
  add("second", 0.055, -110);
  add("third", 0.040, 40);
  const Solution solution = solve(
      train, {vary::power(3)}, {{.quantity = Quantity::axial_sum, .target = 0.0, .budget = 1e-3}});
  CHECK(solution.status == SolveStatus::met);
  CHECK(close(1 / value(solution, 0), 50, {.rel = 1e-9}));
}

TEST_CASE("solve: a start of the wrong sign, or far off, is brought over") {
  const Solution near =
      solve(thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}}), two_powers, achromat());
  for (const double start : {-0.004, 0.0021, 0.04}) {
    CAPTURE(start);
    const Train far = thin_train({{"N-BK7", start}, {"SCHOTT/F2", -0.002}});
    const Solution solution = solve(far, two_powers, achromat());
    CHECK(solution.status == SolveStatus::met);
    check_same_values(solution, near, {.rel = 1e-10});
  }
}

TEST_CASE("solve: shape bends at fixed power, power scales at fixed shape") {
  Train lens = empty_train();
  lens.elements = {Thick{.material = catalog().at("N-BK7"),
                         .front = radius(60.0 * mm),
                         .back = radius(-90.0 * mm),
                         .thickness = 12.0 * mm}};
  const Analysis before = analyze(lens);
  const double target = in_mm(before.back_focal_distance) - 2;
  const Solution bent =
      solve(lens, {vary::shape(1)}, {require::back_focal_distance(target * mm, 0.01 * mm)});
  CHECK(bent.status == SolveStatus::met);
  CHECK(close(in_mm(bent.analysis.focal_length), in_mm(before.focal_length), {.rel = 1e-13}));
  CHECK(close(in_mm(bent.analysis.back_focal_distance), target, {.rel = 1e-12}));
  const Solution scaled =
      solve(lens, {vary::power(1)}, {require::focal_length(120.0 * mm, 0.01 * mm)});
  const auto& to = std::get<Thick>(scaled.train.elements[0]);
  CHECK(close((to.front + to.back) / (to.front - to.back), 0.2, {.rel = 1e-13}));
  CHECK(close(in_mm(scaled.analysis.focal_length), 120, {.rel = 1e-12}));
}

TEST_CASE("solve: a start outside the bounds is brought within") {
  const Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}});
  const Solution solution = solve(train, {vary::power(1, 0.001 * per_mm, 0.003 * per_mm)},
                                  {require::focal_length(1000.0 * mm, 0.5 * mm)});
  CHECK(solution.status == SolveStatus::met);
  CHECK(close(value(solution, 0), 0.003, {.rel = 1e-12}));
}

TEST_CASE("solve: a gap never falls below 0, nor short of the stop that floats in it") {
  Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}}, 10);
  const Requirement shorter = {.quantity = Quantity::track_length, .at_most = 100.0, .budget = 1.0};
  const Solution free = solve(train, {vary::gap_after(1)}, {shorter});
  CHECK(value(free, 0) >= 0);
  train.stop = {.element = 1, .side = Side::back, .offset = 4.0 * mm};
  const Requirement apart = {.quantity = Quantity::focal_length, .target = 400.0, .budget = 1.0};
  const Solution held = solve(train, {vary::gap_after(1)}, {apart});
  CHECK(value(held, 0) >= 4);
}

TEST_CASE("solve: default budgets are those of the answer, and so are cost and residuals") {
  Train train = thin_train({{"N-BK7", 0.006}, {"SCHOTT/F2", -0.002}});
  const std::vector<Requirement> required = {require::focal_length(500.0 * mm),
                                             require::axial_color("F", "C"),
                                             require::secondary_axial()};
  const Solution solution = solve(train, two_powers, required);
  double cost = 0;
  for (const RequirementResult& result : analyze(solution.train, required).requirements) {
    cost += 0.5 * result.residual * result.residual;
  }
  CHECK(close(solution.cost, cost, {.rel = 1e-14}));
  // From the answer on, with its budgets given outright, nothing is left to gain.
  std::vector<Requirement> outright;
  for (const auto& result : solution.analysis.requirements) outright.push_back(result.requirement);
  const Solution again = solve(solution.train, two_powers, outright);
  check_same_values(again, solution, {.rel = 1e-9});
}

TEST_CASE("solve: a limit on strength may switch an element off") {
  const Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.001}});
  const Solution solution =
      solve(train, two_powers,
            {require::focal_length(500.0 * mm, 0.5 * mm), require::strength_at_most(1.0, 1e-3),
             require::axial_color("F", "C", 0.0 * mm, 100.0 * mm)});
  CHECK(solution.status == SolveStatus::met);
  CHECK(close(value(solution, 1), 0, {.abs = 1e-9}));
  CHECK(close(value(solution, 0), 0.002, {.rel = 1e-4}));
}

// ---- laws ----

TEST_CASE("solve: with fewer requirements than variables, the least scaled change") {
  // f alone: the change of the powers is the same for all, as all have the same effect.
  const Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.003}, {"N-KZFS4", 0.0022}});
  const Solution solution = solve(train, three_powers, {require::focal_length(500.0 * mm)});
  for (const auto& [i, start] : {std::pair{0u, 0.004}, {1u, -0.003}, {2u, 0.0022}}) {
    CHECK(close(value(solution, i) - start, (0.002 - 0.0032) / 3, {.rel = 1e-10}));
  }
}

TEST_CASE("solve: a variable that nothing needs does not move") {
  const Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.003}});
  const Solution solution =
      solve(train, two_powers,
            {{.quantity = Quantity::axial_sum, .element = 1, .target = 0.03, .budget = 1e-3}});
  CHECK(solution.status == SolveStatus::met);
  CHECK(close(value(solution, 1), -0.003, {.rel = 1e-15}));
  // A limit that is met pulls at nothing.
  const Solution slack = solve(train, two_powers, {require::strength_at_most(50, 1)});
  CHECK(slack.iterations == 0);
  check_same_values(slack, solve(train, two_powers, {require::strength_at_most(60, 1)}), {});
}

TEST_CASE("solve: scaling the train scales the answer") {
  const auto scaled = [](double s) {
    Train train = thin_train({{"N-BK7", 0.004 / s}, {"SCHOTT/F2", -0.002 / s}}, 12 * s);
    train.aperture = EntrancePupilDiameter{50.0 * s * mm};
    return solve(train, {vary::power(1), vary::power(2), vary::gap_after(1, 0.0 * mm, 30 * s * mm)},
                 {require::focal_length(500 * s * mm, 0.5 * s * mm),
                  require::axial_color("F", "C", 0.0 * mm, 0.05 * s * mm)});
  };
  const Solution one = scaled(1);
  for (const double s : {1e-3, 7.0}) {
    const Solution other = scaled(s);
    CHECK(close(value(other, 0), value(one, 0) / s, {.rel = 1e-9}));
    CHECK(close(value(other, 1), value(one, 1) / s, {.rel = 1e-9}));
    CHECK(close(value(other, 2), value(one, 2) * s, {.rel = 1e-9}));
  }
}

TEST_CASE("solve: the order of requirements and variables does not matter") {
  const Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}});
  std::vector<Requirement> backwards = apochromat();
  std::reverse(backwards.begin(), backwards.end());
  const Solution there = solve(train, two_powers, apochromat());
  const Solution back = solve(train, {vary::power(2), vary::power(1)}, backwards);
  CHECK(close(back.cost, there.cost, {.rel = 1e-10}));
  CHECK(close(value(back, 1), value(there, 0), {.rel = 1e-9}));
  CHECK(close(value(back, 0), value(there, 1), {.rel = 1e-9}));
}

TEST_CASE("solve: an element split in two shares its power") {
  const Solution whole =
      solve(thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}}), two_powers, achromat());
  const Solution split =
      solve(thin_train({{"N-BK7", 0.002}, {"N-BK7", 0.002}, {"SCHOTT/F2", -0.002}}), three_powers,
            achromat());
  CHECK(close(value(split, 0), value(whole, 0) / 2, {.rel = 1e-10}));
  CHECK(close(value(split, 1), value(whole, 0) / 2, {.rel = 1e-10}));
  CHECK(close(value(split, 2), value(whole, 1), {.rel = 1e-10}));
}

TEST_CASE("solve: an answer solved again stays where it is") {
  const std::vector<Vary> vary = {vary::power(1), vary::power(2, -0.002 * per_mm, 0.0 * per_mm)};
  const Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.001}});
  const Solution bounded = solve(train, vary, achromat());
  CHECK(bounded.varied[1].at_bound);
  check_same_values(solve(bounded.train, vary, achromat()), bounded, {.rel = 1e-12});
  const Solution free = solve(train, two_powers, achromat());
  const Solution again = solve(free.train, two_powers, achromat());
  CHECK(again.iterations <= 1);
  check_same_values(again, free, {.rel = 1e-13});
}

// ---- what it says ----

TEST_CASE("solve: one V for all is infeasible, with its number, and changes nothing") {
  const Train train = thin_train({{"N-BK7", 0.004}, {"N-BK7", -0.003}});
  const Solution solution = solve(train, two_powers, achromat());
  CHECK(solution.status == SolveStatus::infeasible);
  CHECK(
      solution.why ==
      "thin in contact, materials of one V (N-BK7 V 64.1673, P 0.3076; N-BK7 V 64.1673, P "
      "0.3076) have the same colour whatever their powers: at a focal length of 500 mm "
      "axial_color_mm (F, C) is -7.74608, asked to be 0 (budget 0.05); take a material of another "
      "V, or separate the elements");
  CHECK(std::get<Thin>(solution.train.elements[0]).power == 0.004 * per_mm);
  CHECK(close(value(solution, 1), -0.003, {.rel = 1e-15}));
}

TEST_CASE("solve: materials on one line of P against V are infeasible") {
  const Solution solution =
      solve(thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}, {"N-BK7", 0.001}}), three_powers,
            apochromat());
  CHECK(solution.status == SolveStatus::infeasible);
  CHECK(
      solution.why ==
      "2 colour conditions in contact, but the materials lie on one line of P against V (N-BK7 V "
      "64.1673, P 0.3076; F2 V 36.3665, P 0.2938; N-BK7 V 64.1673, P 0.3076); take a material off "
      "that line");
}

TEST_CASE("solve: requirements that exclude one another are infeasible") {
  std::vector<Requirement> required = achromat();
  required.push_back({.quantity = Quantity::focal_length, .at_least = 520.0, .budget = 1.0});
  const Solution solution =
      solve(thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}}), two_powers, required);
  CHECK(solution.status == SolveStatus::infeasible);
  CHECK(
      solution.why ==
      "focal_length_mm is to be 500 (budget 0.5) and at least 520 (budget 1) as well: no value is "
      "both; drop one of the two");
}

TEST_CASE("solve: a requirement that no variable acts on is infeasible") {
  Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}});
  const Solution solution =
      solve(train, {vary::power(2)},
            {{.quantity = Quantity::axial_sum, .element = 1, .target = 0.0, .budget = 0.001}});
  CHECK(solution.status == SolveStatus::infeasible);
  CHECK(solution.why ==
        "nothing that may vary acts on axial_sum_mm of element 1, which is and stays 0.0389606, "
        "asked to be 0 (budget 0.001); vary something that does");
}

TEST_CASE("solve: a compromise names what blocks, and the bound whose release frees it") {
  const Solution solution =
      solve(thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.001}}),
            {vary::power(1), vary::power(2, -0.002 * per_mm, 0.0 * per_mm)}, achromat());
  CHECK(solution.status == SolveStatus::compromise);
  CHECK(solution.varied[1].at_bound);
  CHECK(solution.why ==
        "axial_color_mm (F, C) blocks: at -1.8217 it spends 36.4 times its budget of 0.05 (2 "
        "requirements are over theirs); power_per_mm of element 2 is at its lower bound, -0.002; "
        "without that every requirement would be met; else it takes materials further apart in V, "
        "or one element more, or a budget of 1.82");
}

TEST_CASE("solve: a compromise for want of a third material") {
  const Solution solution =
      solve(thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}}), two_powers, apochromat());
  CHECK(solution.status == SolveStatus::compromise);
  CHECK(solution.why ==
        "secondary_axial_mm blocks: at -0.23782 it spends 4.76 times its budget of 0.05 (2 "
        "requirements are over theirs); 3 requirements stand against 2 variables; else it takes "
        "materials closer in P for their difference of V, or one element more of a third material, "
        "or a budget of 0.238");
}

TEST_CASE("solve: a compromise for want of a variable names the one that would help") {
  const Solution solution =
      solve(thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}}), {vary::power(1)}, achromat());
  CHECK(solution.status == SolveStatus::compromise);
  CHECK(solution.why.find("2 requirements stand against 1 variable; if power_per_mm of element 2 "
                          "may vary too, every requirement would be met") != std::string::npos);
}

TEST_CASE("solve: stopped by count, by hand, by time; the train is the best so far") {
  const Train train = thin_train({{"N-BK7", 0.003}, {"SCHOTT/F2", -0.0005}});
  const double before = 0.5 * (std::pow(in_mm(analyze(train).focal_length) - 500, 2) / 0.25 +
                               std::pow(in_mm(analyze(train).axial_color) / 0.05, 2));
  SolveOptions by_count;
  by_count.max_iterations = 1;
  SolveOptions by_hand;
  by_hand.progress = [](const SolveProgress& progress) { return progress.iteration < 2; };
  SolveOptions by_time;
  by_time.time_limit_s = 0;
  for (const auto& [options, reason] : {std::pair{by_count, "max_iterations, 1, was reached"},
                                        {by_hand, "the progress callback stopped it"},
                                        {by_time, "time_limit_s, 0, was reached"}}) {
    const Solution solution = solve(train, two_powers, achromat(), options);
    CHECK(solution.status == SolveStatus::stopped);
    CHECK(solution.why.starts_with(std::string(reason) + " before the minimum; "));
    CHECK(solution.cost <= before * (1 + 1e-12));
  }
}

TEST_CASE("solve: colour alone lets the focal length run away, and is told so") {
  const Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.003}, {"N-KZFS4", 0.001}});
  const Solution solution = solve(train, three_powers,
                                  {require::axial_color("F", "C", 0.0 * mm, 0.05 * mm),
                                   require::secondary_axial(0.0 * mm, 0.05 * mm)});
  CHECK(solution.status == SolveStatus::stopped);
  CHECK(solution.why.find(" mm: require one") != std::string::npos);
}

// ---- bad input ----

TEST_CASE("solve: bad input has its line") {
  const Train train = thin_train({{"N-BK7", 0.004}, {"SCHOTT/F2", -0.002}});
  const auto told = [&](const std::vector<Vary>& vary, const Train& of) {
    return message_of([&] { (void)solve(of, vary, achromat()); });
  };
  CHECK(told({}, train) ==
        "not_set: nothing to vary; name at least one parameter, such as power_per_mm of element 1");
  CHECK(message_of([&] { (void)solve(train, two_powers, {}); }) ==
        "not_set: nothing is required; name at least one requirement, such as focal_length_mm");
  CHECK(told({vary::power(5)}, train) ==
        "bad_value: cannot vary power_per_mm of element 5; the train has 2");
  CHECK(told({vary::back(1)}, train) ==
        "bad_value: element 1: it has no curvature_back_per_mm, being without thickness; "
        "power_per_mm and gap_after_mm are what it has");
  CHECK(told({vary::power(1), vary::power(1)}, train) ==
        "bad_value: element 1: power_per_mm is to vary twice; name it once");
  CHECK(told({vary::gap_after(2)}, train) ==
        "bad_value: element 2: gap_after_mm cannot vary: behind the last element it has no effect");
  CHECK(told({vary::power(1, 0.1 * per_mm, -0.1 * per_mm)}, train) ==
        "bad_value: element 1: power_per_mm: min 0.1 is above max -0.1");
  CHECK(told({vary::power(1, NAN * per_mm, 1.0 * per_mm)}, train) ==
        "bad_value: element 1: power_per_mm: a bound is not a number");
  CHECK(told({vary::gap_after(1, -5.0 * mm, -1.0 * mm)}, train) ==
        "bad_value: element 1: gap_after_mm: max is -1; a length is never below 0");
  CHECK(told({vary::back(1), vary::front(2)}, cemented_pair()) ==
        "bad_value: element 1: its cemented joint to the next is named twice; it moves as one, so "
        "vary one of its faces");
  CHECK(told({vary::gap_after(1)}, cemented_pair()) ==
        "bad_value: element 1: gap_after_mm cannot vary: it is cemented to the next, and their gap "
        "stays 0");
  CHECK(told({vary::shape(2)}, cemented_pair()) ==
        "bad_value: element 2: shape cannot vary: a cemented face ties it to its neighbour; vary "
        "curvature_front_per_mm or curvature_back_per_mm instead");
  Train apart = cemented_pair();
  std::get<Thick>(apart.elements[0]).cemented = false;
  CHECK(told({vary::shape(2), vary::back(2)}, apart) ==
        "bad_value: element 2: shape and curvature_back_per_mm cannot both vary: power and shape "
        "move both curvatures");
}

TEST_CASE("parameters: names there and back") {
  for (int i = 0; i <= static_cast<int>(Parameter::gap_after); ++i) {
    const auto each = static_cast<Parameter>(i);
    CHECK(parameter(to_string(each)) == each);
  }
  CHECK(message_of([] {
          (void)parameter("gap_mm");
        }).starts_with("not_found: no parameter \"gap_mm\"; nearest: gap_after_mm"));
  CHECK(to_string(SolveStatus::infeasible) == "infeasible");
}
