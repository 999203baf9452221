// The trace over many wavelengths at once: trace.inl with vectors for numbers, compiled for each
// instruction set and chosen when the program runs.
#include <chromacore/error.hpp>
#include <chromacore/paraxial.hpp>
#include <cstddef>
#include <type_traits>

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "trace_batch.cpp"
#include <hwy/foreach_target.h>  // before highway.h, which depends on it
//
#include <hwy/highway.h>

HWY_BEFORE_NAMESPACE();
namespace chromacore::detail::HWY_NAMESPACE {

namespace hn = hwy::HWY_NAMESPACE;

// As many wavelengths as tag D has lanes.
template <class D>
struct Pack {
  hn::Vec<D> v;
  HWY_INLINE Pack operator-() const { return {hn::Neg(v)}; }
  HWY_INLINE Pack operator-(const Pack& o) const { return {hn::Sub(v, o.v)}; }
  HWY_INLINE Pack operator+(const Pack& o) const { return {hn::Add(v, o.v)}; }
  HWY_INLINE Pack operator*(const Pack& o) const { return {hn::Mul(v, o.v)}; }
  HWY_INLINE Pack operator/(const Pack& o) const { return {hn::Div(v, o.v)}; }
  static HWY_INLINE Pack load(const double* from) { return {hn::LoadU(D(), from)}; }
  static HWY_INLINE Pack all(double value) { return {hn::Set(D(), value)}; }
  HWY_INLINE void store(double* to) const { hn::StoreU(v, D(), to); }
};

template <class D>
HWY_INLINE Pack<D> multiply_add(const Pack<D>& a, const Pack<D>& b, const Pack<D>& c) {
  return {hn::MulAdd(a.v, b.v, c.v)};
}

#define CHROMACORE_TRACE_INLINE HWY_INLINE
#include "trace.inl"
#undef CHROMACORE_TRACE_INLINE

// Reduced thicknesses t/n of two gaps one behind the other, with one division for both: dividing is
// what the trace would wait for.
template <class P>
struct GapPair {
  P first;
  P second;
};
template <class P>
HWY_INLINE GapPair<P> reduced_pair(double t, const P& n, double t_next, const P& n_next) {
  const P inverse = P::all(1.0) / (n * n_next);
  return {P::all(t) * n_next * inverse, P::all(t_next) * n * inverse};
}

// Both rays at the wavelengths from `w` on, one for each lane.
template <class D>
class LaneTrace {
 public:
  using P = Pack<D>;

  HWY_INLINE LaneTrace(const BatchSurfaces& s, const BatchRays& rays, std::size_t w)
      : s_(s),
        row_(s.indices.data() + w),
        y_(reinterpret_cast<double*>(rays.marginal_height.data()) + w),
        u_(rays.marginal_slope.data() + w),
        y_chief_(reinterpret_cast<double*>(rays.chief_height.data()) + w),
        u_chief_(rays.chief_slope.data() + w),
        n_(P::load(row_)),
        marginal_{P::load(y_), P::load(u_) * n_},
        chief_{P::load(y_chief_), P::load(u_chief_) * n_} {}

  HWY_INLINE void run() {
    const std::size_t gaps = s_.thicknesses.size();
    std::size_t k = 0;
    for (; k + 2 <= gaps; k += 2) {
      refract_at(k);
      const P n_next = P::load(row_ + s_.wavelengths);
      const GapPair<P> reduced = reduced_pair(thickness(k), n_, thickness(k + 1), n_next);
      transfer_both(reduced.first);
      refract_at(k + 1);
      transfer_both(reduced.second);
    }
    if (k < gaps) {
      refract_at(k);
      transfer_both(P::all(thickness(k)) / n_);
    }
    refract_at(gaps);
    store();
  }

 private:
  HWY_INLINE double thickness(std::size_t k) const { return s_.thicknesses[k].value(); }

  HWY_INLINE void refract_at(std::size_t k) {
    row_ += s_.wavelengths;
    const P n_after = P::load(row_);
    const P power = surface_power(P::all(s_.curvatures[k].value()), n_, n_after);
    refract(marginal_, power);
    refract(chief_, power);
    n_ = n_after;
  }

  HWY_INLINE void transfer_both(const P& reduced) {
    transfer(marginal_, reduced);
    transfer(chief_, reduced);
  }

  HWY_INLINE void store() const {
    marginal_.y.store(y_);
    chief_.y.store(y_chief_);
    const P inverse = P::all(1.0) / n_;
    (marginal_.w * inverse).store(u_);
    (chief_.w * inverse).store(u_chief_);
  }

  const BatchSurfaces& s_;
  const double* row_;  // indices of the medium behind the last surface passed
  double* y_;
  double* u_;
  double* y_chief_;
  double* u_chief_;
  P n_;
  Ray<P> marginal_;
  Ray<P> chief_;
};

void trace_all(const BatchSurfaces& surfaces, const BatchRays& rays) {
  using Wide = hn::ScalableTag<double>;
  using One = hn::CappedTag<double, 1>;
  const std::size_t lanes = hn::Lanes(Wide());
  std::size_t w = 0;
  for (; w + lanes <= surfaces.wavelengths; w += lanes) LaneTrace<Wide>(surfaces, rays, w).run();
  for (; w < surfaces.wavelengths; ++w) LaneTrace<One>(surfaces, rays, w).run();
}

}  // namespace chromacore::detail::HWY_NAMESPACE
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace chromacore {
namespace detail {
namespace {

HWY_EXPORT(trace_all);

// Heights are loaded as the doubles that they hold.
static_assert(sizeof(Length) == sizeof(double) && std::is_standard_layout_v<Length>);

void check_sizes(const BatchSurfaces& s, const BatchRays& rays) {
  const std::size_t surfaces = s.curvatures.size();
  const bool fits =
      surfaces > 0 && s.thicknesses.size() + 1 == surfaces &&
      s.indices.size() == (surfaces + 1) * s.wavelengths &&
      rays.marginal_height.size() == s.wavelengths && rays.marginal_slope.size() == s.wavelengths &&
      rays.chief_height.size() == s.wavelengths && rays.chief_slope.size() == s.wavelengths;
  if (fits) return;
  throw Error(ErrorCode::bad_value,
              "batch trace: K curvatures need K - 1 thicknesses, (K + 1) W indices and W of each "
              "ray's heights and slopes, K at least 1");
}

}  // namespace
}  // namespace detail

void trace_batch(const BatchSurfaces& surfaces, const BatchRays& rays) {
  detail::check_sizes(surfaces, rays);
  using namespace detail;
  HWY_DYNAMIC_DISPATCH(trace_all)(surfaces, rays);
}

}  // namespace chromacore
#endif
