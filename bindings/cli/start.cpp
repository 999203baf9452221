#include "start.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>

#include "command.hpp"

namespace chromacore::cli {
namespace {

const std::vector<std::string> forms = {"achromat", "apochromat", "dialyte"};

Power total_power(const TrainFile& file) {
  for (const Requirement& requirement : file.required) {
    if (requirement.quantity == Quantity::focal_length && requirement.target) {
      return 1.0 / (*requirement.target * units::mm);
    }
  }
  throw Error(ErrorCode::not_set, "--start needs a [[require]] of focal_length_mm with a target");
}

template <std::size_t Count>
std::array<Thin*, Count> thin_elements(const std::string& form, Train& train) {
  std::array<Thin*, Count> thin{};
  bool fits = train.elements.size() == Count;
  for (std::size_t i = 0; fits && i < Count; ++i) {
    thin[i] = std::get_if<Thin>(&train.elements[i]);
    fits = thin[i] != nullptr;
  }
  if (fits) return thin;
  throw Error(ErrorCode::bad_value,
              fmt::format("--start {} needs exactly {} thin elements (material and power_per_mm); "
                          "the train has {} elements",
                          form, Count, train.elements.size()));
}

void start_achromat(TrainFile& file) {
  const auto thin = thin_elements<2>("achromat", file.train);
  const auto powers =
      contact_achromat(total_power(file), thin[0]->material, thin[1]->material, file.train.band);
  for (std::size_t i = 0; i < 2; ++i) thin[i]->power = powers[i];
}

void start_apochromat(TrainFile& file) {
  const auto thin = thin_elements<3>("apochromat", file.train);
  const auto powers = contact_apochromat(total_power(file), thin[0]->material, thin[1]->material,
                                         thin[2]->material, file.train.band);
  for (std::size_t i = 0; i < 3; ++i) thin[i]->power = powers[i];
}

void start_dialyte(TrainFile& file) {
  const auto thin = thin_elements<2>("dialyte", file.train);
  const Dialyte powers = dialyte(total_power(file), v_number(thin[0]->material, file.train.band),
                                 v_number(thin[1]->material, file.train.band), thin[0]->gap_after);
  thin[0]->power = powers.front;
  thin[1]->power = powers.back;
}

}  // namespace

void check_form(const std::string& form) {
  if (std::find(forms.begin(), forms.end(), form) != forms.end()) return;
  throw usage_error("solve", "--start " + form + " is not known" + suggestion(form, forms));
}

void start_from(const std::string& form, TrainFile& file) {
  if (form == "achromat") return start_achromat(file);
  if (form == "apochromat") return start_apochromat(file);
  start_dialyte(file);
}

}  // namespace chromacore::cli
