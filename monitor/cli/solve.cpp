// SPDX-License-Identifier: GPL-3.0-or-later
// `tankward solve` and `tankward sweep`: a recipe and one typed liquor, no store.
#include <ostream>

#include "io/wire/solve_json.hpp"
#include "model/analysis.hpp"
#include "model/condition.hpp"
#include "monitor/cli/commands.hpp"
#include "monitor/cli/liquor_text.hpp"
#include "monitor/cli/reading_argument.hpp"

namespace tw::monitor::cli {
namespace {

struct Prepared {
  io::Recipe recipe;
  TypedLiquor typed;
  model::LiquorInput input;
};

model::Result<Prepared, model::Faults> prepare(const SolveOptions& options) {
  auto recipe = io::loadRecipe(options.recipe, options.constants);
  if (!recipe) return model::fail(recipe.error());
  auto typed = parseReading(*recipe, options.reading);
  if (!typed) return model::fail(typed.error());
  auto input = io::liquorInput(*recipe, typed->values);
  if (!input) return model::fail(input.error());
  return Prepared{std::move(*recipe), std::move(*typed), std::move(*input)};
}

model::Fault wrongOver(const std::string& over, const std::string& why) {
  return {"sweep_over_unknown", over, why, "", model::FaultKind::Usage};
}

/// `ligand` alone means the recipe's first; `ligand:NAME` one of its ligands, OH^- included.
model::Result<model::SweepRequest> ligandRequest(const io::Recipe& recipe, const std::string& name) {
  model::SweepRequest request;
  request.over = model::SweepOver::Ligand;
  const model::ChemicalSystem& system = recipe.system;
  for (const model::ComponentIndex index : system.ligands) {
    if (name.empty() || system.components[index].formula == name) {
      request.ligand = index;
      return request;
    }
  }
  if (system.hydroxideIsLigand && (name.empty() || name == model::kHydroxide)) return request;
  return model::fail(wrongOver("ligand:" + name, "the recipe has no such ligand"));
}

model::Result<model::SweepRequest> sweepRequest(const io::Recipe& recipe, const SweepOptions& options) {
  model::SweepRequest request;
  if (options.over == "ph") {
    request.over = model::SweepOver::Ph;
  } else if (options.over == "temperature") {
    request.over = model::SweepOver::Temperature;
  } else if (options.over == "metal") {
    request.over = model::SweepOver::Metal;
  } else if (options.over == "dilution") {
    request.over = model::SweepOver::Dilution;
  } else if (options.over == "ligand" || options.over.rfind("ligand:", 0) == 0) {
    auto ligand = ligandRequest(recipe, options.over == "ligand" ? "" : options.over.substr(7));
    if (!ligand) return ligand;
    request = *ligand;
  } else {
    return model::fail(wrongOver(options.over, "expected ph, temperature, ligand[:NAME], metal or dilution"));
  }
  request.from = options.from;
  request.to = options.to;
  request.points = options.steps;
  return request;
}

}  // namespace

int solve(const SolveOptions& options, Streams& streams) {
  auto prepared = prepare(options);
  if (!prepared) return report(streams, prepared.error());
  auto liquor = model::analyse(prepared->recipe.system, prepared->input);
  if (!liquor) return report(streams, liquor.error());
  const io::Recipe& recipe = prepared->recipe;
  const model::Judgement judgement =
      model::judge(recipe.system, *liquor, recipe.limits, io::guardValues(recipe, prepared->typed.values));
  if (options.json) {
    streams.out << io::wire::solveJson(recipe, *liquor, judgement, prepared->typed.warnings) << "\n";
  } else {
    streams.out << liquorText(recipe, *liquor, judgement, prepared->typed.warnings);
  }
  return 0;
}

int sweep(const SweepOptions& options, Streams& streams) {
  auto prepared = prepare(options.solve);
  if (!prepared) return report(streams, prepared.error());
  auto request = sweepRequest(prepared->recipe, options);
  if (!request) return report(streams, request.error());
  auto points = model::sweep(prepared->recipe.system, prepared->input, *request);
  if (!points) return report(streams, points.error());
  streams.out << (options.solve.json ? io::wire::sweepJson(prepared->recipe.system, *points) + "\n"
                                     : io::wire::sweepCsv(prepared->recipe.system, *points));
  return 0;
}

}  // namespace tw::monitor::cli
