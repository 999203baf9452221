#pragma once
// What the verbs share: options, the answer that each makes, and text as numbers.
#include <CLI/CLI.hpp>
#include <chromacore/chromacore.hpp>
#include <functional>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "table.hpp"

namespace chromacore::cli {

// Options that every verb has.
struct Common {
  bool json = false;
  std::optional<std::string> out = {};
  std::vector<std::string> catalogs = {};
};

// What a verb has made. Nothing is printed or written before all of it is there.
struct Answer {
  std::string text = {};                    // for standard output, or else for --out
  std::optional<std::string> product = {};  // for --out, where that is something else (a train)
  int exit_code = 0;                        // 0, or 1: a requirement is not met
};

// A verb: its part of the command line, and what it does.
struct Verb {
  CLI::App* app = nullptr;
  std::function<Answer(const Common&, const Paint&)> run = {};
};

[[nodiscard]] Verb materials_verb(CLI::App& parent);
[[nodiscard]] Verb import_verb(CLI::App& parent);
[[nodiscard]] Verb analyze_verb(CLI::App& parent);
[[nodiscard]] Verb solve_verb(CLI::App& parent);

// The built-in catalogue and the user's files.
[[nodiscard]] Catalog catalog_of(const Common& common);

// Runs `body`; its errors are about this file.
template <class Body>
auto about_file(const std::string& path, Body body) {
  try {
    return body();
  } catch (const Error& error) {
    throw error.within({.file = path});
  }
}

// A mistake in the command line: `chromacore VERB: MESSAGE`.
[[nodiscard]] Error usage_error(const std::string& verb, const std::string& message);

// Those of `choices` that look like `word`, best first, as "; nearest: a, b", or else all of them
// as
// "; one of: a, b".
[[nodiscard]] std::string suggestion(const std::string& word, std::span<const std::string> choices);

[[nodiscard]] std::vector<std::string> split(std::string_view text, char at);
// A spectral line as the command line has it: a letter, or a number in um.
// @throws Error  not_found or bad_value, as `Line` does
[[nodiscard]] Line line_of(const std::string& text);
// A whole number above 0. @throws Error  bad_value
[[nodiscard]] int count_of(const std::string& text, const std::string& verb,
                           const std::string& option);

}  // namespace chromacore::cli
