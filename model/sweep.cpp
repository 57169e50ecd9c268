// SPDX-License-Identifier: GPL-3.0-or-later
#include <cmath>

#include "model/analysis.hpp"
#include "model/closed_liquor.hpp"
#include "model/physical.hpp"
#include "model/report.hpp"

namespace tw::model {

namespace {

Fault badRange(const std::string& detail) { return {"bad_range", "sweep", detail, "", FaultKind::Usage}; }

std::optional<Fault> check(const ChemicalSystem& system, const SweepRequest& request) {
  if (request.points < 2) return badRange("a sweep has at least 2 points");
  if (!std::isfinite(request.from) || !std::isfinite(request.to))
    return badRange("the range is not a number");
  if (request.ligand && *request.ligand >= system.components.size()) return badRange("no such ligand");
  if (request.over == SweepOver::Temperature) {
    for (const double t_C : {request.from, request.to}) {
      if (auto ok = checkTemperature(t_C, "sweep"); !ok) return ok.error();
    }
  }
  if (request.over == SweepOver::Dilution && (request.from <= 0.0 || request.to <= 0.0)) {
    return badRange("a dilution factor is above 0");
  }
  const bool amount = request.over == SweepOver::Ligand || request.over == SweepOver::Metal;
  if (amount && (request.from < 0.0 || request.to < 0.0)) return badRange("an amount is not negative");
  return std::nullopt;
}

bool moveTo(ClosedLiquor& liquor, const SweepRequest& request, double x, Estimate& estimate) {
  Totals totals = liquor.totals();
  switch (request.over) {
    case SweepOver::Ph:
      return liquor.moveToPh(x, totals, estimate);
    case SweepOver::Temperature:
      return liquor.moveClosed(x, 1.0, estimate);
    case SweepOver::Dilution:
      return liquor.moveClosed(liquor.temperature_C(), x, estimate);
    case SweepOver::Metal:
      totals[liquor.system().metal] = x;
      break;
    case SweepOver::Ligand:
      if (!request.ligand) return liquor.moveToHydroxide(x, totals, estimate);
      totals[*request.ligand] = x;
      break;
  }
  return liquor.moveToPh(liquor.ph(), totals, estimate);
}

/// Share of the main metal in each species that can hold it; zeros where there is no metal.
std::vector<std::pair<std::string, double>> sharesOf(const ClosedLiquor& liquor) {
  const Layout& layout = liquor.layout();
  const std::size_t metal = liquor.system().metal;
  const double total = liquor.now().total(metal);
  std::vector<std::pair<std::string, double>> shares;
  for (std::size_t j = 0; j < layout.species; ++j) {
    const double nu = layout.nuOf(j, metal);
    if (nu <= 0.0) continue;
    shares.emplace_back(layout.formula[j], total > 0.0 ? nu * liquor.now().concentration()[j] / total : 0.0);
  }
  return shares;
}

}  // namespace

Result<std::vector<SweepPoint>> sweep(const ChemicalSystem& system, const LiquorInput& input,
                                      const SweepRequest& request) {
  if (auto fault = check(system, request)) return fail(std::move(*fault));
  Result<std::unique_ptr<ClosedLiquor>> opened = ClosedLiquor::open(system, input);
  if (!opened) return fail(std::move(opened.error()));
  ClosedLiquor& liquor = **opened;
  Estimate estimate = liquor.start();
  std::vector<SweepPoint> points;
  for (int n = 0; n < request.points; ++n) {
    SweepPoint point;
    const double share = static_cast<double>(n) / (request.points - 1);
    point.x = n == request.points - 1 ? request.to : request.from + share * (request.to - request.from);
    if (moveTo(liquor, request, point.x, estimate)) {
      point.liquor = reportOf(liquor);
      LiquorInput here = input;
      here.temperature_C = liquor.constants().t_C;
      addWarnings(system, here, *point.liquor);
      point.shares = sharesOf(liquor);
    }
    points.push_back(std::move(point));
  }
  return points;
}

}  // namespace tw::model
