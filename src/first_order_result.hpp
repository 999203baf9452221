#pragma once
// First-order quantities with their units, from a traced reference wavelength.
#include <chromacore/paraxial.hpp>

#include "first_order.hpp"

namespace chromacore::detail {

[[nodiscard]] FirstOrder first_order_result(const Model& model, const Layout<double>& layout,
                                            const Reference<double>& reference);

}  // namespace chromacore::detail
