#pragma once
// What a Material holds inside: its checked data and the prepared formula.
#include <chromacore/material.hpp>

#include "dispersion.hpp"

struct chromacore::Material::Record {
  // @throws Error  as the constructor of Material does
  explicit Record(MaterialData from);

  // The wavelength as the source's formula takes it.
  [[nodiscard]] double formula_x(double standard_air_um) const {
    return data.wavelength_in == Medium::vacuum ? vacuum_x(standard_air_um) : standard_air_um;
  }
  // With a margin for rounding at the ends.
  [[nodiscard]] bool covers(double standard_air_um) const {
    return standard_air_um >= shortest_um_ && standard_air_um <= longest_um_;
  }

  MaterialData data;
  detail::Dispersion formula;

 private:
  static double vacuum_x(double standard_air_um);
  void settle_range();
  void take_range_of_points();
  void check_formula() const;
  void check_index(double at_um) const;

  double shortest_um_ = 0;
  double longest_um_ = 0;
};
