// The program `chromacore`: reads the command line, runs one verb, prints what it made.
#include <fmt/format.h>

#include <algorithm>
#include <cerrno>
#include <csignal>
#include <cstdio>
#include <cstring>
#include <memory>

#include "command.hpp"

namespace chromacore::cli {
namespace {

constexpr int bad_input = 2;
constexpr int our_fault = 3;

void complain(std::string text) {
  std::replace(text.begin(), text.end(), '\n', ' ');
  std::fprintf(stderr, "%s\n", text.c_str());
}

// All of it, or an error.
void print(const std::string& text) {
  if (std::fwrite(text.data(), 1, text.size(), stdout) == text.size() && std::fflush(stdout) == 0) {
    return;
  }
  throw Error(ErrorCode::file_access,
              fmt::format("standard output: cannot be written: {}", std::strerror(errno)));
}

void add_common_options(CLI::App& app, Common& common) {
  app.add_flag("--json", common.json, "print JSON");
  app.add_option("--out", common.out, "write to this file: the train, or else what is printed")
      ->type_name("FILE");
  app.add_option("--catalog", common.catalogs,
                 "a catalogue file of your own (CSV or TOML); may be repeated")
      ->type_name("FILE")
      ->allow_extra_args(false);
}

std::string version_text() {
  return fmt::format("chromacore {}\nmaterials: {}\n", chromacore::version,
                     Catalog::data_version());
}

// The library's own page layout, without its remarks on what excludes what.
class Help : public CLI::Formatter {
 public:
  Help() {
    column_width(24);
    label("OPTIONS", "options");
    label("SUBCOMMAND", "VERB ARGUMENT...");
    label("Positionals", "Arguments");
  }
  std::string make_option_opts(const CLI::Option* option) const override {
    const std::string type = option->get_type_name();
    return type.empty() ? "" : " " + type;
  }
};

class Program {
 public:
  Program() {
    app_.name("chromacore");
    app_.set_help_flag("-h,--help", "print this help");
    app_.set_version_flag("--version", version_text(), "print the version");
    app_.footer("chromacore VERB --help says more, with an example of each.");
    app_.require_subcommand(0, 1);
    app_.allow_extras();
    app_.formatter(std::make_shared<Help>());
    verbs_ = {materials_verb(app_), import_verb(app_), analyze_verb(app_), solve_verb(app_)};
    for (Verb& verb : verbs_) {
      add_common_options(*verb.app, common_);
      verb.app->allow_extras();
      verb.app->group("Verbs");
    }
  }

  int run(int count, char** arguments) {
    const Verb* verb = nullptr;
    try {
      app_.parse(count, arguments);
      verb = chosen();
    } catch (const CLI::CallForHelp&) {
      return print(app_.help()), 0;
    } catch (const CLI::CallForVersion&) {
      return print(version_text()), 0;
    } catch (const CLI::ParseError& error) {
      const CLI::App& at = chosen_or_whole();
      throw usage_error(&at == &app_ ? "" : at.get_name(),
                        fmt::format("{}; see chromacore {}--help", error.what(),
                                    &at == &app_ ? "" : at.get_name() + " "));
    }
    return finish(verb->run(common_, paint()));
  }

 private:
  [[nodiscard]] const CLI::App& chosen_or_whole() const {
    for (const Verb& verb : verbs_) {
      if (verb.app->parsed()) return *verb.app;
    }
    return app_;
  }

  // The verb that was asked for. @throws Error  bad_value: none, an unknown one, an unknown option
  [[nodiscard]] const Verb* chosen() const {
    for (const Verb& verb : verbs_) {
      if (!verb.app->parsed()) continue;
      refuse_extras(*verb.app);
      return &verb;
    }
    std::vector<std::string> names;
    for (const Verb& verb : verbs_) names.push_back(verb.app->get_name());
    const std::vector<std::string> rest = app_.remaining();
    if (rest.empty()) throw usage_error("", "a verb was expected" + suggestion("", names));
    throw usage_error("", fmt::format("no verb {}{}", rest[0], suggestion(rest[0], names)));
  }

  static void refuse_extras(const CLI::App& app) {
    const std::vector<std::string> rest = app.remaining();
    if (rest.empty()) return;
    if (rest[0].front() != '-') {
      throw usage_error(app.get_name(), fmt::format("{} is one argument too many", rest[0]));
    }
    std::vector<std::string> options;
    for (const CLI::Option* option : app.get_options()) {
      if (!option->get_lnames().empty()) options.push_back("--" + option->get_lnames()[0]);
    }
    throw usage_error(app.get_name(),
                      fmt::format("no option {}{}", rest[0], suggestion(rest[0], options)));
  }

  [[nodiscard]] Paint paint() const { return common_.out ? Paint{} : Paint::for_standard_output(); }

  [[nodiscard]] int finish(const Answer& answer) const {
    if (common_.out) write_file(*common_.out, answer.product.value_or(answer.text));
    if (!common_.out || answer.product) print(answer.text);
    return answer.exit_code;
  }

  CLI::App app_{"Colour correction of refractive trains, before any real ray is traced."};
  Common common_ = {};
  std::vector<Verb> verbs_ = {};
};

int run(int count, char** arguments) try {
  std::signal(SIGPIPE, SIG_IGN);  // a closed pipe is an error like any other
  return Program().run(count, arguments);
} catch (const Error& error) {
  complain(error.what());
  return error.code() == ErrorCode::internal ? our_fault : bad_input;
} catch (const std::exception& error) {
  complain(fmt::format("chromacore: internal error: {}", error.what()));
  return our_fault;
}

}  // namespace
}  // namespace chromacore::cli

int main(int count, char** arguments) { return chromacore::cli::run(count, arguments); }
