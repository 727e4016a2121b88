#pragma once

#include <optional>
#include <vector>

#include "study/prediction.hpp"

/// Do thermal boundary layers that are foreseen fit the grid? Pure.
namespace lidwright {

/// Cells across a thermal boundary layer that heat flow to a few percent takes (common practice, no
/// source).
inline constexpr double enough_cells = 5;

enum class LayerPlace { Surface, BelowLid, InnerWall };
const char* word(LayerPlace);  ///< "below the surface", ...

struct LayerOnGrid {
  LayerPlace place;
  double thickness;  ///< d
  double cells;      ///< across it, in parts of cells
};
std::vector<LayerOnGrid> layers_on_grid(const HeatBalance&, const Geometry&);
/// Has each layer enough cells?
bool enough(const std::vector<LayerOnGrid>&);

/// Refinements that are tried before cells are added; more of it leaves mid-shell coarse.
inline constexpr double most_refinement = 4;
/// Most cells that are tried, over the grid's own, in each direction.
inline constexpr double most_cells = 8;

/// The cheapest grid of some tried ones on which all layers have enough cells: first the walls'
/// refinement is raised, then the number of radial cells, and the lateral ones with it. None when
/// the grid has enough, or none of those tried has.
std::optional<Grid> finer_grid(const HeatBalance&, const Model&);

}  // namespace lidwright
