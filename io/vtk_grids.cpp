#include "io/vtk_grids.hpp"

#include <fmt/format.h>
#include <vtkCallbackCommand.h>
#include <vtkCellArray.h>
#include <vtkCellData.h>
#include <vtkDoubleArray.h>
#include <vtkFieldData.h>
#include <vtkFloatArray.h>
#include <vtkNew.h>
#include <vtkPointData.h>
#include <vtkPoints.h>
#include <vtkPolyData.h>
#include <vtkSmartPointer.h>
#include <vtkStructuredGrid.h>
#include <vtkUnsignedCharArray.h>
#include <vtkVersion.h>
#include <vtkXMLPolyDataWriter.h>
#include <vtkXMLStructuredGridReader.h>
#include <vtkXMLStructuredGridWriter.h>

#include <array>
#include <utility>
#include <vector>

namespace lidwright {
namespace {

using FloatArray = vtkSmartPointer<vtkFloatArray>;
using Plane = std::array<double, 2>;

FloatArray new_array(const char* name, int components) {
  auto array = FloatArray::New();
  array->SetName(name);
  array->SetNumberOfComponents(components);
  return array;
}

void append(vtkFloatArray* array, Plane p) {
  const std::array<float, 3> xyz{static_cast<float>(p[0]), static_cast<float>(p[1]), 0.0F};
  array->InsertNextTypedTuple(xyz.data());
}

/// Calls action(place) in VTK's order: radial index fastest.
template <At at, class Action>
void for_columns(int rows, Range columns, Action action) {
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 0; i < rows; ++i) action(Index<at>{i, j});
}

FloatArray scalars(const char* name, const CellField& field) {
  auto array = new_array(name, 1);
  for_columns<At::Cell>(field.rows(), field.owned(),
                        [&](Cell c) { array->InsertNextValue(static_cast<float>(field[c])); });
  return array;
}

FloatArray velocity(const Snapshot& s) {
  const Geometry& g = s.temperature.decomposition().geometry();
  auto array = new_array("velocity", 3);
  for_columns<At::Cell>(s.temperature.rows(), s.temperature.owned(), [&](Cell c) {
    append(array,
           g.cartesian_vector(s.velocity_radial[c], s.velocity_lateral[c], g.cell_lateral(c.j)));
  });
  return array;
}

Range point_columns(PieceExtent e) { return {e.first_column, e.last_column + 1}; }

FloatArray scalars(const char* name, const CornerField& field, PieceExtent extent) {
  auto array = new_array(name, 1);
  for_columns<At::Corner>(field.rows(), point_columns(extent),
                          [&](Corner p) { array->InsertNextValue(static_cast<float>(field[p])); });
  return array;
}

vtkSmartPointer<vtkPoints> corner_points(const Geometry& g, PieceExtent extent) {
  auto coordinates = new_array("Points", 3);
  for_columns<At::Corner>(g.radial_cells() + 1, point_columns(extent), [&](Corner p) {
    append(coordinates, g.cartesian(g.face_radius(p.i), g.face_lateral(p.j)));
  });
  auto points = vtkSmartPointer<vtkPoints>::New();
  points->SetData(coordinates);
  return points;
}

void add_time(vtkDataObject* data, const Snapshot& s) {
  vtkNew<vtkDoubleArray> time;
  time->SetName("TimeValue");
  time->InsertNextValue(s.time);
  data->GetFieldData()->AddArray(time);
}

/// Inline, never appended: a widely used viewer cannot read appended pieces. LZ4 takes a third of
/// zlib's time for a quarter more bytes.
template <class Writer>
std::string as_text(vtkDataObject* data) {
  vtkNew<Writer> writer;
  writer->SetInputData(data);
  writer->SetDataModeToBinary();
  writer->SetCompressorTypeToLZ4();
  writer->SetCompressionLevel(1);
  writer->WriteToOutputStringOn();
  writer->Write();
  return writer->GetOutputString();
}

/// What the library says of a damaged file, instead of on the terminal.
class Complaints {
 public:
  Complaints() {
    command_->SetClientData(&any_);
    command_->SetCallback(
        [](vtkObject*, unsigned long, void* any, void*) { *static_cast<bool*>(any) = true; });
  }
  void listen_to(vtkXMLReader* reader) {
    for (const auto event : {vtkCommand::ErrorEvent, vtkCommand::WarningEvent})
      reader->AddObserver(event, command_);
    reader->SetReaderErrorObserver(command_);
    reader->SetParserErrorObserver(command_);
  }
  bool any() const { return any_; }

 private:
  bool any_ = false;
  vtkNew<vtkCallbackCommand> command_;
};

std::map<std::string, std::vector<double>> arrays_of(vtkDataSetAttributes* attributes) {
  std::map<std::string, std::vector<double>> arrays;
  for (int k = 0; k < attributes->GetNumberOfArrays(); ++k) {
    auto* array = vtkFloatArray::SafeDownCast(attributes->GetArray(k));
    if (!array || !array->GetName()) continue;
    const float* begin = array->GetPointer(0);
    arrays[array->GetName()] = std::vector<double>(begin, begin + array->GetNumberOfValues());
  }
  return arrays;
}

/// Name and number of components of every array, for the index of pieces.
std::vector<std::pair<std::string, int>> cell_arrays(const Snapshot& s) {
  std::vector<std::pair<std::string, int>> names{
      {"temperature", 1}, {"viscosity", 1}, {"strain_rate", 1}, {"velocity", 3}};
  if (!s.pressure.empty()) names.emplace_back("pressure", 1);
  return names;
}

/// Lines, numbers and vectors of both walls, wall by wall.
class WallLines {
 public:
  explicit WallLines(const Geometry& g) : geometry_(g) { wall_->SetName("wall"); }

  void add(const WallTrace& trace, int face_row, unsigned char wall) {
    const double radius = geometry_.face_radius(face_row);
    append(coordinates_, geometry_.cartesian(radius, geometry_.face_lateral(0)));
    for (std::size_t j = 0; j < trace.heat_flux.size(); ++j) {
      append(coordinates_,
             geometry_.cartesian(radius, geometry_.face_lateral(static_cast<int>(j) + 1)));
      const std::array<vtkIdType, 2> ends{coordinates_->GetNumberOfTuples() - 2,
                                          coordinates_->GetNumberOfTuples() - 1};
      lines_->InsertNextCell(2, ends.data());
      heat_flux_->InsertNextValue(static_cast<float>(trace.heat_flux[j]));
      append(velocity_, geometry_.cartesian_vector(0, trace.velocity[j],
                                                   geometry_.cell_lateral(static_cast<int>(j))));
      if (!trace.normal_stress.empty())
        normal_stress_->InsertNextValue(static_cast<float>(trace.normal_stress[j]));
      wall_->InsertNextValue(wall);
    }
  }

  vtkSmartPointer<vtkPolyData> data() const {
    vtkNew<vtkPoints> points;
    points->SetData(coordinates_);
    auto data = vtkSmartPointer<vtkPolyData>::New();
    data->SetPoints(points);
    data->SetLines(lines_);
    data->GetCellData()->AddArray(heat_flux_);
    if (normal_stress_->GetNumberOfTuples() > 0) data->GetCellData()->AddArray(normal_stress_);
    data->GetCellData()->AddArray(velocity_);
    data->GetCellData()->AddArray(wall_);
    return data;
  }

 private:
  const Geometry& geometry_;
  FloatArray coordinates_ = new_array("Points", 3);
  FloatArray heat_flux_ = new_array("heat_flux", 1);
  FloatArray normal_stress_ = new_array("normal_stress", 1);
  FloatArray velocity_ = new_array("velocity", 3);
  vtkNew<vtkUnsignedCharArray> wall_;
  vtkNew<vtkCellArray> lines_;
};

}  // namespace

PieceExtent extent_of_piece(const Decomposition& d) {
  const Range cells = d.owned(At::Cell);
  return {cells.begin, cells.end};
}

std::string structured_piece(const Snapshot& s, const CornerField& stream_function) {
  const Decomposition& d = s.temperature.decomposition();
  const PieceExtent extent = extent_of_piece(d);
  vtkNew<vtkStructuredGrid> grid;
  grid->SetExtent(0, d.geometry().radial_cells(), extent.first_column, extent.last_column, 0, 0);
  grid->SetPoints(corner_points(d.geometry(), extent));
  vtkCellData* cells = grid->GetCellData();
  cells->AddArray(scalars("temperature", s.temperature));
  cells->AddArray(scalars("viscosity", s.viscosity));
  cells->AddArray(scalars("strain_rate", s.strain_rate));
  cells->AddArray(velocity(s));
  if (!s.pressure.empty()) cells->AddArray(scalars("pressure", s.pressure));
  grid->GetPointData()->AddArray(scalars("stream_function", stream_function, extent));
  add_time(grid, s);
  return as_text<vtkXMLStructuredGridWriter>(grid);
}

GridPiece read_piece(const std::string& text) {
  Complaints complaints;
  vtkNew<vtkXMLStructuredGridReader> reader;
  complaints.listen_to(reader);
  reader->ReadFromInputStringOn();
  reader->SetInputString(text);
  reader->Update();
  vtkStructuredGrid* grid = reader->GetOutput();
  if (complaints.any() || reader->GetErrorCode() != 0 || grid->GetNumberOfCells() < 1)
    throw DamagedGrid("not a whole structured grid of VTK; the file is damaged");
  const int* e = grid->GetExtent();
  return {
      {e[2], e[3]}, e[1] - e[0], arrays_of(grid->GetCellData()), arrays_of(grid->GetPointData())};
}

std::string structured_index(const Snapshot& s, const std::vector<PieceExtent>& extents,
                             const std::vector<std::string>& files) {
  const Geometry& g = s.temperature.decomposition().geometry();
  const auto array = [](const std::string& name, int components) {
    return fmt::format(
        "      <PDataArray type=\"Float32\" Name=\"{}\" NumberOfComponents=\"{}\"/>\n", name,
        components);
  };
  std::string text = fmt::format(
      "<?xml version=\"1.0\"?>\n<VTKFile type=\"PStructuredGrid\" version=\"0.1\" "
      "byte_order=\"LittleEndian\" "
      "header_type=\"UInt32\" compressor=\"vtkLZ4DataCompressor\">\n"
      "  <PStructuredGrid WholeExtent=\"0 {} 0 {} 0 0\" GhostLevel=\"0\">\n"
      "    <FieldData>\n      <DataArray type=\"Float64\" Name=\"TimeValue\" NumberOfTuples=\"1\" "
      "format=\"ascii\">{}"
      "</DataArray>\n    </FieldData>\n    <PCellData>\n",
      g.radial_cells(), g.lateral_cells(), s.time);
  for (const auto& [name, components] : cell_arrays(s)) text += array(name, components);
  text += "    </PCellData>\n    <PPointData>\n" + array("stream_function", 1) +
          "    </PPointData>\n    <PPoints>\n" + array("Points", 3) + "    </PPoints>\n";
  for (std::size_t k = 0; k < extents.size(); ++k)
    text += fmt::format("    <Piece Extent=\"0 {} {} {} 0 0\" Source=\"{}\"/>\n", g.radial_cells(),
                        extents[k].first_column, extents[k].last_column, files.at(k));
  return text + "  </PStructuredGrid>\n</VTKFile>\n";
}

std::string wall_lines(const Snapshot& s, const Geometry& g) {
  WallLines lines(g);
  lines.add(s.inner, 0, 0);
  lines.add(s.outer, g.radial_cells(), 1);
  const auto data = lines.data();
  add_time(data, s);
  return as_text<vtkXMLPolyDataWriter>(data);
}

std::string vtk_version() { return vtkVersion::GetVTKVersion(); }

}  // namespace lidwright
