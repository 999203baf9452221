#pragma once
// What a call has to say when it fails, whole: "not_found: train.toml:14: no material ...".
#include <chromacore/error.hpp>
#include <string>

namespace chromacore::test {

template <class Call>
std::string message_of(Call call) {
  try {
    call();
  } catch (const Error& error) {
    return std::string(to_string(error.code())) + ": " + error.what();
  }
  return "no error";
}

}  // namespace chromacore::test
