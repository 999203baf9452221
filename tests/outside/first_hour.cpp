#include <chromacore/chromacore.hpp>
#include <iostream>

int main() try {
  using namespace chromacore;
  using namespace chromacore::units;                // mm, um, per_mm, deg, celsius, Pa
  const Catalog catalog = Catalog::built_in();

  Train train;                                      // a cemented pair, as in-house code would fill it
  train.band = Band::of_lines({"F", "d", "C"}, "d");
  train.aperture = EntrancePupilDiameter{50.0 * mm};
  train.field = HalfAngle{1.0 * deg};
  train.elements = {
      Thick{.material = catalog.at("N-BK7"), .front = radius(310.0 * mm), .back = radius(-230.0 * mm),
            .thickness = 8.0 * mm, .cemented = true},
      Thick{.material = catalog.at("SCHOTT/F2"), .front = radius(-230.0 * mm), .back = radius(-900.0 * mm),
            .thickness = 5.0 * mm},
  };

  const Analysis before = analyze(train);           // 525.64 mm, -1.629 mm (checked independently)
  std::cout << in_mm(before.focal_length) << " mm, axial colour " << in_mm(before.axial_color) << " mm\n";

  const Solution s = solve(train, {vary::back(1), vary::back(2)},      // elements count from 1; the joint moves as one
                           {require::focal_length(500.0 * mm, 0.5 * mm),
                            require::axial_color("F", "C", 0.0 * mm, 0.05 * mm)});
  std::cout << to_string(s.status) << ": " << s.why << '\n';   // met; radii -173.54 and -663.94 mm in s.train
} catch (const chromacore::Error& e) {
  std::cerr << e.what() << '\n';                    // one line: what, where, what was expected
  return 2;
}
