#pragma once

#include <string>

/// Pictures joined to a video by ffmpeg, a program of its own that need not be there.
namespace lidwright {

/// Where a program of that name is on the PATH; empty: nowhere.
std::string program_on_path(const std::string& name);

struct VideoRequest {
  std::string program;  ///< of ffmpeg
  std::string frames;   ///< with its place for the number, as "folder/frame_%04d.png", from 0
  int rate = 12;        ///< pictures a second
  std::string path;     ///< of the video, without its ending
};

/// Writes PATH.mp4 (H.264), or PATH.webm where that encoder is missing, and returns the file's
/// name. It is complete or absent. Throws OutputError with what the program said.
std::string write_video(const VideoRequest&);

/// Pictures a second for a film of that many: neither a slide show nor a flicker.
int frame_rate(std::size_t frames);

}  // namespace lidwright
