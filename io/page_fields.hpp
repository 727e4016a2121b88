#pragma once

#include <cstddef>
#include <string>
#include <vector>

#include "io/colour_map.hpp"
#include "io/run_reader.hpp"

/// The fields of a run for a page: a few snapshots, each a grey image with a pixel a cell (or a
/// block of cells), which the page colours and bends into the shell.
namespace lidwright::page {

/// What the images may cost the page.
struct ImageBudget {
  std::size_t frames = 24;      ///< most snapshots
  std::size_t pixels = 49152;   ///< most of an image: 128 x 384
  std::size_t bytes = 1400000;  ///< of all images together, as base64
};

/// Cells in blocks of `factor` by `factor`, column by column: their faces and the mean of each, of
/// what is finite there; nan: nothing is.
std::vector<double> block_means(const std::vector<double>& cells, const Grid&, int factor);
std::vector<double> every_face(const std::vector<double>& faces, int factor);
/// Least factor for which a grid has at most `pixels` blocks.
int block_factor(const Grid&, std::size_t pixels);

/// Snapshots to show and, for each, what it is called and its number; JSON.
struct Frames {
  std::vector<std::size_t> snapshots;  ///< of run.snapshots
  std::string json;                    ///< null when there is none
};

/// `label`: what stands under the slider at a snapshot. Throws InputError as read_fields does.
Frames frames_of(const SavedRun&, const std::vector<std::string>& labels, const ImageBudget&);

/// The colours of a field as 256 numbers 0xRRGGBB; JSON.
std::string colours_json(ColourMap);

}  // namespace lidwright::page
