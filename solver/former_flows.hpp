#pragma once

#include <deque>
#include <functional>

#include "solver/archive.hpp"

namespace lidwright {

/// The last flows of a march, from which the next one starts.
class FormerFlows {
 public:
  /// force = K psi at owned corners; psi with ghosts.
  using Product = std::function<void(const CornerField& psi, CornerField& force)>;

  /// Keeps so many flows, >= 1.
  FormerFlows(std::shared_ptr<const Decomposition> d, int memory)
      : decomposition_(std::move(d)), memory_(static_cast<std::size_t>(memory)) {}

  /// The combination of former flows that minimises psi . K psi / 2 - f . psi: a Galerkin
  /// projection on their span (after Fischer 1998, Comput. Methods Appl. Mech. Eng. 163, 193), at
  /// one product with K each and no application of the factor. At rest if there is no former flow.
  /// Collective.
  CornerField combine(const Product&, Vec f) const;
  void remember(const CornerField& psi);

  void save(Archive&) const;
  void restore(const Archive&);

 private:
  std::shared_ptr<const Decomposition> decomposition_;
  std::size_t memory_;
  std::deque<CornerField> flows_;  ///< newest first
};

}  // namespace lidwright
