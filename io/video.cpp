#include "io/video.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <spawn.h>
#include <sys/wait.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <cstdlib>
#include <filesystem>
#include <string_view>
#include <vector>

#include "io/atomic_file.hpp"

extern char** environ;

namespace lidwright {
namespace {

namespace fs = std::filesystem;

/// A way to write a video, best first.
struct Encoder {
  const char *ending, *container;
  std::vector<std::string> options;
};

std::array<Encoder, 2> encoders() {
  return {{{".mp4",
            "mp4",
            {"-c:v", "libx264", "-crf", "18", "-pix_fmt", "yuv420p", "-movflags", "+faststart"}},
           {".webm",
            "webm",
            {"-c:v", "libvpx-vp9", "-crf", "24", "-b:v", "0", "-pix_fmt", "yuv420p"}}}};
}

/// Encoders want even widths and heights; the same frames make the same bytes.
std::vector<std::string> arguments(const VideoRequest& r, const Encoder& e,
                                   const std::string& partial) {
  std::vector<std::string> all{r.program,
                               "-nostdin",
                               "-y",
                               "-loglevel",
                               "error",
                               "-framerate",
                               std::to_string(r.rate),
                               "-i",
                               r.frames,
                               "-vf",
                               "pad=ceil(iw/2)*2:ceil(ih/2)*2:color=white",
                               "-fflags",
                               "+bitexact",
                               "-flags:v",
                               "+bitexact",
                               "-map_metadata",
                               "-1"};
  all.insert(all.end(), e.options.begin(), e.options.end());
  all.insert(all.end(), {"-f", e.container, partial});
  return all;
}

struct Outcome {
  bool done = false;
  std::string said;
};

std::string read_all(int descriptor) {
  std::string text;
  std::array<char, 4096> part{};
  for (;;) {
    const ssize_t n = ::read(descriptor, part.data(), part.size());
    if (n < 0 && errno == EINTR) continue;
    if (n <= 0) return text;
    text.append(part.data(), static_cast<std::size_t>(n));
  }
}

/// What the program has on its three standard streams.
class Streams {
 public:
  explicit Streams(int errors) {
    posix_spawn_file_actions_init(&actions_);
    posix_spawn_file_actions_addopen(&actions_, 0, "/dev/null", O_RDONLY, 0);
    posix_spawn_file_actions_addopen(&actions_, 1, "/dev/null", O_WRONLY, 0);
    posix_spawn_file_actions_adddup2(&actions_, errors, 2);
  }
  Streams(const Streams&) = delete;
  Streams& operator=(const Streams&) = delete;
  ~Streams() { posix_spawn_file_actions_destroy(&actions_); }
  const posix_spawn_file_actions_t* get() const { return &actions_; }

 private:
  posix_spawn_file_actions_t actions_;
};

/// No shell takes part, so that a name may hold any sign.
Outcome run(std::vector<std::string> words) {
  std::vector<char*> argv;
  for (std::string& word : words) argv.push_back(word.data());
  argv.push_back(nullptr);
  std::array<int, 2> ends{};
  if (::pipe2(ends.data(), O_CLOEXEC) != 0) return {false, "no pipe"};
  const Descriptor read_end(ends[0]);
  Descriptor write_end(ends[1]);
  const Streams streams(write_end);
  pid_t child = 0;
  const int failed = posix_spawn(&child, argv[0], streams.get(), nullptr, argv.data(), environ);
  write_end.close();
  if (failed != 0) return {false, std::string(argv[0]) + " cannot be started"};
  Outcome outcome{false, read_all(read_end)};
  int status = 0;
  while (::waitpid(child, &status, 0) < 0 && errno == EINTR) {
  }
  outcome.done = WIFEXITED(status) && WEXITSTATUS(status) == 0;
  return outcome;
}

std::string last_line(std::string text) {
  while (!text.empty() && text.back() == '\n') text.pop_back();
  return text.substr(text.find_last_of('\n') + 1);
}

/// A file name that ffmpeg cannot take for an option or an address.
std::string as_file(const std::string& path) { return fs::absolute(path).string(); }

}  // namespace

std::string program_on_path(const std::string& name) {
  const char* path = std::getenv("PATH");
  std::string_view rest = path ? path : "";
  while (!rest.empty()) {
    const std::size_t end = std::min(rest.find(':'), rest.size());
    const std::string candidate = std::string(rest.substr(0, end)) + "/" + name;
    if (end > 0 && ::access(candidate.c_str(), X_OK) == 0 && fs::is_regular_file(candidate))
      return candidate;
    rest.remove_prefix(std::min(end + 1, rest.size()));
  }
  return {};
}

std::string write_video(const VideoRequest& request) {
  VideoRequest r = request;
  r.frames = as_file(r.frames);
  std::string said;
  for (const Encoder& e : encoders()) {
    const std::string path = r.path + e.ending;
    const std::string partial = as_file(path) + std::string(partial_suffix);
    const Outcome outcome = run(arguments(r, e, partial));
    if (outcome.done && ::rename(partial.c_str(), path.c_str()) == 0) return path;
    ::unlink(partial.c_str());
    if (said.empty()) said = last_line(outcome.said);
  }
  throw OutputError(
      fmt::format("cannot write {}.mp4: ffmpeg failed ({}); the frames are there, join them with "
                  "another program",
                  r.path, said.empty() ? "it did not say why" : said));
}

int frame_rate(std::size_t frames) {
  constexpr std::size_t seconds = 10, slowest = 4, fastest = 25;
  return static_cast<int>(std::clamp(frames / seconds, slowest, fastest));
}

}  // namespace lidwright
