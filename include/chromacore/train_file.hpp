#pragma once
/// Trains as TOML files, and surface lists as CSV.
#include <chromacore/catalog.hpp>
#include <chromacore/color.hpp>
#include <chromacore/solve.hpp>
#include <chromacore/train.hpp>
#include <string>
#include <string_view>
#include <vector>

namespace chromacore {

/// What nobody gave and the library chose; `train_text` says so in a comment beside it.
struct Assumed {
  bool band = false;
  bool aperture = false;
  bool field = false;
};

/// What a train file holds: the train, what may vary and what is required of it.
struct TrainFile {
  Train train = {};
  std::vector<Vary> may_vary = {};
  std::vector<Requirement> required = {};
  Assumed assumed = {};
};

/// @throws Error  with file and line: file_access, too_large, bad_syntax, unknown_key, bad_value,
///                not_found, and whatever `check` finds
[[nodiscard]] TrainFile read_train(const std::string& path, const Catalog& catalog);
/// The same from text; `file` is for messages and for files named in it, which lie beside it.
[[nodiscard]] TrainFile parse_train(std::string_view text, const Catalog& catalog,
                                    const std::string& file = "train");

/// TOML that `parse_train` takes back to the same figures. Materials that `catalog` does not have
/// come along as `[[material]]`.
/// @throws Error  as `check(train)`; bad_value: two different materials of one name
[[nodiscard]] std::string train_text(const TrainFile& train, const Catalog& catalog);

/// A train from a surface list: CSV with the columns radius_mm, thickness_mm, material and,
/// optional, clear_diameter_mm and stop; with or without byte-order mark, LF or CRLF. Band F, d, C
/// about d, F/10 and half angle 1 degree.
/// @throws Error  as `read_train`, with line and column
[[nodiscard]] TrainFile read_surfaces(const std::string& path, const Catalog& catalog);
[[nodiscard]] TrainFile parse_surfaces(std::string_view text, const Catalog& catalog,
                                       const std::string& file = "surfaces");

/// Writes a new file and renames it, so that an old one is never half overwritten.
/// @throws Error  file_access
void write_file(const std::string& path, std::string_view text);

}  // namespace chromacore
