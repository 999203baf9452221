#pragma once
// The tables that trains and queries share, each as one call. All throw chromacore::Error with file
// and line.
#include <chromacore/catalog.hpp>
#include <chromacore/error.hpp>
#include <chromacore/solve.hpp>
#include <chromacore/train.hpp>

#include "table_view.hpp"

namespace chromacore::detail {

// What `action` gives; an error of it is said to be at `place`, as far as it does not know itself.
template <class Action>
auto placed(const ErrorPlace& place, Action action) {
  try {
    return action();
  } catch (const Error& error) {
    throw error.within(place);
  }
}

// [band]. A weight file lies beside the file of the table.
[[nodiscard]] Band read_band(const TableView& table);
// Place of a band's wavelength (from 0) in its table.
[[nodiscard]] ErrorPlace wavelength_place(const TableView& band, std::size_t index);

// [aperture] and [field]: the one key that is there.
[[nodiscard]] Aperture read_aperture(const TableView& table);
[[nodiscard]] Field read_field(const TableView& table);

[[nodiscard]] Surroundings read_surroundings(const TableView& table);

// [[element]], its own figures checked; not yet against its neighbours.
[[nodiscard]] Element read_element(const TableView& table, const Catalog& catalog);

// One [[require]] table, checked against the train but for the sources' ranges.
[[nodiscard]] Requirement read_requirement(const TableView& table, const Train& train);

// All [[vary]] tables of `file`, checked against the train.
[[nodiscard]] std::vector<Vary> read_may_vary(const TableView& file, const Train& train);

}  // namespace chromacore::detail
