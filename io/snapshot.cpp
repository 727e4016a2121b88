#include "io/snapshot.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <charconv>
#include <filesystem>
#include <string_view>

#include "io/collective.hpp"
#include "io/csv.hpp"
#include "io/vtk_grids.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;

std::string fields_name(std::size_t n) { return fmt::format("fields/fields_{:04}.pvts", n); }
std::string piece_name(std::size_t n, int rank) {
  return fmt::format("fields_{:04}_piece_{}.vts", n, rank);
}
std::string walls_name(std::size_t n, std::string_view kind) {
  return fmt::format("walls/walls_{:04}.{}", n, kind);
}
std::string topography_name(std::size_t n) { return fmt::format("walls/topography_{:04}.csv", n); }

/// The number of the snapshot that one of the run's files belongs to, nothing for other files.
std::optional<long> snapshot_of(std::string_view file) {
  for (const std::string_view stem : {"fields/fields_", "walls/walls_", "walls/topography_",
                                      "profiles/profiles_", "pictures/picture_"}) {
    const std::size_t end = file.find_first_of("_.", std::min(stem.size(), file.size()));
    if (const auto number = numbered(file.substr(0, end), stem, snapshot_digits, "")) return number;
  }
  return std::nullopt;
}

std::string_view between(std::string_view line, std::string_view before) {
  const std::size_t at = line.find(before);
  if (at == std::string_view::npos) return {};
  const std::string_view rest = line.substr(at + before.size());
  return rest.substr(0, rest.find('"'));
}

/// The elements of that name, each up to its end.
std::vector<std::string_view> elements(std::string_view text, std::string_view name) {
  std::vector<std::string_view> found;
  for (std::size_t at = text.find(name); at != std::string_view::npos; at = text.find(name)) {
    text.remove_prefix(at);
    found.push_back(text.substr(0, text.find('>')));
    text.remove_prefix(name.size());
  }
  return found;
}

/// Ranges of columns of all pieces, known on every rank.
std::vector<PieceExtent> extents_of_ranks(const Decomposition& d) {
  const PieceExtent mine = extent_of_piece(d);
  std::vector<PieceExtent> all(static_cast<std::size_t>(d.ranks()));
  static_assert(sizeof(PieceExtent) == 2 * sizeof(int));
  MPI_Allgather(&mine, 2, MPI_INT, all.data(), 2, MPI_INT, d.comm());
  return all;
}

std::string title_of(std::string_view subject, const std::string& state) {
  return fmt::format("lidwright {} {}", subject, state);
}

}  // namespace

std::string write_collection(const std::vector<CollectionEntry>& entries) {
  std::string text =
      "<?xml version=\"1.0\"?>\n<VTKFile type=\"Collection\" version=\"0.1\" "
      "byte_order=\"LittleEndian\">\n"
      "  <Collection>\n";
  for (const CollectionEntry& e : entries)
    text += fmt::format("    <DataSet timestep=\"{}\" part=\"0\" file=\"{}\"/>\n", e.time, e.file);
  return text + "  </Collection>\n</VTKFile>\n";
}

std::vector<CollectionEntry> read_collection(const std::string& text) {
  std::vector<CollectionEntry> entries;
  for (const std::string_view element : elements(text, "<DataSet")) {
    const std::string_view time = between(element, "timestep=\"");
    CollectionEntry entry{0, std::string(between(element, "file=\""))};
    if (std::from_chars(time.data(), time.data() + time.size(), entry.time).ec == std::errc())
      entries.push_back(entry);
  }
  return entries;
}

std::vector<std::string> pieces_listed(const std::string& text) {
  std::vector<std::string> files;
  for (const std::string_view element : elements(text, "<Piece"))
    files.emplace_back(between(element, "Source=\""));
  return files;
}

std::string profiles_name(std::size_t n) { return fmt::format("profiles/profiles_{:04}.csv", n); }

std::string profiles_table(const RadialProfiles& p, const std::string& state) {
  static constexpr std::array<Column, 8> columns{{
      {"radius", "d", "middle of the cells; height above the inner wall in the box"},
      {"temperature", "DeltaT", "mean over the surface"},
      {"temperature_adiabatic", "DeltaT", "of the adiabat through the mean at mid-depth"},
      {"velocity_radial_rms", "kappa/d", "root mean square over the surface"},
      {"velocity_lateral_rms", "kappa/d", "root mean square over the surface"},
      {"viscosity", "eta", "geometric mean over the surface"},
      {"heat_conducted", "k DeltaT d^(n-2)",
       "heat flow by conduction through the surface, > 0 outwards"},
      {"heat_advected", "k DeltaT d^(n-2)",
       "heat flow by advection through the surface, > 0 outwards"},
  }};
  const std::array<std::vector<double>, 8> numbers{p.radius,
                                                   p.temperature,
                                                   p.temperature_adiabatic,
                                                   p.velocity_radial_rms,
                                                   p.velocity_lateral_rms,
                                                   p.viscosity,
                                                   p.heat_conducted,
                                                   p.heat_advected};
  return table(title_of("radial profiles", state), columns, numbers);
}

std::string walls_table(const WallTrace& inner, const WallTrace& outer, const std::string& state) {
  std::vector<Column> columns{
      {"lateral", "d or rad",
       "middle of the column: x in the box, longitude in the annuli, colatitude in the shell"},
      {"inner_heat_flux", "k DeltaT/d", "along +r, > 0 enters the shell"},
      {"inner_velocity", "kappa/d", "along the wall, > 0 towards larger lateral coordinate"},
      {"outer_heat_flux", "k DeltaT/d", "along +r, > 0 leaves the shell"},
      {"outer_velocity", "kappa/d", "along the wall, > 0 towards larger lateral coordinate"}};
  std::vector<std::vector<double>> numbers{outer.lateral, inner.heat_flux, inner.velocity,
                                           outer.heat_flux, outer.velocity};
  if (!outer.normal_stress.empty()) {
    columns.push_back(
        {"inner_normal_stress", "eta kappa/d^2", "sigma_rr less its mean, > 0 is tension"});
    columns.push_back(
        {"outer_normal_stress", "eta kappa/d^2", "sigma_rr less its mean, > 0 is tension"});
    numbers.push_back(inner.normal_stress);
    numbers.push_back(outer.normal_stress);
  }
  return table(title_of("walls", state), columns, numbers);
}

std::string topography_table(const TopographySpectrum& spectrum, const std::string& state) {
  static constexpr std::array<Column, 2> columns{{
      {"wave_number", "1/d or 1/rad",
       "of cos and sin of the lateral coordinate (walls' tables); between reflecting sides of cos "
       "alone"},
      {"amplitude", "eta kappa/d^2", "of dynamic topography, -sigma_rr at the outer wall"},
  }};
  const std::array<std::vector<double>, 2> numbers{spectrum.wave_number, spectrum.amplitude};
  return table(title_of("dynamic topography", state), columns, numbers);
}

SnapshotWriter::SnapshotWriter(MPI_Comm comm, RunPaths paths, std::optional<double> resumed_time)
    : comm_(comm), paths_(std::move(paths)) {
  on_first_rank<OutputError>(comm_, [&] {
    if (!resumed_time || !fs::exists(paths_.fields_collection())) return;
    for (const CollectionEntry& e : read_collection(read_whole_file(paths_.fields_collection())))
      if (e.time <= *resumed_time) times_.push_back(e.time);
  });
  broadcast(comm_, times_);
  on_first_rank<OutputError>(comm_, [&] {
    write_collections(times_);
    drop_from(times_.size());
  });
}

void SnapshotWriter::write_collections(const std::vector<double>& times) const {
  std::vector<CollectionEntry> fields, walls;
  for (std::size_t n = 0; n < times.size(); ++n) {
    fields.push_back({times[n], fields_name(n)});
    walls.push_back({times[n], walls_name(n, "vtp")});
  }
  write_atomically(paths_.walls_collection(), write_collection(walls));
  write_atomically(paths_.fields_collection(), write_collection(fields));
}

void SnapshotWriter::drop_from(std::size_t first) const {
  for (const std::string& file : own_files(paths_)) {
    const auto number = snapshot_of(file);
    const std::string path = paths_.folder + "/" + file;
    if (number && static_cast<std::size_t>(*number) >= first && ::unlink(path.c_str()) != 0)
      throw OutputError(output_failure(path, errno));
  }
}

std::size_t SnapshotWriter::number_for(double time) const {
  return !times_.empty() && times_.back() == time ? times_.size() - 1 : times_.size();
}

std::string SnapshotWriter::moment(const Snapshot& s) {
  return fmt::format("at time {} d^2/kappa, step {}", s.time, s.step);
}

void SnapshotWriter::write(const Snapshot& s, const std::string& state) {
  const Decomposition& d = s.temperature.decomposition();
  const std::size_t n = number_for(s.time);
  const std::vector<PieceExtent> extents = extents_of_ranks(d);
  CornerField stream_function = s.stream_function;
  stream_function.exchange();  // a piece ends with its neighbour's first column of points
  on_all_ranks<OutputError>(comm_, [&] {
    write_atomically(paths_.fields() + "/" + piece_name(n, d.rank()),
                     structured_piece(s, stream_function));
  });
  std::vector<double> times = times_;
  times.resize(n);
  times.push_back(s.time);
  on_first_rank<OutputError>(comm_, [&] {
    std::vector<std::string> pieces;
    for (int rank = 0; rank < d.ranks(); ++rank) pieces.push_back(piece_name(n, rank));
    const std::string folder = paths_.folder + "/";
    write_atomically(folder + fields_name(n), structured_index(s, extents, pieces));
    write_atomically(folder + walls_name(n, "csv"), walls_table(s.inner, s.outer, state));
    write_atomically(folder + walls_name(n, "vtp"), wall_lines(s, d.geometry()));
    if (!s.outer.normal_stress.empty())
      write_atomically(
          folder + topography_name(n),
          topography_table(topography_spectrum(d.geometry(), s.outer.normal_stress), state));
    write_atomically(folder + profiles_name(n), profiles_table(s.profiles, state));
    write_collections(times);
  });
  times_ = std::move(times);
}

}  // namespace lidwright
