#pragma once

/// Where a number lives on the staggered mesh, as a type: a wrong place does not compile.
///
///     corner(i+1,j) --- radial face(i+1,j) --- corner(i+1,j+1)        i counts outwards (up in the
///     box),
///          |                                        |                 j counts along the lateral
///   lateral face(i,j)        cell(i,j)       lateral face(i,j+1)      coordinate
///          |                                        |
///     corner(i,j) ----- radial face(i,j) ----- corner(i,j+1)
namespace lidwright {

enum class At { Cell, RadialFace, LateralFace, Corner };

template <At>
struct Index {
  int i, j;
};

using Cell = Index<At::Cell>;
using RadialFace = Index<At::RadialFace>;
using LateralFace = Index<At::LateralFace>;
using Corner = Index<At::Corner>;

constexpr RadialFace inner(Cell c) { return {c.i, c.j}; }
constexpr RadialFace outer(Cell c) { return {c.i + 1, c.j}; }
constexpr LateralFace left(Cell c) { return {c.i, c.j}; }
constexpr LateralFace right(Cell c) { return {c.i, c.j + 1}; }

constexpr Corner left(RadialFace f) { return {f.i, f.j}; }
constexpr Corner right(RadialFace f) { return {f.i, f.j + 1}; }
constexpr Corner inner(LateralFace f) { return {f.i, f.j}; }
constexpr Corner outer(LateralFace f) { return {f.i + 1, f.j}; }

/// The cell below (inside) and above (outside) a radial face; left and right of a lateral face.
constexpr Cell inside(RadialFace f) { return {f.i - 1, f.j}; }
constexpr Cell outside(RadialFace f) { return {f.i, f.j}; }
constexpr Cell left(LateralFace f) { return {f.i, f.j - 1}; }
constexpr Cell right(LateralFace f) { return {f.i, f.j}; }

/// Half-open range of lateral indices.
struct Range {
  int begin, end;
  constexpr int size() const { return end - begin; }
};

}  // namespace lidwright
