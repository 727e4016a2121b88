#include "io/run_reader.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <filesystem>
#include <stdexcept>

#include "io/branch_case.hpp"
#include "io/branch_table.hpp"
#include "io/vtk_grids.hpp"
#include "mesh/geometry.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;

/// Cells and corners of a whole shell, gathered piece by piece.
class Gathered {
 public:
  Gathered(const Geometry& g, const std::string& path) : geometry_(g), path_(path) {
    const std::size_t cells = rows() * static_cast<std::size_t>(g.lateral_cells());
    for (auto* field : {&fields_.temperature, &fields_.viscosity, &fields_.strain_rate,
                        &fields_.velocity_radial, &fields_.velocity_lateral})
      field->resize(cells);
    fields_.stream_function.resize((rows() + 1) * static_cast<std::size_t>(g.corner_columns()));
  }

  void add(const GridPiece& p) {
    const PieceExtent e = p.extent;
    if (p.radial_cells != geometry_.radial_cells() || e.first_column != next_column_ ||
        e.last_column > geometry_.lateral_cells())
      throw InputError(fmt::format(
          "{}: does not fit the grid of case_as_read.toml; files of two runs are mixed, march anew",
          path_));
    next_column_ = e.last_column;
    copy_cells(p, "temperature", fields_.temperature);
    copy_cells(p, "viscosity", fields_.viscosity);
    copy_cells(p, "strain_rate", fields_.strain_rate);
    copy_velocity(p);
    copy_corners(p);
  }

  SavedFields whole() && { return std::move(fields_); }

 private:
  std::size_t rows() const { return static_cast<std::size_t>(geometry_.radial_cells()); }

  const std::vector<double>& array(const std::map<std::string, std::vector<double>>& arrays,
                                   const std::string& name, std::size_t size) const {
    const auto found = arrays.find(name);
    if (found == arrays.end() || found->second.size() != size)
      throw InputError(fmt::format(
          "{}: a piece has no whole array '{}'; the file was changed or damaged", path_, name));
    return found->second;
  }
  std::size_t cells_of(const GridPiece& p) const {
    return rows() * static_cast<std::size_t>(p.extent.last_column - p.extent.first_column);
  }
  void copy_cells(const GridPiece& p, const std::string& name, std::vector<double>& field) const {
    const std::vector<double>& from = array(p.cells, name, cells_of(p));
    std::copy(from.begin(), from.end(),
              field.begin() + static_cast<long>(rows()) * p.extent.first_column);
  }

  /// The file's vectors are Cartesian: their parts along those of the shell.
  void copy_velocity(const GridPiece& p) {
    const std::vector<double>& v = array(p.cells, "velocity", 3 * cells_of(p));
    for (std::size_t k = 0; k < cells_of(p); ++k) {
      const std::size_t at = k + rows() * static_cast<std::size_t>(p.extent.first_column);
      const double lateral = geometry_.cell_lateral(static_cast<int>(at / rows()));
      const auto up = geometry_.cartesian_vector(1, 0, lateral);
      const auto along = geometry_.cartesian_vector(0, 1, lateral);
      fields_.velocity_radial[at] = up[0] * v[3 * k] + up[1] * v[3 * k + 1];
      fields_.velocity_lateral[at] = along[0] * v[3 * k] + along[1] * v[3 * k + 1];
    }
  }

  void copy_corners(const GridPiece& p) {
    const auto columns = static_cast<std::size_t>(p.extent.last_column - p.extent.first_column + 1);
    const std::vector<double>& from = array(p.points, "stream_function", (rows() + 1) * columns);
    const std::size_t first = (rows() + 1) * static_cast<std::size_t>(p.extent.first_column);
    const std::size_t room = fields_.stream_function.size() - first;
    std::copy(from.begin(), from.begin() + static_cast<long>(std::min(from.size(), room)),
              fields_.stream_function.begin() + static_cast<long>(first));
  }

  const Geometry& geometry_;
  std::string path_;
  int next_column_ = 0;
  SavedFields fields_;
};

/// What is thrown says what is wrong, and becomes bad input.
template <class Read>
auto as_input(Read read) {
  try {
    return read();
  } catch (const InputError&) {
    throw;
  } catch (const std::runtime_error& e) {
    throw InputError(e.what());
  }
}

std::string text_of(const std::string& path) {
  return as_input([&] { return read_whole_file(path); });
}

RunKind kind_of(const std::string& folder) {
  if (fs::exists(folder + "/onset.csv")) return RunKind::Onset;
  return holds_steady_states(folder) ? RunKind::Settle : RunKind::March;
}

GridPiece piece_at(const std::string& path) {
  try {
    return read_piece(text_of(path));
  } catch (const DamagedGrid& e) {
    throw InputError(fmt::format("{}: {}", path, e.what()));
  }
}

/// Of the pieces, in order of their columns; an onset's mode may have more of these than its case.
std::vector<GridPiece> pieces_at(const std::string& path) {
  std::vector<GridPiece> pieces;
  for (const std::string& file : pieces_listed(text_of(path)))
    pieces.push_back(piece_at(fs::path(path).parent_path() / file));
  if (pieces.empty())
    throw InputError(fmt::format("{}: lists no pieces; the file was changed or damaged", path));
  return pieces;
}

std::string snapshot_path(const SavedRun& run, std::size_t n) {
  if (n >= run.snapshots.size())
    throw InputError(fmt::format("{}: there is no snapshot {}; they are numbered from 0 to {}",
                                 run.paths.fields_collection(), n, run.snapshots.size() - 1));
  return run.paths.folder + "/" + run.snapshots[n].file;
}

}  // namespace

SavedRun open_run(const std::string& folder) {
  if (!fs::is_directory(folder))
    throw InputError(fmt::format("{}: is no folder; name the folder of a run", folder));
  if (!holds_run(folder))
    throw InputError(fmt::format(
        "{}: holds no run; name a folder that march, settle or onset has written", folder));
  SavedRun run{{without_trailing_slash(folder)}, kind_of(folder), {}, {}, {}};
  run.settings = read_case(run.paths.case_file());
  if (fs::exists(run.paths.fields_collection()))
    run.snapshots = read_collection(text_of(run.paths.fields_collection()));
  if (run.kind == RunKind::March && fs::exists(run.paths.history()))
    run.history = parse_history(text_of(run.paths.history()), run.paths.history());
  return run;
}

Case settings_of(const SavedRun& run, std::size_t n) {
  const std::string path = run.paths.branch();
  if (run.kind != RunKind::Settle || !fs::exists(path)) return run.settings;
  const SavedBranch branch = as_input([&] { return read_branch(text_of(path), path); });
  const auto& rows = branch.rows;
  const auto row = std::find_if(rows.begin(), rows.end(), [&](const BranchRow& r) {
    return r.snapshot == static_cast<int>(n);
  });
  if (row == rows.end() || row->parameter == rows.front().parameter) return run.settings;
  return case_along(text_of(run.paths.case_file()), run.paths.case_file(), branch.parameter.key,
                    row->parameter);
}

SavedFields read_fields(const SavedRun& run, std::size_t n) {
  const std::string path = snapshot_path(run, n);
  const std::vector<GridPiece> pieces = pieces_at(path);
  Case settings = settings_of(run, n);
  Grid grid = settings.model.grid;
  grid.lateral = pieces.back().extent.last_column;
  const Geometry geometry(settings.model.shell, grid);
  Gathered gathered(geometry, path);
  for (const GridPiece& piece : pieces) gathered.add(piece);
  SavedFields fields = std::move(gathered).whole();
  fields.settings = std::move(settings);
  fields.grid = grid;
  fields.time = run.snapshots[n].time;
  return fields;
}

NumberTable read_profiles(const SavedRun& run, std::size_t n) {
  const std::string path = run.paths.folder + "/" + profiles_name(n);
  return parse_numbers(text_of(path), path);
}

}  // namespace lidwright
