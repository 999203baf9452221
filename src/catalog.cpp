#include <algorithm>
#include <chromacore/catalog.hpp>
#include <chromacore/error.hpp>
#include <optional>

#include "catalog_contents.hpp"
#include "catalog_data.hpp"
#include "text.hpp"

namespace chromacore {
namespace {

using Places = std::vector<std::size_t>;

constexpr std::size_t most_listed = 8;

char lower(char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; }

bool same_in_any_case(std::string_view a, std::string_view b) {
  return a.size() == b.size() && std::equal(a.begin(), a.end(), b.begin(),
                                            [](char x, char y) { return lower(x) == lower(y); });
}

std::uint64_t hash_of(std::string_view name) {  // FNV-1a, 64 bits, of the lower-case name
  std::uint64_t hash = 14695981039346656037u;
  for (const char c : name) {
    hash = (hash ^ static_cast<unsigned char>(lower(c))) * 1099511628211u;
  }
  return hash;
}

bool is_code(std::string_view text) {
  return text.size() == 6 && text.find_first_not_of("0123456789") == text.npos;
}

std::string quoted(std::string_view text) { return '"' + std::string(text) + '"'; }

// What was asked for: MAKER/NAME, or a name of any maker.
struct Asked {
  std::optional<std::string_view> maker = {};
  std::string_view name = {};
};

// One look-up in a catalogue.
class Search {
 public:
  Search(const Catalog::Contents& contents, std::string_view text)
      : contents_(contents), text_(text), asked_{.maker = {}, .name = text} {
    const std::size_t slash = text.find('/');
    if (slash == text.npos || !contents.named(text).empty()) return;
    asked_ = {.maker = text.substr(0, slash), .name = text.substr(slash + 1)};
  }

  // One place, or several that all answer to it, or none.
  [[nodiscard]] Places found() const {
    Places places = of_maker(contents_.named(asked_.name));
    if (places.empty() && is_code(asked_.name)) places = of_maker(of_code());
    keep_if_any(places, [this](std::size_t i) { return i >= contents_.built_in; });
    keep_if_any(places, [this](std::size_t i) { return at(i).name() == asked_.name; });
    return places;
  }

  [[noreturn]] void fail_ambiguous(const Places& places) const {
    std::vector<std::string> names;
    for (const std::size_t i : places) names.push_back(at(i).full_name());
    const std::size_t more = names.size() - std::min(names.size(), most_listed);
    names.resize(names.size() - more);
    throw Error(ErrorCode::ambiguous,
                "several materials are " + quoted(text_) + "; say which: " + detail::joined(names) +
                    (more == 0 ? "" : " or " + std::to_string(more) + " more"));
  }

  [[noreturn]] void fail_not_found() const {
    if (asked_.maker && !knows_maker()) {
      throw Error(ErrorCode::not_found, "no maker " + quoted(*asked_.maker) + "; the makers are " +
                                            detail::joined(makers()));
    }
    const std::vector<std::string> names = candidates();
    const std::vector<std::string_view> choices(names.begin(), names.end());
    const std::vector<std::string> close = detail::nearest(text_, choices);
    throw Error(ErrorCode::not_found, "no material " + quoted(text_) +
                                          (close.empty() ? "" : "; nearest: ") +
                                          detail::joined(close));
  }

 private:
  [[nodiscard]] const Material& at(std::size_t i) const { return contents_.materials[i]; }

  // Only those that satisfy it, if any does.
  template <class Satisfies>
  static void keep_if_any(Places& places, const Satisfies& satisfies) {
    Places kept;
    std::copy_if(places.begin(), places.end(), std::back_inserter(kept), satisfies);
    if (!kept.empty()) places = std::move(kept);
  }

  [[nodiscard]] bool is_of_maker(std::size_t i) const {
    return !asked_.maker || same_in_any_case(at(i).maker(), *asked_.maker);
  }

  [[nodiscard]] Places of_maker(const Places& places) const {
    Places kept;
    std::copy_if(places.begin(), places.end(), std::back_inserter(kept),
                 [this](std::size_t i) { return is_of_maker(i); });
    return kept;
  }

  [[nodiscard]] Places of_code() const {
    Places places;
    for (std::size_t i = 0; i < contents_.materials.size(); ++i) {
      if (at(i).data().code == asked_.name) places.push_back(i);
    }
    return places;
  }

  [[nodiscard]] std::vector<std::string> makers() const {
    std::vector<std::string> names;
    for (const Material& m : contents_.materials) {
      if (!m.maker().empty()) names.push_back(m.maker());
    }
    std::sort(names.begin(), names.end());
    names.erase(std::unique(names.begin(), names.end()), names.end());
    return names;
  }

  [[nodiscard]] bool knows_maker() const {
    if (asked_.maker->empty()) return true;
    return std::any_of(
        contents_.materials.begin(), contents_.materials.end(),
        [this](const Material& m) { return same_in_any_case(m.maker(), *asked_.maker); });
  }

  // Each name once, in catalogue order; with the maker where one was asked for.
  [[nodiscard]] std::vector<std::string> candidates() const {
    std::vector<std::string> names;
    for (std::size_t i = 0; i < contents_.materials.size(); ++i) {
      if (asked_.maker && is_of_maker(i)) names.push_back(at(i).full_name());
      if (!asked_.maker && contents_.named(at(i).name()).front() == i)
        names.push_back(at(i).name());
    }
    return names;
  }

  const Catalog::Contents& contents_;
  std::string_view text_;
  Asked asked_;
};

bool is_same(const Material& a, const Material& b) {
  return a.name() == b.name() && a.maker() == b.maker();
}

}  // namespace

void Catalog::Contents::append(Material material) {
  const std::pair entry(hash_of(material.name()), materials.size());
  by_name.insert(std::upper_bound(by_name.begin(), by_name.end(), entry), entry);
  materials.push_back(std::move(material));
}

std::vector<std::size_t> Catalog::Contents::named(std::string_view name) const {
  const std::uint64_t hash = hash_of(name);
  Places places;
  const std::pair first(hash, std::size_t{0});
  for (auto i = std::lower_bound(by_name.begin(), by_name.end(), first);
       i != by_name.end() && i->first == hash; ++i) {
    if (same_in_any_case(materials[i->second].name(), name)) places.push_back(i->second);
  }
  return places;
}

std::shared_ptr<const Catalog::Contents> detail::load_built_in() {
  auto contents = std::make_shared<Catalog::Contents>();
  contents->materials = built_in_materials();
  contents->built_in = contents->materials.size();
  contents->by_name.reserve(contents->built_in);
  for (std::size_t i = 0; i < contents->built_in; ++i) {
    contents->by_name.emplace_back(hash_of(contents->materials[i].name()), i);
  }
  std::sort(contents->by_name.begin(), contents->by_name.end());
  return contents;
}

Catalog::Catalog() : contents_(std::make_shared<Contents>()) {}

Catalog Catalog::built_in() {
  static const std::shared_ptr<const Contents> loaded = detail::load_built_in();
  Catalog catalog;
  catalog.contents_ = loaded;
  return catalog;
}

std::string_view Catalog::data_version() {
  return "refractiveindex.info database, commit ff11b58 (2026-06-14), CC0 1.0";
}

Material Catalog::at(std::string_view name) const {
  const Search search(*contents_, name);
  const Places places = search.found();
  if (places.empty()) search.fail_not_found();
  if (places.size() > 1) search.fail_ambiguous(places);
  return contents_->materials[places.front()];
}

std::span<const Material> Catalog::materials() const { return contents_->materials; }

void Catalog::add(const Material& material) {
  const Places namesakes = contents_->named(material.name());
  if (std::any_of(namesakes.begin(), namesakes.end(),
                  [&](std::size_t i) { return is_same(contents_->materials[i], material); })) {
    throw Error(ErrorCode::bad_value,
                "a material " + quoted(material.full_name()) + " is in the catalogue already");
  }
  auto changed = std::make_shared<Contents>(*contents_);
  changed->append(material);
  contents_ = std::move(changed);
}

std::string Catalog::shortest_name(const Material& material) const {
  const Places places = Search(*contents_, material.name()).found();
  const bool plain = places.empty() || (places.size() == 1 &&
                                        is_same(contents_->materials[places.front()], material));
  if (plain) return material.name();
  return material.maker().empty() ? '/' + material.name() : material.full_name();
}

}  // namespace chromacore
