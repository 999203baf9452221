#include <chromacore/paraxial.hpp>
#include <cmath>

#include "first_order.hpp"
#include "first_order_result.hpp"

namespace chromacore {
namespace detail {
namespace {

void fill_pupils(FirstOrder& result, const Reference<double>& r) {
  using units::mm;
  if (!pupil_at_infinity(r.traced.to_stop)) {
    const double diameter = entrance_pupil_diameter(r);
    result.entrance_pupil_position = entrance_pupil_position(r.traced.to_stop) * mm;
    result.entrance_pupil_diameter = diameter * mm;
    result.f_number = std::abs(r.focal_length) / diameter;
  }
  if (!exit_pupil_at_infinity(r.traced)) {
    result.exit_pupil_position = exit_pupil_position(r.traced) * mm;
  }
}

}  // namespace

FirstOrder first_order_result(const Model& model, const Layout<double>& layout,
                              const Reference<double>& r) {
  using namespace units;
  const double v = model.vergence();
  const System<double>& whole = r.traced.whole;
  FirstOrder result;
  result.focal_length = r.focal_length * mm;
  result.back_focal_distance = has_power(r) ? image_distance(whole, 0.0) * mm : infinity;
  result.image_distance = r.image_distance * mm;
  result.working_f_number = 0.5 / std::abs(r.marginal_behind.w);
  result.magnification = magnification(whole, v);
  result.lagrange_invariant = (r.marginal.w * r.chief.y - r.chief.w * r.marginal.y) * mm;
  result.petzval = petzval_sum(model, layout) * per_mm;
  result.track_length = (vertex_length(layout) + r.image_distance) * mm;
  fill_pupils(result, r);
  return result;
}

}  // namespace detail

FirstOrder first_order(const Train& train) {
  check(train);
  const detail::Model model(train, {});
  const detail::Layout<double> layout = detail::layout_of(train);
  return first_order_result(model, layout, detail::reference_of(model, layout));
}

std::vector<TracePoint> trace(const Train& train, const Line& wavelength) {
  using namespace detail;
  using units::mm;
  check(train);
  const Model model(train, std::span(&wavelength, 1));
  const Layout<double> layout = layout_of(train);
  const Reference<double> reference = reference_of(model, layout);
  const std::size_t w = model.place(wavelength);
  const Traced<double> traced = trace_train(model, layout, w);
  Ray<double> marginal = reference.marginal;
  Ray<double> chief = chief_ray(traced.to_stop, model.vergence(), reference.object_point);
  std::vector<TracePoint> points;
  for_each_vertex(
      model, layout, w, [&](std::size_t e, Side side, const double& power, const double& reduced) {
        TracePoint point{static_cast<int>(e) + 1, side, marginal.y * mm, 0.0, chief.y * mm, 0.0};
        refract(marginal, power);
        refract(chief, power);
        const bool inside = side == Side::front && model.kind(e) == Kind::thick;
        const double n = inside ? model.index(w, e) : 1.0;
        point.marginal_slope = marginal.w / n;
        point.chief_slope = chief.w / n;
        points.push_back(point);
        transfer(marginal, reduced);
        transfer(chief, reduced);
      });
  return points;
}

}  // namespace chromacore
