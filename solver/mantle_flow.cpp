#include "solver/mantle_flow.hpp"

#include "solver/measure.hpp"

namespace lidwright {

MantleFlow::MantleFlow(std::shared_ptr<const Decomposition> d, const Model& model,
                       const FlowSettings& settings)
    : creep_(model.viscosity), dislocation_(model.dislocation), yielding_(model.yielding) {
  if (!model.nonlinear()) {
    linear_ = std::make_unique<FlowSolver>(d, model.walls, settings);
    return;
  }
  nonlinear_ = std::make_unique<NonlinearFlow>(d, model.walls, settings);
  pressure_ = lithostatic_pressure(d->geometry(), model.reference);
  if (yielding_)
    for (double& p : pressure_) p *= yielding_->lithostatic;
}

std::vector<LocalFlowLaw> MantleFlow::laws(const CellField& t) const {
  const Geometry& g = t.decomposition().geometry();
  std::vector<LocalFlowLaw> all;
  all.reserve(t.values().size());
  for (int j = t.held().begin; j < t.held().end; ++j)
    for (int i = 0; i < t.rows(); ++i) {
      const double yield_stress = yielding_
                                      ? yielding_->stress(pressure_[static_cast<std::size_t>(i)])
                                      : LocalFlowLaw::none;
      all.push_back(local_flow_law(creep_, dislocation_ ? &*dislocation_ : nullptr,
                                   yielding_ ? &*yielding_ : nullptr, {t[{i, j}], g.depth(i)},
                                   yield_stress));
    }
  return all;
}

FlowReport MantleFlow::solve(const CellField& temperature, const RadialFaceField& b,
                             CornerField& psi) {
  last_ = linear_ ? linear_->solve(viscosity_of(creep_, temperature), b, psi)
                  : nonlinear_->solve(laws(temperature), b, psi);
  fixed_point_steps_ += last_.fixed_point_steps;
  return last_;
}

const Power& MantleFlow::power() const { return linear_ ? linear_->power() : nonlinear_->power(); }
const Factor& MantleFlow::factor() const {
  return linear_ ? linear_->factor() : nonlinear_->factor();
}
long MantleFlow::applications() const {
  return linear_ ? linear_->applications() : nonlinear_->applications();
}
long MantleFlow::factorisations() const {
  return linear_ ? linear_->factorisations() : nonlinear_->factorisations();
}

void MantleFlow::save(Archive& archive) const {
  linear_ ? linear_->save(archive) : nonlinear_->save(archive);
  archive.numbers["flow.newton_steps"] = last_.newton_steps;
  archive.numbers["flow.fixed_point_steps"] = static_cast<double>(fixed_point_steps_);
  archive.numbers["flow.yielding_share"] = last_.yielding_share;
  archive.numbers["flow.error"] = last_.error;
}

void MantleFlow::restore(const Archive& archive) {
  linear_ ? linear_->restore(archive) : nonlinear_->restore(archive);
  last_.newton_steps = static_cast<int>(archive.numbers.at("flow.newton_steps"));
  fixed_point_steps_ = static_cast<long>(archive.numbers.at("flow.fixed_point_steps"));
  last_.yielding_share = archive.numbers.at("flow.yielding_share");
  last_.error = archive.numbers.at("flow.error");
}

}  // namespace lidwright
