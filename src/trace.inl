// The paraxial trace, once, for every kind of number: included by trace.hpp for scalars, Jets and
// wider types, and by trace_batch.cpp once per instruction set for vectors. No include guard, no
// includes, no namespace of its own for that reason.

// A paraxial ray in its optical form: height y, and w = n u, which refraction at a plane and a gap
// leave alone. In this form neither step divides.
template <class T>
struct Ray {
  T y;
  T w;
};

// a b + c; types with a fused operation of their own overload it.
template <class T>
CHROMACORE_TRACE_INLINE T multiply_add(const T& a, const T& b, const T& c) {
  return a * b + c;
}

// Power of a surface, c (n' - n).
template <class T, class N>
CHROMACORE_TRACE_INLINE T surface_power(const T& curvature, const N& n, const N& n_after) {
  return curvature * (n_after - n);
}

// n'u' = n u - y phi.
template <class T>
CHROMACORE_TRACE_INLINE void refract(Ray<T>& ray, const T& power) {
  ray.w = multiply_add(T(-ray.y), power, ray.w);
}

// y' = y + t u, with the reduced thickness t/n.
template <class T>
CHROMACORE_TRACE_INLINE void transfer(Ray<T>& ray, const T& reduced) {
  ray.y = multiply_add(ray.w, reduced, ray.y);
}
