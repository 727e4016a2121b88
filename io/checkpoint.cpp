#include "io/checkpoint.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <filesystem>
#include <map>
#include <sstream>
#include <string_view>

#include "io/atomic_file.hpp"
#include "io/case_file.hpp"
#include "io/collective.hpp"
#include "io/hdf5_image.hpp"
#include "io/provenance.hpp"
#include "io/run_folder.hpp"
#include "io/seal.hpp"
#include "mesh/gather.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;

constexpr std::string_view previous_remedy =
    "use the checkpoint before it (--resume-from-previous), or start the run anew";

constexpr std::array<std::string_view, 4> shape_names{"box", "annulus", "spherical annulus",
                                                      "axisymmetric shell"};
constexpr std::array<std::string_view, 2> side_names{"periodic", "reflecting"};

std::string shape_name(Shape shape) {
  return std::string(shape_names[static_cast<std::size_t>(shape)]);
}
std::string side_name(Sides sides) {
  return std::string(side_names[static_cast<std::size_t>(sides)]);
}

/// Where a name stands in a list of an enumeration's names.
template <class Enum, std::size_t n>
Enum named(const std::array<std::string_view, n>& names, const std::string& name) {
  const auto found = std::find(names.begin(), names.end(), name);
  if (found == names.end()) throw std::runtime_error(fmt::format("of an unknown kind, '{}'", name));
  return static_cast<Enum>(found - names.begin());
}

/// Fields by name in natural order [lateral][radial]; first rank only.
using WholeFields = std::map<std::string, std::vector<double>>;

struct MeshPlaces {
  Shell shell;
  std::vector<double> face_radius, face_lateral;
};

MeshPlaces places_of(const Geometry& g) {
  MeshPlaces places{g.shell(), {}, {}};
  for (int i = 0; i <= g.radial_cells(); ++i) places.face_radius.push_back(g.face_radius(i));
  for (int j = 0; j <= g.lateral_cells(); ++j) places.face_lateral.push_back(g.face_lateral(j));
  return places;
}

template <At at>
WholeFields gather_all(const std::map<std::string, Field<at>>& fields) {
  WholeFields all;
  for (const auto& [name, field] : fields) all[name] = gather_to_first(field);
  return all;
}

// Writing.

void put_places(Hdf5Writer& file, const MeshPlaces& places) {
  file.text("shape", shape_name(places.shell.shape));
  file.text("sides", side_name(places.shell.sides));
  file.group("mesh");
  file.number("mesh/inner_radius", places.shell.inner_radius);
  file.number("mesh/lateral_begin", places.shell.lateral_begin);
  file.number("mesh/lateral_end", places.shell.lateral_end);
  file.array("mesh/face_radius", {places.face_radius.size()}, places.face_radius.data());
  file.array("mesh/face_lateral", {places.face_lateral.size()}, places.face_lateral.data());
}

void put_fields(Hdf5Writer& file, const std::string& group, const WholeFields& fields, int rows) {
  file.group(group);
  for (const auto& [name, values] : fields) {
    const auto height = static_cast<hsize_t>(rows);
    file.array(group + "/" + name, {values.size() / height, height}, values.data());
  }
}

std::string sealed_file(const std::map<std::string, double>& numbers, const WholeFields& cells,
                        const WholeFields& corners, const Decomposition& d,
                        const std::string& fingerprint) {
  Hdf5Writer file;
  file.text("program", "lidwright " + program_version());
  file.text("fingerprint", fingerprint);
  put_places(file, places_of(d.geometry()));
  file.group("numbers");
  for (const auto& [name, value] : numbers) file.number("numbers/" + name, value);
  put_fields(file, "cells", cells, d.rows(At::Cell));
  put_fields(file, "corners", corners, d.rows(At::Corner));
  return seal(file.image());
}

// Reading.

MeshPlaces get_places(const Hdf5Reader& file) {
  MeshPlaces places;
  places.shell.shape = named<Shape>(shape_names, file.text("shape"));
  places.shell.sides = named<Sides>(side_names, file.text("sides"));
  places.shell.inner_radius = file.number("mesh/inner_radius");
  places.shell.lateral_begin = file.number("mesh/lateral_begin");
  places.shell.lateral_end = file.number("mesh/lateral_end");
  places.face_radius = file.array("mesh/face_radius").values;
  places.face_lateral = file.array("mesh/face_lateral").values;
  return places;
}

std::string size_of(const MeshPlaces& m) {
  return fmt::format("{} x {} cells, {}, {}", m.face_radius.size() - 1, m.face_lateral.size() - 1,
                     shape_name(m.shell.shape), side_name(m.shell.sides));
}

/// Throws InputError unless the checkpoint belongs to this case and mesh.
void refuse_foreign(const std::string& path, const Hdf5Reader& file, const Geometry& geometry,
                    const std::string& fingerprint) {
  constexpr std::string_view remedy =
      "resume with the case it was made with, or start a new run in another folder (--into)";
  const MeshPlaces theirs = get_places(file), ours = places_of(geometry);
  const bool same =
      theirs.shell.shape == ours.shell.shape && theirs.shell.sides == ours.shell.sides &&
      theirs.face_radius == ours.face_radius && theirs.face_lateral == ours.face_lateral;
  if (!same)
    throw InputError(
        fmt::format("{}: is of another mesh ({}; this case has {}, or other places of them); {}",
                    path, size_of(theirs), size_of(ours), remedy));
  if (file.text("fingerprint") != fingerprint)
    throw InputError(fmt::format("{}: is of another case; {}", path, remedy));
}

std::vector<double> get_field(const Hdf5Reader& file, const std::string& path, hsize_t columns,
                              hsize_t rows) {
  Hdf5Array array = file.array(path);
  if (array.sizes != std::vector<hsize_t>{columns, rows})
    throw std::runtime_error(fmt::format("damaged: {} is not of the mesh's size", path));
  return std::move(array.values);
}

WholeFields get_fields(const Hdf5Reader& file, const std::string& group, int columns, int rows) {
  WholeFields fields;
  for (const std::string& name : file.names(group))
    fields[name] = get_field(file, group + "/" + name, static_cast<hsize_t>(columns),
                             static_cast<hsize_t>(rows));
  return fields;
}

/// Runs `read(contents)` on the first rank; every failure but InputError becomes one that names the
/// file.
template <class Read>
void read_on_first_rank(MPI_Comm comm, const std::string& path, Read read) {
  on_first_rank<InputError>(comm, [&] {
    try {
      read(open_seal(read_whole_file(path)));
    } catch (const InputError&) {
      throw;
    } catch (const std::exception& e) {
      throw InputError(fmt::format("checkpoint {}: {}; {}", path, e.what(), previous_remedy));
    }
  });
}

template <class Map>
std::vector<std::string> names_on_all_ranks(MPI_Comm comm, const Map& map) {
  std::string joined;
  for (const auto& [name, value] : map) joined += name + "\n";
  broadcast(comm, joined);
  std::vector<std::string> names;
  std::istringstream lines(joined);
  for (std::string name; std::getline(lines, name);) names.push_back(name);
  return names;
}

std::map<std::string, double> share_numbers(MPI_Comm comm,
                                            const std::map<std::string, double>& mine) {
  std::vector<double> values;
  for (const auto& [name, value] : mine) values.push_back(value);
  const std::vector<std::string> names = names_on_all_ranks(comm, mine);
  broadcast(comm, values);
  std::map<std::string, double> all;
  for (std::size_t k = 0; k < names.size(); ++k) all[names[k]] = values[k];
  return all;
}

template <At at>
std::map<std::string, Field<at>> share_fields(const std::shared_ptr<const Decomposition>& d,
                                              const WholeFields& whole) {
  std::map<std::string, Field<at>> fields;
  for (const std::string& name : names_on_all_ranks(d->comm(), whole)) {
    Field<at> field(d);
    scatter_from_first(d->rank() == 0 ? whole.at(name) : std::vector<double>{}, field);
    fields.emplace(name, std::move(field));
  }
  return fields;
}

std::vector<CheckpointFile> checkpoints_in(const std::string& folder) {
  std::vector<CheckpointFile> found;
  if (!fs::is_directory(folder)) return found;
  for (const auto& entry : fs::directory_iterator(folder)) {
    const std::string name = entry.path().filename().string();
    if (const auto step = numbered(name, "step_", checkpoint_digits, ".h5"))
      found.push_back({*step, entry.path().string()});
  }
  std::sort(found.begin(), found.end(),
            [](const auto& a, const auto& b) { return a.step > b.step; });
  return found;
}

template <class Condition>
void remove_checkpoints(MPI_Comm comm, const std::string& folder, Condition unwanted) {
  on_first_rank<OutputError>(comm, [&] {
    int place = 0;
    for (const CheckpointFile& file : checkpoints_in(folder))
      if (unwanted(file, place++) && ::unlink(file.path.c_str()) != 0)
        throw OutputError(output_failure(file.path, errno));
  });
}

/// The checkpoint meant by a path that may be a run folder. Throws InputError.
std::string newest_of(const std::string& path) {
  if (!fs::is_directory(path)) return path;
  for (const std::string& folder : {RunPaths{path}.checkpoints(), path}) {
    const std::vector<CheckpointFile> found = checkpoints_in(folder);
    if (!found.empty()) return found.front().path;
  }
  throw InputError(fmt::format(
      "{}: holds no checkpoint; give a run folder that has one, or a checkpoint's file", path));
}

}  // namespace

std::string checkpoint_path(const std::string& folder, long step) {
  return fmt::format("{}/step_{:0{}}.h5", folder, step, checkpoint_digits);
}

void write_checkpoint(const std::string& path, const Archive& archive, const Decomposition& d,
                      const std::string& fingerprint) {
  const WholeFields cells = gather_all(archive.cells), corners = gather_all(archive.corners);
  on_first_rank<OutputError>(d.comm(), [&] {
    write_atomically(path, sealed_file(archive.numbers, cells, corners, d, fingerprint));
  });
}

Archive read_checkpoint(const std::string& path, std::shared_ptr<const Decomposition> d,
                        const std::string& fingerprint) {
  std::map<std::string, double> numbers;
  WholeFields cells, corners;
  read_on_first_rank(d->comm(), path, [&](const std::string& contents) {
    const Hdf5Reader file(contents);
    const Geometry& g = d->geometry();
    refuse_foreign(path, file, g, fingerprint);
    for (const std::string& name : file.names("numbers"))
      numbers[name] = file.number("numbers/" + name);
    cells = get_fields(file, "cells", g.lateral_cells(), d->rows(At::Cell));
    corners = get_fields(file, "corners", g.corner_columns(), d->rows(At::Corner));
  });
  Archive archive;
  archive.numbers = share_numbers(d->comm(), numbers);
  archive.cells = share_fields<At::Cell>(d, cells);
  archive.corners = share_fields<At::Corner>(d, corners);
  return archive;
}

std::vector<CheckpointFile> list_checkpoints(MPI_Comm comm, const std::string& folder) {
  std::map<std::string, long> mine;
  on_first_rank<InputError>(comm, [&] {
    for (const CheckpointFile& file : checkpoints_in(folder)) mine[file.path] = file.step;
  });
  std::vector<CheckpointFile> all;
  for (const auto& [path, step] : share_numbers(comm, {mine.begin(), mine.end()}))
    all.push_back({static_cast<long>(step), path});
  std::sort(all.begin(), all.end(), [](const auto& a, const auto& b) { return a.step > b.step; });
  return all;
}

void remove_old_checkpoints(MPI_Comm comm, const std::string& folder, int keep) {
  remove_checkpoints(comm, folder, [&](const CheckpointFile&, int place) { return place >= keep; });
}

void remove_checkpoints_after(MPI_Comm comm, const std::string& folder, long step) {
  remove_checkpoints(comm, folder,
                     [&](const CheckpointFile& file, int) { return file.step > step; });
}

StoredTemperature read_temperature(MPI_Comm comm, const std::string& path) {
  StoredTemperature t;
  std::string file_path;
  on_first_rank<InputError>(comm, [&] { file_path = newest_of(path); });
  std::vector<double> shell;
  read_on_first_rank(comm, file_path, [&](const std::string& contents) {
    const Hdf5Reader file(contents);
    MeshPlaces places = get_places(file);
    const Shell& s = places.shell;
    shell = {static_cast<double>(s.shape), static_cast<double>(s.sides), s.inner_radius,
             s.lateral_begin, s.lateral_end};
    t.face_radius = std::move(places.face_radius);
    t.face_lateral = std::move(places.face_lateral);
    t.values = get_field(file, "cells/temperature", t.lateral_cells(), t.radial_cells());
  });
  for (std::vector<double>* numbers : {&shell, &t.face_radius, &t.face_lateral, &t.values})
    broadcast(comm, *numbers);
  t.shell = {static_cast<Shape>(shell[0]), shell[2], shell[3], shell[4],
             static_cast<Sides>(shell[1])};
  return t;
}

}  // namespace lidwright
