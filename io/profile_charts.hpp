#pragma once

#include <vector>

#include "io/number_table.hpp"
#include "io/picture.hpp"
#include "io/plot_chart.hpp"

/// Means at each depth as charts side by side, with one depth axis: of an overview picture and of
/// the figure of profiles.
namespace lidwright {

struct ProfileCurve {
  RadialProfiles profiles;
  Colour colour;
};

/// The shell, its units and the room on the page.
struct ProfileRoom {
  double inner_radius, outer_radius;
  PictureUnits units;
  int across, upright;  ///< most ticks
};

/// Of profiles_NNNN.csv. Throws InputError naming `path` when a column is missing.
RadialProfiles radial_profiles(const NumberTable&, const std::string& path);

bool viscosity_varies(const RadialProfiles&);

/// A chart against depth, without curves.
plot::Chart depth_chart(const ProfileRoom&, const plot::Label&, const plot::Axis&);
/// A curve of it: values as they are shown.
plot::Curve depth_curve(const ProfileRoom&, const ProfileCurve&, std::vector<double> values);

/// Temperature (its axis spans `temperatures`, as they are shown), rms velocity and, where it
/// varies, viscosity. Only the first has labels of depth.
std::vector<plot::Chart> profile_charts(const std::vector<ProfileCurve>&, const ProfileRoom&,
                                        const plot::Interval& temperatures);

}  // namespace lidwright
