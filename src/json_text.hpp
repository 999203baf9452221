#pragma once
// What the writers of JSON share.
#include <chromacore/band.hpp>
#include <cmath>
#include <nlohmann/json.hpp>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore::detail {

using Json = nlohmann::ordered_json;

inline constexpr int json_format = 1;

// null where it is not finite or absent; 0 has no sign.
inline Json json_number(double value) {
  return std::isfinite(value) ? Json(value + 0.0) : Json(nullptr);
}
inline Json json_number(Length value) { return json_number(in_mm(value)); }
template <class Value>
Json json_number(const std::optional<Value>& value) {
  return value ? json_number(*value) : Json(nullptr);
}

// null where it is empty.
inline Json json_text(std::string_view text) { return text.empty() ? Json(nullptr) : Json(text); }

template <class Items, class AsJson>
Json json_list(const Items& items, AsJson as_json) {
  Json list = Json::array();
  for (const auto& item : items) list.push_back(as_json(item));
  return list;
}

// A name from a program may hold bytes that are no UTF-8: they become U+FFFD.
inline std::string written(const Json& json) {
  return json.dump(2, ' ', false, Json::error_handler_t::replace);
}

}  // namespace chromacore::detail
