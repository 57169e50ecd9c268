// SPDX-License-Identifier: GPL-3.0-or-later
#include "monitor/cli/liquor_text.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <iterator>

namespace tw::monitor::cli {
namespace {

using Page = std::back_insert_iterator<std::string>;

struct MarginWords {
  const char* label;
  const char* unit;
};
constexpr std::array<MarginWords, model::kMarginCount> kMarginWords{{{"pH may rise by", ""},
                                                                     {"pH may fall by", ""},
                                                                     {"ligand may be lost", "mol/L"},
                                                                     {"metal may be added", "mol/L"},
                                                                     {"may warm by", "K"},
                                                                     {"may cool by", "K"},
                                                                     {"may be diluted", "times"}}};

bool isOff(const model::ChemicalSystem& system, model::MarginKind kind) {
  return std::find(system.marginsOff.begin(), system.marginsOff.end(), kind) != system.marginsOff.end();
}

void marginLine(Page out, const io::Recipe& recipe, const model::LiquorReport& report, std::size_t index) {
  const auto kind = static_cast<model::MarginKind>(index);
  if (isOff(recipe.system, kind)) return;
  const MarginWords& words = kMarginWords[index];
  const auto& margin = report.margin(kind).smallest;
  if (!margin) {
    fmt::format_to(out, "  {:<20} no line in range\n", words.label);
    return;
  }
  const std::string ligand = margin->ligand.empty() ? "" : " of " + margin->ligand;
  const char* gap = *words.unit == '\0' ? "" : " ";
  fmt::format_to(out, "  {:<20} {:.3g}{}{}{}", words.label, margin->value, gap, words.unit, ligand);
  if (margin->fraction) fmt::format_to(out, " ({:.0f} % of the total)", *margin->fraction * 100.0);
  fmt::format_to(out, ", then {}", margin->solid);
  if (const auto& limit = recipe.limits[index]) {
    const double scale = margin->fraction ? 100.0 : 1.0;
    fmt::format_to(out, "; caution {:g}, act {:g}{}", limit->caution * scale, limit->act * scale,
                   margin->fraction ? " %" : "");
  }
  fmt::format_to(out, "\n");
}

void findingLine(Page out, const model::Finding& finding) {
  fmt::format_to(out, "  {}: {} {} at {:.3g}, limit {:.3g}\n", model::name(finding.condition), finding.code,
                 finding.subject, finding.value, finding.limit);
}

/// Species that hold a twentieth or more of the main metal are worth a line; the others are in --json.
constexpr double kWorthShowing = 0.05;

void metalSpecies(Page out, const io::Recipe& recipe, const model::LiquorReport& report) {
  const double total = report.totals_mol_L[recipe.system.metal].second;
  if (!(total > 0.0)) return;
  fmt::format_to(out, "Where the {} is\n", recipe.metal);
  for (const model::Species& species : recipe.system.species) {
    const auto term =
        std::find_if(species.formation.terms.begin(), species.formation.terms.end(),
                     [&](const model::ComponentTerm& t) { return t.component == recipe.system.metal; });
    if (term == species.formation.terms.end()) continue;
    const auto amount = std::find_if(report.species.begin(), report.species.end(),
                                     [&](const auto& s) { return s.formula == species.formula; });
    if (amount == report.species.end()) continue;
    const double share = term->nu * amount->mol_L / total;
    if (share >= kWorthShowing) fmt::format_to(out, "  {:<20} {:.1f} %\n", species.formula, share * 100.0);
  }
}

}  // namespace

std::string liquorText(const io::Recipe& recipe, const model::LiquorReport& report,
                       const model::Judgement& judgement, const std::vector<std::string>& extraWarnings) {
  std::string page;
  const Page out(page);
  fmt::format_to(out, "{}: {}{}\n", recipe.title, model::name(judgement.condition),
                 judgement.doubtful ? " (doubtful)" : "");
  for (const model::Finding& finding : judgement.findings) findingLine(out, finding);
  fmt::format_to(out, "Margins before the first sludge\n");
  for (std::size_t i = 0; i < model::kMarginCount; ++i) marginLine(out, recipe, report, i);
  fmt::format_to(out, "Liquor at {:.1f} degC, pH {:.2f}, ionic strength {:.2f} mol/L\n", report.temperature_C,
                 report.ph, report.ionicStrength_mol_L);
  if (report.phMeasured) {
    fmt::format_to(out, "  pH {:.2f} was read at {:.1f} degC\n", *report.phMeasured,
                   report.phMeasuredAt_C.value_or(report.temperature_C));
  }
  if (report.pM) fmt::format_to(out, "  pM of {} {:.2f}\n", recipe.metal, *report.pM);
  for (const model::SolidState& solid : report.solids) {
    fmt::format_to(out, "  {:<20} ", solid.id);
    if (solid.lgSaturation) {
      fmt::format_to(out, "lg saturation {:+.2f} (line at {:+.2f})\n", *solid.lgSaturation, solid.threshold);
    } else {
      fmt::format_to(out, "a part of it is absent\n");
    }
  }
  metalSpecies(out, recipe, report);
  for (const std::string& warning : extraWarnings) fmt::format_to(out, "warning {}\n", warning);
  for (const std::string& warning : report.warnings) fmt::format_to(out, "warning {}\n", warning);
  if (recipe.confidence == "calibrate") {
    fmt::format_to(out, "The deciding constant of this recipe is uncertain: fit a jar test before relying on it.\n");
  }
  if (!recipe.unreliableBecause.empty()) fmt::format_to(out, "Not reliable: {}\n", recipe.unreliableBecause);
  return page;
}

}  // namespace tw::monitor::cli
