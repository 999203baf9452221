#pragma once
// TOML text in: a small tree with places, read by `TableView`. toml_input.cpp is the one
// source file that includes toml++ (1.5 s); everyone else sees this header only.
//
//   const TomlNode root = parse_toml(text, "train.toml");
//   const TableView file(root, "train.toml");
//   file.allow({"format", "name", "band", "element"});       // unknown_key, with the nearest
//   const TableView band = file.table("band");               // not_set where it is missing
//   const Line reference = band.line("reference_um");        // "d" or 0.58756
//   for (TableView t : file.tables("element")) t.set_element(++n);   // place of every later error
//
// Every error is a chromacore::Error with file, line, column and, once set, the element.
#include <string>
#include <string_view>

#include "table_view.hpp"

namespace chromacore::detail {

inline constexpr std::size_t largest_toml_text = 4u << 20;  // bytes
inline constexpr int deepest_toml_nesting = 16;  // of brackets, and of dots in one key or header

// Checks size and depth before parsing: toml++ 3.3 overflows the stack on 200,000 levels.
// @throws Error  too_large; bad_syntax with line and column
[[nodiscard]] TomlNode parse_toml(std::string_view text, const std::string& file);

}  // namespace chromacore::detail
