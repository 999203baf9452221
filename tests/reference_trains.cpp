// Analyses against reference/trains.json, which is computed at 60 digits from the definitions
// alone.
#include <doctest/doctest.h>

#include <algorithm>
#include <chromacore/catalog.hpp>
#include <chromacore/color.hpp>
#include <chromacore/result_json.hpp>
#include <chromacore/train_file.hpp>
#include <cmath>
#include <fstream>
#include <nlohmann/json.hpp>
#include <string>
#include <vector>

#include "close.hpp"

using namespace chromacore;
using namespace chromacore::test;

namespace {

using Json = nlohmann::json;

Json reference() {
  std::ifstream file(CHROMACORE_FOLDER "/tests/reference/trains.json");
  REQUIRE(file);
  return Json::parse(file);
}

// Compares an answer with what is expected, key by key; says where they differ.
class Comparison {
 public:
  explicit Comparison(double longest_mm) : floor_(1e-15 * longest_mm) {}

  void compare(const Json& got, const Json& want, const std::string& path) {
    if (want.is_object()) {
      for (const auto& [key, value] : want.items()) {
        compare(got.contains(key) ? got[key] : Json("absent"), value, path + "." + key);
      }
    } else if (want.is_array()) {
      if (!got.is_array() || got.size() != want.size()) return differ(path, got, want);
      for (std::size_t i = 0; i < want.size(); ++i) {
        compare(got[i], want[i], path + "[" + std::to_string(i) + "]");
      }
    } else if (want.is_number() && got.is_number()) {
      ++numbers_;
      if (!close(got.get<double>(), want.get<double>(), tolerance(path))) differ(path, got, want);
    } else if (got != want) {
      differ(path, got, want);
    }
  }

  [[nodiscard]] const std::vector<std::string>& differences() const { return differences_; }
  [[nodiscard]] int numbers() const { return numbers_; }

 private:
  // 1e-9 of the figure. Lengths that are 0 by symmetry come out as the rounding of those that
  // cancel in them: 1e-15 of the longest.
  [[nodiscard]] Tol tolerance(const std::string& path) const {
    return {.rel = 1e-9, .abs = path.find("_mm") == std::string::npos ? 0.0 : floor_};
  }

  void differ(const std::string& path, const Json& got, const Json& want) {
    differences_.push_back(path + ": got " + got.dump() + ", want " + want.dump());
  }

  double floor_;
  std::vector<std::string> differences_;
  int numbers_ = 0;
};

double longest_mm(const Json& first_order) {
  double longest = 0;
  for (const auto& [key, value] : first_order.items()) {
    if (key.ends_with("_mm") && value.is_number()) {
      longest = std::max(longest, std::abs(value.get<double>()));
    }
  }
  return longest;
}

}  // namespace

TEST_CASE("analyze: as computed independently at 60 digits, to 1e-9") {
  const Catalog catalog = Catalog::built_in();
  const Json trains = reference()["trains"];
  CHECK(trains.size() >= 50);
  int numbers = 0;
  for (const Json& entry : trains) {
    Json want = entry["expect"];
    const std::vector<std::string> absent = want["why"];
    want.erase("why");
    CAPTURE(want["name"].get<std::string>());
    const TrainFile file = parse_train(entry["toml"].get<std::string>(), catalog);
    const Json got = Json::parse(to_json(file.train, analyze(file.train, file.required)));
    Comparison comparison(longest_mm(want["first_order"]));
    comparison.compare(got, want, "");
    for (const std::string& difference : comparison.differences()) FAIL_CHECK(difference);
    for (const std::string& key : absent) CHECK_FALSE(got["why"][key].get<std::string>().empty());
    numbers += comparison.numbers();
  }
  CHECK(numbers > 3000);
}
