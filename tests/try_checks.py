"""Tries check_floors.py and check_functions.py on small sources whose answer is known."""

import sys
import tempfile
import unittest
from pathlib import Path

sys.dont_write_bytecode = True
from check_floors import faults_of_file  # noqa: E402
from check_functions import functions_in  # noqa: E402


class Functions(unittest.TestCase):
    def check(self, source, *want):
        self.assertEqual(functions_in(source), list(want))

    def test_plain_function_counts_from_its_declaration(self):
        self.check("int f(int a,\n      int b) {\n  return a;\n}\n", (1, 4))

    def test_declarations_and_values_are_no_functions(self):
        self.check("int f(int a = g({1}));\nint x{1};\nint y[] = {1, 2};\nconst T t = h(T{2});\n"
                   "struct S f2();\nvoid d() = delete;\nextern const int z;\nusing F = int (*)(int);")

    def test_scopes_are_entered(self):
        self.check("namespace a::b {\nclass X final : public Y<int> {\n public:\n  int f() { return 1; }\n"
                   "  X() = default;\n};\nenum class E : int { p, q };\nvoid g() {}\n}\n", (4, 4), (8, 8))
        self.check('extern "C" {\nint f(void) { return 1; }\n}\nextern "C" int g() { return 2; }\n',
                   (2, 2), (4, 4))

    def test_constructor_with_members(self):
        self.check("X::X(int a)\n    : a_(a), b_{a}, c_(f({a})) {\n  g();\n}\nint h() { return 0; }\n",
                   (1, 4), (5, 5))

    def test_templates(self):
        self.check("template <class T = int, int N = (1 > 0)>\nT f() { return {}; }\n"
                   "template <class T>\nstruct S {\n  T g() const noexcept { return {}; }\n};\n",
                   (1, 2), (5, 5))

    def test_concepts_and_requires(self):
        self.check("template <class T> concept C = requires(T a) { a + a; };\n"
                   "template <class T> requires requires(T a) { a + a; }\nT f(T a) { return a; }\n"
                   "template <class T>\nvoid g(T) requires(sizeof(T) > 1) {\n}\n", (2, 3), (4, 6))

    def test_operators(self):
        self.check("bool operator==(A a, A b) { return true; }\nA& A::operator=(const A&) {\n}\n"
                   "A::operator bool() const { return true; }\nint A::operator()(int) { return 1; }",
                   (1, 1), (2, 3), (4, 4), (5, 5))

    def test_lambda(self):
        self.check("const auto f = [](int a) {\n  return a;\n};\nint g() {\n  auto h = [] { return 1; };\n"
                   "  return h();\n}\n", (1, 3), (4, 7))

    def test_function_try_block(self):
        self.check("int f() try {\n  g();\n} catch (const E& e) {\n} catch (...) {\n}\nint h() {}\n",
                   (1, 5), (6, 6))

    def test_texts_comments_and_preprocessor_are_skipped(self):
        self.check("#define BAD void f() { \\\n  {\n// {\n/* void g() { */\nconst char* s = \"{\";\n"
                   "const char c = '{';\nconst int n = 1'000;\nconst auto r = R\"x({\" {)x\";\nvoid f() {}\n",
                   (9, 9))

    def test_trailing_return_and_structured_types(self):
        self.check("auto f() -> std::vector<int> {\n  return {1};\n}\nstd::array<int, 2> g() noexcept {\n"
                   "  return {1, 2};\n}\nstruct Node* h() { return nullptr; }\n", (1, 3), (4, 6), (7, 7))


class Floors(unittest.TestCase):
    def check(self, path, include, fault):
        with tempfile.TemporaryDirectory() as folder:
            root = Path(folder)
            for name in ("include/chromacore/train.hpp", "include/chromacore/units.hpp",
                         "include/chromacore/air.hpp", "include/chromacore/band.hpp", "src/text.hpp",
                         "src/toml_input.hpp", path):
                (root / name).parent.mkdir(parents=True, exist_ok=True)
                (root / name).touch()
            (root / path).write_text(f"#include {include}\n", encoding="utf-8")
            found = list(faults_of_file(root, root / path))
        self.assertEqual(bool(found), bool(fault), found)
        if fault:
            self.assertIn(fault, found[0])

    def test_downwards_and_to_the_left(self):
        self.check("include/chromacore/train.hpp", "<chromacore/band.hpp>", None)
        self.check("include/chromacore/band.hpp", "<chromacore/air.hpp>", None)
        self.check("src/train.cpp", '"chromacore/train.hpp"', None)

    def test_upwards_and_to_the_right(self):
        self.check("include/chromacore/band.hpp", "<chromacore/train.hpp>", "not below band")
        self.check("src/air.cpp", "<chromacore/band.hpp>", "not below air")
        self.check("src/train.cpp", '"toml_input.hpp"', "not below train")

    def test_public_headers_show_std_and_units_only(self):
        self.check("include/chromacore/band.hpp", "<vector>", None)
        self.check("include/chromacore/units.hpp", "<boost/units/quantity.hpp>", None)
        self.check("include/chromacore/band.hpp", "<Eigen/Dense>", "no place here")
        self.check("include/chromacore/band.hpp", '"text.hpp"', "internal")

    def test_libraries_stay_in_their_places(self):
        self.check("src/toml_input.cpp", "<toml++/toml.h>", None)
        self.check("src/train.cpp", "<toml++/toml.h>", "no place here")
        self.check("src/train.cpp", "<nlohmann/json.hpp>", "no place here")
        self.check("src/result_json.cpp", "<nlohmann/json.hpp>", None)
        self.check("src/solve.cpp", "<ceres/ceres.h>", "neither")

    def test_bindings_see_public_headers_only(self):
        self.check("bindings/cli/main.cpp", "<chromacore/train.hpp>", None)
        self.check("bindings/cli/main.cpp", '"text.hpp"', "not a public header")

    def test_unknown_file_is_a_fault(self):
        self.check("src/new_thing.cpp", "<vector>", "on no floor")


if __name__ == "__main__":
    unittest.main()
