# cmake -D NAME=glass -D FILE=glass.csv -D OUT=glass.cpp -P embed.cmake
# Writes OUT, which defines chromacore::detail::data_NAME with the text of FILE.
file(READ ${FILE} text)
set(mark data)  # the raw literal's delimiter, which the text must not hold
string(FIND "${text}" ")${mark}\"" found)
if(NOT found EQUAL -1)
  message(FATAL_ERROR "${FILE}: holds the characters )${mark}\", which end the literal")
endif()
get_filename_component(folder ${OUT} DIRECTORY)
file(MAKE_DIRECTORY ${folder})
get_filename_component(file_name ${FILE} NAME)
file(WRITE ${OUT} "// Made from ${file_name} by embed.cmake.
#include <string_view>

namespace chromacore::detail {
extern const std::string_view data_${NAME};
namespace {
constexpr char text[] = R\"${mark}(${text})${mark}\";
}
// There before anything runs: its length is known, and not counted at the start.
constinit const std::string_view data_${NAME}(text, sizeof text - 1);
}  // namespace chromacore::detail
")
