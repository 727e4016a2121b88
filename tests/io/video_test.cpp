#include "io/video.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>

#include "io/atomic_file.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;
using testing::AllOf;
using testing::HasSubstr;

/// A program that stands in for ffmpeg.
std::string stand_in(const test::Scratch& scratch, const std::string& commands) {
  const std::string path = scratch / "join";
  test::write_text(path, "#!/bin/sh\n" + commands);
  fs::permissions(path, fs::perms::owner_all);
  return path;
}

constexpr const char* last_argument = "for last; do :; done\n";

TEST(Video, FindsProgramsOnThePath) {
  EXPECT_THAT(program_on_path("sh"), testing::EndsWith("/sh"));
  EXPECT_EQ(program_on_path("no such program"), "");
}

TEST(Video, IsComplete) {
  const test::Scratch scratch;
  const std::string join =
      stand_in(scratch, std::string(last_argument) + "echo \"$@\" > \"$last\"\n");
  const std::string path =
      write_video({join, scratch / "it's/frame_%04d.png", 7, scratch / "film"});
  EXPECT_EQ(path, scratch / "film.mp4");
  EXPECT_THAT(read_whole_file(path),
              AllOf(HasSubstr("-framerate 7 "), HasSubstr("it's/frame_%04d.png"),
                    HasSubstr("libx264"), HasSubstr("film.mp4.partial")));
  EXPECT_FALSE(fs::exists(path + ".partial"));
}

TEST(Video, IsWebmWhereTheFirstEncoderIsMissing) {
  const test::Scratch scratch;
  const std::string join = stand_in(
      scratch, std::string(last_argument) +
                   "case \"$last\" in *.mp4.partial) exit 1;; esac\necho video > \"$last\"\n");
  EXPECT_EQ(write_video({join, scratch / "f_%04d.png", 7, scratch / "film"}),
            scratch / "film.webm");
}

TEST(Video, ThatFailsLeavesNothingAndSaysWhy) {
  const test::Scratch scratch;
  const std::string join = stand_in(scratch, std::string(last_argument) +
                                                 "echo half > \"$last\"\necho first >&2\necho no "
                                                 "such codec >&2\nexit 1\n");
  EXPECT_THAT(
      test::message_of<OutputError>([&] {
        write_video({join, scratch / "f_%04d.png", 7, scratch / "film"});
      }),
      AllOf(HasSubstr("film.mp4"), HasSubstr("no such codec"), testing::Not(HasSubstr("first"))));
  EXPECT_EQ(test::entries(scratch.path()), 1) << "the stand-in only";
}

TEST(Video, HasASensibleRate) {
  EXPECT_EQ(frame_rate(2), 4);
  EXPECT_EQ(frame_rate(120), 12);
  EXPECT_EQ(frame_rate(5000), 25);
}

}  // namespace
}  // namespace lidwright
