#include "text_file.hpp"

#include <chromacore/error.hpp>
#include <filesystem>
#include <fstream>
#include <system_error>
#include <vector>

namespace chromacore::detail {
namespace {

[[noreturn]] void cannot_read(const std::string& path, const std::string& why) {
  throw Error(ErrorCode::file_access, "cannot read the file: " + why, {.file = path});
}

[[noreturn]] void too_large(const std::string& path, const std::string& bytes, std::size_t most) {
  throw Error(ErrorCode::too_large,
              "the file has " + bytes + " bytes; at most " + std::to_string(most) + " are read",
              {.file = path});
}

void check_size(const std::string& path, std::size_t most) {
  std::error_code error;
  const std::filesystem::file_status status = std::filesystem::status(path, error);
  if (!std::filesystem::exists(status)) cannot_read(path, "no such file");
  if (std::filesystem::is_directory(status)) cannot_read(path, "it is a folder");
  if (!std::filesystem::is_regular_file(status)) return;  // a pipe: its size shows on reading
  const std::uintmax_t size = std::filesystem::file_size(path, error);
  if (error) cannot_read(path, error.message());
  if (size > most) too_large(path, std::to_string(size), most);
}

}  // namespace

std::string_view without_byte_order_mark(std::string_view text) {
  constexpr std::string_view mark = "\xEF\xBB\xBF";
  if (text.substr(0, mark.size()) == mark) text.remove_prefix(mark.size());
  return text;
}

std::string read_text_file(const std::string& path, std::size_t most) {
  check_size(path, most);
  std::ifstream file(path, std::ios::binary);
  if (!file) cannot_read(path, "no permission");
  std::string text;
  std::vector<char> block(1u << 16);
  while (file && text.size() <= most) {  // past it: a pipe that is too long
    file.read(block.data(), static_cast<std::streamsize>(block.size()));
    text.append(block.data(), static_cast<std::size_t>(file.gcount()));
  }
  if (file.bad()) cannot_read(path, "reading failed");
  if (text.size() > most) too_large(path, "more than " + std::to_string(most), most);
  return std::string(without_byte_order_mark(text));
}

}  // namespace chromacore::detail
