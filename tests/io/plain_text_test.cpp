#include "io/plain_text.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace lidwright {
namespace {

TEST(PlainText, IsReplacedOnce) {
  EXPECT_EQ(replaced("a-b-c", "-", "--"), "a--b--c");
  EXPECT_EQ(replaced("abc", "x", "y"), "abc");
  EXPECT_EQ(replaced("aa", "a", ""), "");
}

TEST(PlainText, IsANumberOrNone) {
  EXPECT_EQ(number_of("-2.5e3"), -2500);
  EXPECT_TRUE(std::isnan(number_of("nan").value()));
  for (const char* text : {"", " 1", "1 ", "1,5", "one"}) EXPECT_FALSE(number_of(text)) << text;
}

}  // namespace
}  // namespace lidwright
