#pragma once
// Powers to start from, in closed form.
#include <chromacore/chromacore.hpp>
#include <string>

namespace chromacore::cli {

// @throws Error  bad_value: no form of that name
void check_form(const std::string& form);

// Sets the powers of the train's thin elements from a closed form: "achromat" (two in contact),
// "apochromat" (three in contact) or "dialyte" (two with the gap between them). The focal length is
// the one that the file requires.
// @throws Error  bad_value: other elements; not_set: no focal length; degenerate: as the form
void start_from(const std::string& form, TrainFile& file);

}  // namespace chromacore::cli
