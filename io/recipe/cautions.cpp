// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/cautions.hpp"

#include <algorithm>

namespace tw::io {

const std::vector<Caution>& cautions() {
  static const std::vector<Caution> table = {
      {"ammonia", "Ammonia",
       "Gives off ammonia gas, the more so warm or above pH 9. Extraction on, goggles and gloves; no "
       "hypochlorite anywhere near."},
      {"cyanide", "Cyanide",
       "Deadly if swallowed or breathed; any acid, acid salt or ammonium salt sets hydrogen cyanide free. "
       "Never alone, never below pH 11, gas alarm working, site medical plan at hand."},
      {"caustic", "Caustic",
       "Burns skin and eyes and heats as it dissolves. Face shield; caustic into water in small lots, never "
       "the reverse; let it cool between lots."},
      {"acid", "Acid",
       "Burns and splashes; foams with carbonate. Face shield; acid into water, never the reverse; keep it "
       "away from cyanide, sulfite and hypochlorite."},
      {"formaldehyde", "Formaldehyde",
       "Irritates, sensitises and can cause cancer. Extraction on, gloves and goggles; keep it away from "
       "strong acid."},
      {"nickel", "Nickel salts",
       "Sensitises skin and airways for life and can cause cancer as dust or mist. No dust, no bare skin; "
       "wash before eating."},
      {"cadmium", "Cadmium",
       "Harms kidneys and lungs and can cause cancer. No dust, no mist, no food nearby; the site's medical "
       "checks apply."},
      {"oxidiser", "Oxidiser",
       "Reacts hard with cyanide, ammonia, reducers and anything organic. Dilute first, add slowly, store "
       "apart."},
      {"hypophosphite", "Hypophosphite",
       "A reducer: a large or hot dose can run away with hydrogen. Small steps into a moving bath below its "
       "dosing temperature; no ignition source."},
      {"hot", "Hot liquor",
       "Scalds, mists and boils up when water or solids go in fast. Let it cool as the procedure says, add "
       "slowly, keep freeboard."},
      {"ventilation", "Ventilation",
       "Prove that extraction runs before heating or dosing; stop when it fails."},
      {"barium-fluoride", "Barium and fluoride",
       "Barium salts and fluorides poison when swallowed or breathed; fluoride with acid gives hydrogen "
       "fluoride. Gloves, no dust; keep the spent flask apart."},
      {"silver-ammonia", "Silver with ammonia",
       "Ammoniacal silver left to stand or dry can form an explosive. Never store it; make it harmless the "
       "same day by the site's procedure."},
      {"electrical", "Electrical",
       "Rectifier off or isolated before reaching in; no metal vessel over a live bar; mind the wet floor."},
  };
  return table;
}

const Caution* findCaution(const std::string& key) {
  const auto& table = cautions();
  const auto found = std::find_if(table.begin(), table.end(), [&](const Caution& c) { return c.key == key; });
  return found == table.end() ? nullptr : &*found;
}

std::vector<std::string> cautionKeys() {
  std::vector<std::string> keys;
  for (const Caution& caution : cautions()) keys.push_back(caution.key);
  return keys;
}

const std::string& cautionFooter() {
  static const std::string text =
      "Reminders only. Local codes and permits, the supplier's safety data sheet, and trained and licensed "
      "practice on site decide.";
  return text;
}

const std::vector<std::string>& stockKinds() {
  static const std::vector<std::string> kinds = {"acid",    "base",    "oxidiser", "ammonium",
                                                 "cyanide", "reducer", "salt",     "water"};
  return kinds;
}

const std::vector<KindRule>& kindRules() {
  using enum KindVerdict;
  static const std::vector<KindRule> rules = {
      {"acid", "cyanide", Refuse, "Acid sets hydrogen cyanide free from a cyanide bath."},
      {"ammonium", "cyanide", Refuse,
       "Ammonium salts lower the pH of a cyanide bath and set hydrogen cyanide free."},
      {"oxidiser", "cyanide", Refuse, "Oxidisers attack cyanide with heat and can give cyanogen chloride."},
      {"cyanide", "acid", Refuse, "Cyanide in an acid bath becomes hydrogen cyanide at once."},
      {"oxidiser", "ammonia", Refuse, "Strong oxidisers and ammonia form chloramines and worse."},
      {"oxidiser", "silver-ammonia", Refuse, "Strong oxidisers and ammoniacal silver can explode."},
      {"oxidiser", "formaldehyde", Refuse, "Oxidisers react hard with formaldehyde in a working bath."},
      {"oxidiser", "hypophosphite", Refuse, "Oxidisers react hard with hypophosphite in a working bath."},
      {"reducer", "oxidiser", Refuse, "A reducer meets an oxidiser with heat and gas."},
      {"ammonium", "caustic", Refuse, "Ammonium salts in caustic drive ammonia gas out."},
      {"base", "ammonia", Caution, "A higher pH drives ammonia gas out: extraction on, small steps."},
      {"ammonium", "ammonia", Caution, "More ammonia over the bath: extraction on, small steps."},
      {"acid", "caustic", Caution, "Neutralising heats and splashes: small steps, face shield."},
      {"base", "acid", Caution, "Neutralising heats and splashes: small steps, face shield."},
      {"acid", "formaldehyde", Caution, "Strong acid and formaldehyde do not stand together for long."},
      {"base", "formaldehyde", Caution, "Caustic makes formaldehyde heat itself: small steps."},
      {"base", "silver-ammonia", Caution, "Alkaline ammoniacal silver must not stand."},
      {"base", "hot", Caution, "Caustic into hot liquor boils up: cool first, small steps."},
      {"water", "caustic", Caution, "Water on strong hot caustic boils up: add slowly."},
      {"water", "hot", Caution, "Cold water into hot liquor splashes: add slowly."},
      {"reducer", "hypophosphite", Caution,
       "A large dose can start a run-away: no more than a tenth at a time."},
  };
  return rules;
}

std::vector<KindRule> kindRulesFor(const std::vector<std::string>& kinds,
                                   const std::vector<std::string>& hazards) {
  const auto holds = [](const std::vector<std::string>& list, const std::string& word) {
    return std::find(list.begin(), list.end(), word) != list.end();
  };
  std::vector<KindRule> found;
  for (const KindRule& rule : kindRules()) {
    if (holds(kinds, rule.kind) && holds(hazards, rule.hazard)) found.push_back(rule);
  }
  std::stable_partition(found.begin(), found.end(),
                        [](const KindRule& rule) { return rule.verdict == KindVerdict::Refuse; });
  return found;
}

}  // namespace tw::io
