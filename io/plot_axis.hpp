#pragma once

#include <string>
#include <vector>

/// Ranges, tick marks and their labels: what an axis shows. Pure, nothing is drawn here.
namespace lidwright::plot {

struct Interval {
  double low = 0, high = 0;
  bool empty() const { return !(high > low); }
  /// 0 at the low end, 1 at the high one; in the middle of an empty one.
  double share(double value) const { return empty() ? 0.5 : (value - low) / (high - low); }
  void include(double);
};

/// Interval of finite numbers; {0, 0} when there are none.
Interval range_of(const std::vector<double>&);

enum class Spacing { Linear, Logarithmic };

struct Tick {
  double value;
  std::string label;  ///< Pango markup
};

struct Axis {
  Interval range;
  Spacing spacing = Spacing::Linear;
  std::vector<Tick> ticks;
  std::string power;  ///< markup of the power of ten that labels leave out; often empty

  /// Place of a value along the axis: 0 at the low end, 1 at the high one.
  double place(double value) const;
};

/// Steps of 1, 2 or 5 times a power of ten, at most `most` of them; the range stays as it is.
Axis linear_axis(Interval, int most);
/// Decades, some left out when there are many; the range is widened to whole decades.
Axis logarithmic_axis(Interval, int most);
/// The range stays as it is; marks at 1, 2 and 5 times powers of ten where there is room, else at
/// decades.
Axis logarithmic_axis_within(Interval, int most);
/// With some air at both ends; an empty range becomes a small one around its value.
Interval with_margin(Interval, double share);

/// Is the range above 0 and so wide, highest over lowest more than 10, that powers are counted?
bool spans_decades(const Interval&);
/// The same in the logarithm, of a range above 0.
Interval with_margin_in_logarithm(Interval, double share);
/// An axis of the values in the range with some air; of few decades in a logarithm it has the ticks
/// of a linear one. A range too narrow for its labels becomes wider.
Axis axis_of_values(Interval, Spacing, int most, double air = 0.06);

/// What an axis shows, as markup: "what (unit)", with the power of ten that its labels leave out.
struct Label {
  std::string what;
  std::string unit;  ///< empty for plain numbers
};
std::string written(const Label&, const Axis&);

/// A number to four digits, as markup.
std::string four_digits(double);

/// "10<sup>-3</sup>" with a true minus sign.
std::string power_of_ten(int exponent);

}  // namespace lidwright::plot
