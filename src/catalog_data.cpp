#include "catalog_data.hpp"

#include <algorithm>
#include <array>
#include <charconv>
#include <chromacore/error.hpp>
#include <string>
#include <string_view>
#include <system_error>
#include <utility>

namespace chromacore::detail {

extern const std::string_view data_glasses;
extern const std::string_view data_tables;
extern const std::string_view data_materials;
extern const std::string_view data_sources;
extern const std::string_view data_notes;
extern const std::string_view data_cautions;

namespace {

using units::celsius;
using units::um;

// The columns of a record, in the files' order.
enum Column : std::size_t {
  name,
  maker,
  status,
  code,
  form,
  coefficients,
  range_um,
  index_in,
  wavelength_in,
  temperature_C,
  thermal,
  dn_dt_per_K,
  dn_dt_relative_to,
  expansion_per_K,
  density_kg_m3,
  axis,
  cautions,
  notes,
  source,
  column_count,
};
constexpr std::string_view column_names =
    "name,maker,status,code,form,coefficients,range_um,index_in,wavelength_in,temperature_C,"
    "thermal,dn_dt_per_K,dn_dt_relative_to,expansion_per_K,density_kg_m3,axis,cautions,notes,"
    "source";
using Cells = std::array<std::string_view, column_count>;

[[noreturn]] void damaged(std::string_view text) {
  throw Error(ErrorCode::internal,
              "built-in material data are damaged at \"" + std::string(text.substr(0, 80)) + '"');
}

// What stands before `mark` (or all of it), and takes both off `rest`.
std::string_view take_until(std::string_view& rest, char mark) {
  const std::size_t end = std::min(rest.find(mark), rest.size());
  const std::string_view taken = rest.substr(0, end);
  rest.remove_prefix(std::min(end + 1, rest.size()));
  return taken;
}

// Calls `at(line)` for each line after the header; comment lines are skipped.
template <class AtLine>
void for_each_line(std::string_view text, std::string_view header, const AtLine& at) {
  bool header_seen = false;
  while (!text.empty()) {
    const std::string_view line = take_until(text, '\n');
    if (line.empty() || line.front() == '#') continue;
    if (header_seen) {
      at(line);
    } else if (line == header) {
      header_seen = true;
    } else {
      damaged(line);
    }
  }
}

double number(std::string_view text) {
  double value = 0;
  const char* const end = text.data() + text.size();
  const auto [stop, error] = std::from_chars(text.data(), end, value);
  if (error != std::errc{} || stop != end) damaged(text);
  return value;
}

std::optional<double> maybe_number(std::string_view text) {
  if (text.empty()) return {};
  return number(text);
}

// Numbers with one blank between.
std::vector<double> numbers(std::string_view text) {
  std::vector<double> values;
  values.reserve(static_cast<std::size_t>(std::count(text.begin(), text.end(), ' ')) + 1);
  const char* at = text.data();
  const char* const end = at + text.size();
  for (bool more = at != end; more; more = at != end && *at++ == ' ') {
    const auto [stop, error] = std::from_chars(at, end, values.emplace_back());
    if (error != std::errc{}) damaged(text);
    at = stop;
  }
  if (at != end) damaged(text);
  return values;
}

Status status_of(std::string_view word) {
  for (const Status value : {Status::current, Status::on_request, Status::withdrawn}) {
    if (word == to_string(value)) return value;
  }
  return Status::unknown;
}

Medium medium(std::string_view word) {
  if (word == "air") return Medium::air;
  return word == "vacuum" ? Medium::vacuum : Medium::unknown;
}

// A file of texts by their ids: `id,"text"` or `id,"text","who says so"`.
class Texts {
 public:
  Texts(std::string_view text, std::string_view header) {
    for_each_line(text, header, [this](std::string_view line) {
      const std::string_view id = take_until(line, ',');
      take_until(line, '"');
      entries_.emplace_back(id, take_until(line, '"'));
    });
  }

  [[nodiscard]] std::string_view at(std::string_view id) const {
    for (const auto& [key, text] : entries_) {
      if (key == id) return text;
    }
    damaged(id);
  }

  [[nodiscard]] std::vector<std::string> all(std::string_view ids) const {
    std::vector<std::string> texts;
    while (!ids.empty()) texts.emplace_back(at(take_until(ids, ' ')));
    return texts;
  }

 private:
  std::vector<std::pair<std::string_view, std::string_view>> entries_;
};

struct AllTexts {
  Texts sources{data_sources, "id,text"};
  Texts notes{data_notes, "id,text"};
  Texts cautions{data_cautions, "id,text,who"};
};

void read_index(const Cells& cells, MaterialData& data) {
  data.form = dispersion_form(cells[form]);
  data.coefficients = numbers(cells[coefficients]);
  data.index_relative_to = medium(cells[index_in]);
  data.wavelength_in = medium(cells[wavelength_in]);
  std::string_view range = cells[range_um];
  data.shortest = number(take_until(range, ' ')) * um;
  data.longest = number(range) * um;
  if (data.wavelength_in == Medium::vacuum) {  // a range in the source's own medium
    data.shortest = standard_air_wavelength(data.shortest);
    data.longest = standard_air_wavelength(data.longest);
  }
}

void read_temperature(const Cells& cells, MaterialData& data) {
  if (const auto t0 = maybe_number(cells[temperature_C])) data.temperature = *t0 * celsius;
  if (!cells[thermal].empty()) {
    const std::vector<double> c = numbers(cells[thermal]);
    if (c.size() != 6) damaged(cells[thermal]);
    data.thermal = ThermalCoefficients{c[0], c[1], c[2], c[3], c[4], c[5]};
  }
  if (const auto dn_dt = maybe_number(cells[dn_dt_per_K])) {
    data.thermal_constant = ThermalConstant{*dn_dt, medium(cells[dn_dt_relative_to])};
  }
  data.expansion_per_K = maybe_number(cells[expansion_per_K]);
}

Material material(std::string_view line, const AllTexts& texts) {
  std::string_view rest = line;
  Cells cells;
  for (std::string_view& cell : cells) cell = take_until(rest, ',');
  if (!rest.empty() || cells[source].empty()) damaged(line);
  MaterialData data;
  data.name = cells[name];
  data.maker = cells[maker];
  data.code = cells[code];
  data.status = status_of(cells[status]);
  read_index(cells, data);
  read_temperature(cells, data);
  data.density_kg_m3 = maybe_number(cells[density_kg_m3]);
  data.axis = cells[axis];
  data.cautions = texts.cautions.all(cells[cautions]);
  data.notes = texts.notes.all(cells[notes]);
  data.source = texts.sources.at(cells[source]);
  return Material(std::move(data));
}

}  // namespace

std::vector<Material> built_in_materials() {
  const AllTexts texts;
  std::vector<Material> materials;
  for (const std::string_view file : {data_glasses, data_tables, data_materials}) {
    for_each_line(file, column_names,
                  [&](std::string_view line) { materials.push_back(material(line, texts)); });
  }
  return materials;
}

}  // namespace chromacore::detail
