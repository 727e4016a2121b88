#pragma once

#include "solver/archive.hpp"

namespace lidwright {

/// When a new factor pays, in applications of it.
class FactorAge {
 public:
  /// `cost` of a factorisation.
  explicit FactorAge(double cost) : cost_(cost) {}

  void renewed() { *this = FactorAge(cost_); }
  /// A solve took so many applications.
  void used(int applications) {
    last_cost_ = solves_ == 0 ? applications : 0.7 * last_cost_ + 0.3 * applications;
    spent_ += applications;
    ++solves_;
  }
  /// As soon as a solve costs more than the mean cost of a solve since the last factorisation, that
  /// factorisation included: the mean is then at its minimum.
  bool stale() const {
    return solves_ >= 2 && last_cost_ > (cost_ + spent_) / static_cast<double>(solves_);
  }

  void save(Archive& a) const {
    a.numbers["flow.spent"] = spent_;
    a.numbers["flow.last_cost"] = last_cost_;
    a.numbers["flow.solves"] = static_cast<double>(solves_);
  }
  void restore(const Archive& a) {
    spent_ = a.numbers.at("flow.spent");
    last_cost_ = a.numbers.at("flow.last_cost");
    solves_ = static_cast<long>(a.numbers.at("flow.solves"));
  }

 private:
  double cost_, spent_ = 0, last_cost_ = 0;
  long solves_ = 0;
};

}  // namespace lidwright
