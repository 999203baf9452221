#pragma once
// A whole text file in.
#include <cstddef>
#include <string>
#include <string_view>

namespace chromacore::detail {

// The file's bytes, without a UTF-8 byte-order mark.
// @throws Error  file_access: it is not there, is a folder, or cannot be read; too_large: more than
//                `most` bytes (looked up before anything is read)
[[nodiscard]] std::string read_text_file(const std::string& path, std::size_t most = 4u << 20);

[[nodiscard]] std::string_view without_byte_order_mark(std::string_view text);

}  // namespace chromacore::detail
