#include "io/page_fields.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numeric>

#include "io/grey_image.hpp"
#include "io/json.hpp"
#include "io/page_words.hpp"
#include "io/plot_axis.hpp"
#include "io/thinning.hpp"

namespace lidwright::page {
namespace {

/// One quantity in the blocks of every frame shown.
struct Layers {
  std::string name, title, unit;
  bool logarithmic = false;
  std::vector<std::vector<double>> frames;
  plot::Interval range{};

  bool uniform() const { return !(range.high - range.low > 1e-9 * std::abs(range.high)); }
};

int blocks(int cells, int factor) { return (cells + factor - 1) / factor; }

plot::Interval range_over(const std::vector<std::vector<double>>& frames) {
  std::vector<double> all;
  for (const auto& frame : frames) all.insert(all.end(), frame.begin(), frame.end());
  return plot::range_of(all);
}

/// What is no number has the colour of the least.
std::uint8_t byte_of(double share) {
  return std::isfinite(share)
             ? static_cast<std::uint8_t>(std::lround(255 * std::clamp(share, 0.0, 1.0)))
             : std::uint8_t{0};
}

/// Rows of the image from the outer wall inwards, so that it looks like the unrolled shell.
std::vector<std::uint8_t> bytes_of(const std::vector<double>& values, int rows, int columns,
                                   const plot::Interval& range) {
  std::vector<std::uint8_t> bytes;
  bytes.reserve(values.size());
  for (int i = rows - 1; i >= 0; --i)
    for (int j = 0; j < columns; ++j) {
      const double share =
          (values[static_cast<std::size_t>(j * rows + i)] - range.low) / (range.high - range.low);
      bytes.push_back(byte_of(share));
    }
  return bytes;
}

/// Of those numbers that are finite: one that is not leaves its block as it is without it.
class FiniteMean {
 public:
  void add(double x) {
    if (!std::isfinite(x)) return;
    sum_ += x;
    ++count_;
  }
  /// nan: there was none.
  double value() const { return sum_ / count_; }

 private:
  double sum_ = 0;
  int count_ = 0;
};

std::vector<double> logarithms(std::vector<double> values) {
  for (double& v : values) v = std::log10(v);
  return values;
}

void take(std::vector<Layers>& layers, const SavedFields& f, int factor) {
  layers[0].frames.push_back(block_means(f.temperature, f.grid, factor));
  layers[1].frames.push_back(block_means(logarithms(f.viscosity), f.grid, factor));
}

/// All frames with their grid, and the shell of each.
struct Read {
  std::vector<Layers> layers;
  std::vector<Shell> shells;
  Grid grid;
};

Read read_layers(const SavedRun& run, const std::vector<std::size_t>& snapshots,
                 const ImageBudget& budget) {
  Read all;
  std::vector<Layers> layers{{"temperature", "temperature", "DeltaT", false, {}, {}},
                             {"viscosity", "viscosity", "eta", true, {}, {}}};
  for (const std::size_t n : snapshots) {
    const SavedFields f = read_fields(run, n);
    all.grid = f.grid;
    all.shells.push_back(f.settings.model.shell);
    take(layers, f, block_factor(f.grid, budget.pixels));
  }
  for (Layers& l : layers) l.range = range_over(l.frames);
  std::erase_if(layers, [](const Layers& l) { return l.logarithmic && l.uniform(); });
  all.layers = std::move(layers);
  return all;
}

/// Temperatures of a mode of onset are those of a disturbance: their range is about 0, and there is
/// nothing in a field that is the same everywhere.
plot::Interval shown_range(const Layers& l) {
  return l.uniform() ? plot::with_margin(l.range, 0.1) : l.range;
}

/// Marks of the colour bar: place from 0 to 1 and words.
std::string marks(const Layers& l, const std::optional<InBody>& in) {
  const plot::Interval r = shown_range(l);
  std::vector<std::string> all;
  constexpr int count = 5;
  for (int k = 0; k < count; ++k) {
    const double share = k / (count - 1.0);
    const double value = r.low + share * (r.high - r.low);
    const double plain = l.logarithmic ? std::pow(10.0, value) : value;
    all.push_back(
        json::object({{"at", json::number(share)},
                      {"words", json::text(compact(plain, 3))},
                      {"body", json::text(in ? compact(in->scale * plain + in->offset, 4) : "")}}));
  }
  return json::list(all);
}

std::string images(const Layers& l, int rows, int columns) {
  std::vector<std::string> all;
  for (const auto& frame : l.frames)
    all.push_back(json::text(
        base64(grey_png(columns, rows, bytes_of(frame, rows, columns, shown_range(l))))));
  return json::list(all);
}

std::string layer_json(const Layers& l, const SavedRun& run, int rows, int columns) {
  const auto& body = run.settings.body;
  // The temperature of a mode of onset is to no scale: it is none in kelvin.
  const bool scaled = run.kind != RunKind::Onset || l.logarithmic;
  const std::optional<InBody> in = body && scaled ? in_body(l.unit, *body, true) : std::nullopt;
  const plot::Interval r = shown_range(l);
  return json::object({{"name", json::text(l.name)},
                       {"title", json::text(l.title)},
                       {"unit", json::text(unit(l.unit))},
                       {"bodyUnit", json::text(in ? in->unit : "")},
                       {"log", json::truth(l.logarithmic)},
                       {"low", json::number(r.low, 9)},
                       {"high", json::number(r.high, 9)},
                       {"colours", colours_json(l.logarithmic ? ColourMap::Cool : ColourMap::Warm)},
                       {"marks", marks(l, in)},
                       {"images", images(l, rows, columns)}});
}

std::string shape_word(Shape s) {
  if (s == Shape::Box) return "box";
  return s == Shape::AxisymmetricShell ? "axisymmetric" : "annulus";
}

std::string geometry_json(const Shell& shell, const Grid& grid, int factor) {
  const Geometry g(shell, grid);
  std::vector<double> radii, laterals;
  for (int i = 0; i <= grid.radial; ++i) radii.push_back(g.face_radius(i));
  for (int j = 0; j <= grid.lateral; ++j) laterals.push_back(g.face_lateral(j));
  return json::object({{"shape", json::text(shape_word(shell.shape))},
                       {"full", json::truth(shell.sides == Sides::Periodic && !g.box())},
                       {"radii", json::numbers(every_face(radii, factor), 8)},
                       {"laterals", json::numbers(every_face(laterals, factor), 8)}});
}

/// null: one geometry is that of all frames.
std::string geometries_json(const std::vector<std::string>& geometries) {
  const bool same = std::all_of(geometries.begin(), geometries.end(),
                                [&](const std::string& g) { return g == geometries.front(); });
  return same ? "null" : json::list(geometries);
}

std::string all_json(const SavedRun& run, const std::vector<std::size_t>& snapshots,
                     const std::vector<std::string>& labels, const ImageBudget& budget) {
  const auto [layers, shells, grid] = read_layers(run, snapshots, budget);
  const int factor = block_factor(grid, budget.pixels);
  const int rows = blocks(grid.radial, factor), columns = blocks(grid.lateral, factor);
  std::vector<std::string> words, layer_texts, geometries;
  for (const Shell& s : shells) geometries.push_back(geometry_json(s, grid, factor));
  std::vector<double> times;
  for (const std::size_t n : snapshots) {
    words.push_back(labels[n]);
    times.push_back(run.snapshots[n].time);
  }
  for (const Layers& l : layers) layer_texts.push_back(layer_json(l, run, rows, columns));
  return json::object({{"labels", json::texts(words)},
                       {"times", json::numbers(times, 17)},
                       {"snapshots", json::indices(snapshots)},
                       {"total", json::number(static_cast<double>(run.snapshots.size()))},
                       {"factor", json::number(factor)},
                       {"geometry", geometries.front()},
                       {"geometries", geometries_json(geometries)},
                       {"layers", json::list(layer_texts)}});
}

}  // namespace

int block_factor(const Grid& g, std::size_t pixels) {
  int factor = 1;
  while (static_cast<std::size_t>(blocks(g.radial, factor)) *
             static_cast<std::size_t>(blocks(g.lateral, factor)) >
         pixels)
    ++factor;
  return factor;
}

std::vector<double> block_means(const std::vector<double>& cells, const Grid& g, int factor) {
  const int rows = blocks(g.radial, factor), columns = blocks(g.lateral, factor);
  std::vector<double> means;
  means.reserve(static_cast<std::size_t>(rows) * static_cast<std::size_t>(columns));
  for (int jb = 0; jb < columns; ++jb)
    for (int ib = 0; ib < rows; ++ib) {
      FiniteMean mean;
      for (int j = jb * factor; j < std::min((jb + 1) * factor, g.lateral); ++j)
        for (int i = ib * factor; i < std::min((ib + 1) * factor, g.radial); ++i)
          mean.add(cells[static_cast<std::size_t>(j * g.radial + i)]);
      means.push_back(mean.value());
    }
  return means;
}

std::vector<double> every_face(const std::vector<double>& faces, int factor) {
  std::vector<double> kept;
  for (std::size_t k = 0; k + 1 < faces.size(); k += static_cast<std::size_t>(factor))
    kept.push_back(faces[k]);
  kept.push_back(faces.back());
  return kept;
}

std::string colours_json(ColourMap map) {
  std::vector<std::string> all;
  for (int k = 0; k < 256; ++k) {
    const Colour c = colour_at(k / 255.0, map);
    const auto byte = [](double x) { return static_cast<int>(std::lround(255 * x)); };
    all.push_back(fmt::format("{}", byte(c.red) << 16 | byte(c.green) << 8 | byte(c.blue)));
  }
  return json::list(all);
}

Frames frames_of(const SavedRun& run, const std::vector<std::string>& labels,
                 const ImageBudget& budget) {
  Frames f;
  std::size_t most = budget.frames;
  do {
    f.snapshots = evenly_chosen(run.snapshots.size(), most);
    f.json = f.snapshots.empty() ? "null" : all_json(run, f.snapshots, labels, budget);
    most = std::max<std::size_t>(1, most * 2 / 3);
  } while (f.json.size() > budget.bytes && f.snapshots.size() > 1);
  return f;
}

}  // namespace lidwright::page
