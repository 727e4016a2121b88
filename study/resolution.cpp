#include "study/resolution.hpp"

#include <algorithm>
#include <cmath>

namespace lidwright {
namespace {

bool enough_on(const HeatBalance& b, const Shell& shell, const Grid& grid) {
  return enough(layers_on_grid(b, Geometry(shell, grid)));
}

Grid refined(Grid grid, double at_walls, double cells) {
  grid.radial_grading.first = std::max(grid.radial_grading.first, at_walls);
  grid.radial_grading.last = std::max(grid.radial_grading.last, at_walls);
  if (cells == 1) return grid;
  grid.radial = static_cast<int>(std::lround(grid.radial * cells / 4)) * 4;
  grid.lateral = static_cast<int>(std::lround(grid.lateral * cells / 4)) * 4;
  return grid;
}

/// Takes a refinement back where the layers need none.
void relax(const HeatBalance& b, const Model& m, Grid& grid) {
  for (double Grading::*wall : {&Grading::first, &Grading::last}) {
    Grid plain = grid;
    plain.radial_grading.*wall = m.grid.radial_grading.*wall;
    if (enough_on(b, m.shell, plain)) grid = plain;
  }
}

}  // namespace

const char* word(LayerPlace place) {
  switch (place) {
    case LayerPlace::Surface:
      return "below the surface";
    case LayerPlace::BelowLid:
      return "below the lid";
    case LayerPlace::InnerWall:
      return "at the inner wall";
  }
  return "";
}

bool enough(const std::vector<LayerOnGrid>& layers) {
  return std::all_of(layers.begin(), layers.end(),
                     [](const LayerOnGrid& l) { return l.cells >= enough_cells; });
}

std::vector<LayerOnGrid> layers_on_grid(const HeatBalance& b, const Geometry& g) {
  std::vector<LayerOnGrid> layers;
  if (b.outer_layer > 0)
    layers.push_back({b.lid > 0 ? LayerPlace::BelowLid : LayerPlace::Surface, b.outer_layer,
                      cells_within(g, b.lid + b.outer_layer, true) - cells_within(g, b.lid, true)});
  if (b.inner_layer > 0)
    layers.push_back({LayerPlace::InnerWall, b.inner_layer, cells_within(g, b.inner_layer, false)});
  return layers;
}

std::optional<Grid> finer_grid(const HeatBalance& b, const Model& m) {
  if (enough_on(b, m.shell, m.grid)) return std::nullopt;
  for (const double cells : {1.0, 1.25, 1.5, 2.0, 3.0, 4.0, 6.0, most_cells})
    for (double at_walls = 1; at_walls <= most_refinement; at_walls += 0.5) {
      Grid grid = refined(m.grid, at_walls, cells);
      if (!enough_on(b, m.shell, grid)) continue;
      relax(b, m, grid);
      return grid;
    }
  return std::nullopt;
}

}  // namespace lidwright
