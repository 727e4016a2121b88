#pragma once

#include <string>
#include <vector>

#include "app/figure_plan.hpp"
#include "app/progress.hpp"

/// `lidwright figure --film`: every snapshot of one field with one range of colours, and a video.
namespace lidwright {

/// What a film writes, for refuse_existing: INTO/film_temperature/, INTO/film_temperature.mp4.
std::vector<std::string> film_files(const FigurePlan&);

struct Film {
  std::string frames;  ///< folder
  std::size_t count = 0;
  std::string video;  ///< empty: there is no ffmpeg
};

/// On one rank. Throws InputError (a damaged snapshot) and OutputError.
Film make_film(const FigurePlan&, const FigureRequest&, WorkLine&);

}  // namespace lidwright
