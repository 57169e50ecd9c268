// SPDX-License-Identifier: GPL-3.0-or-later
// The chemical system of one bath: components, species, solids and what fixes each component.
// Plain values, built once from a recipe (io/recipe) and then only read; safe to share between threads.
//
// Formulas are the names of FORMATS ("Cu(NH3)4^2+"). Components are what species are made from; H^+ is
// always one of them. H2O and OH^- never are: a reaction carries their coefficients apart.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

namespace tw::model {

inline constexpr const char* kProton = "H^+";
inline constexpr const char* kHydroxide = "OH^-";
inline constexpr const char* kWater = "H2O";

enum class ActivityModel { Conditional, Davies, Sit };

/// What fixes a component; EQUATIONS.md section 2.
enum class SetBy { Total, Free, Excess, Ph, Hydroxide, ProtonTotal, Fixed, Balance };

/// Index into ChemicalSystem::components.
using ComponentIndex = std::size_t;

struct ComponentTerm {
  ComponentIndex component = 0;
  double nu = 0.0;  ///< stoichiometric coefficient, may be negative
};

struct Component {
  std::string formula;
  int charge = 0;
  double molarMass = 0.0;  ///< g/mol, 0 when unknown
  bool isMetal = false;    ///< the bath's metal, or a second metal (alloy, contamination)
  SetBy setBy = SetBy::Total;
  /// Excess and Hydroxide: value = given - or + sum n_k T_k (mol of this component per mol of metal k).
  std::vector<ComponentTerm> perMetal;
  /// Balance: the ion of the other sign that closes the charge where this one cannot. It may be a
  /// component of its own (its index is then set) or an inert ion known by formula and charge only.
  std::string other;
  int otherCharge = 0;
};

/// An equilibrium constant as its row states it.
struct Constant {
  double lgK = 0.0;
  double sigma = 0.0;         ///< standard uncertainty of lgK; 0 = not stated
  double T_C = 25.0;          ///< degC where it was measured
  double I = 0.0;             ///< mol/L, ionic strength where it was measured
  std::string medium;         ///< "cation|anion" or empty
  std::optional<double> dH_kJ_mol;
  double dCp_J_mol_K = 0.0;
};

/// A formation (species) or dissolution (solid) reaction as written in its row. The product side of a
/// formation is the species itself; of a dissolution the ions. Coefficients count what the species is
/// made FROM, or what the solid GIVES.
struct Reaction {
  std::vector<ComponentTerm> terms;  ///< components, H^+ included; OH^- and H2O apart
  double hydroxide = 0.0;            ///< coefficient of OH^- as written
  double water = 0.0;                ///< coefficient of H2O as written
  Constant K;
};

struct Species {
  std::string formula;
  int charge = 0;
  Reaction formation;
  double setschenow = 0.0;  ///< L/mol, neutral species only
};

enum class SolidRole { Sludge, Aged, Scale };

/// Where a margin turns tight (caution) and brink (act); in the margin's own unit, fraction for
/// ligand_loss and metal_gain.
struct MarginLimit {
  double caution = 0.0;
  double act = 0.0;
};

/// The margins of the contract, in the order of FORMATS.
enum class MarginKind { PhUp, PhDown, LigandLoss, MetalGain, Warming, Cooling, Dilution };
inline constexpr std::size_t kMarginCount = 7;
/// "ph_up", "ph_down", "ligand_loss", "metal_gain", "warming", "cooling", "dilution".
[[nodiscard]] const char* name(MarginKind kind);
[[nodiscard]] std::optional<MarginKind> marginKind(const std::string& name);

struct Solid {
  std::string id;
  double molarMass = 0.0;  ///< g/mol
  Reaction dissolution;
  SolidRole role = SolidRole::Sludge;
  double threshold = 0.0;  ///< lg saturation at which this bath really goes hazy
  /// This solid's own limits; then it is judged by its own margins, not the bath's.
  std::vector<std::pair<MarginKind, MarginLimit>> limits;
  std::optional<MarginLimit> saturationLimit;  ///< scale only: limits of lg_saturation itself
};

struct ChemicalSystem {
  std::vector<Component> components;
  std::vector<Species> species;  ///< all that take part, without the bare components and without OH^-
  std::vector<Solid> solids;     ///< the watched ones
  /// A recipe's own OH^- row replaces the Kw formula, with its own temperature dependence.
  std::optional<Species> ownHydroxide;
  ComponentIndex proton = 0;
  ComponentIndex metal = 0;
  std::vector<ComponentIndex> ligands;  ///< in the recipe's order, OH^- not among them
  bool hydroxideIsLigand = false;       ///< "OH^-" named as a ligand (zincate-like baths)
  ActivityModel activityModel = ActivityModel::Conditional;
  bool waterActivity = false;
  std::optional<double> water_kg_L;
  std::vector<MarginKind> marginsOff;
  /// pH measured on a cooled sample: solve there first, then at bath temperature, closed.
  bool phTakenAtSample = false;
};

}  // namespace tw::model
