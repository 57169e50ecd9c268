// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/words/words.hpp"

#include "ui/words/format.hpp"

namespace tw::ui {

QString Words::condition(model::Condition condition) {
  switch (condition) {
    case model::Condition::Fine: return tr("fine");
    case model::Condition::Drifting: return tr("drifting");
    case model::Condition::Tight: return tr("tight");
    case model::Condition::Brink: return tr("brink");
    case model::Condition::Sludging: return tr("sludging");
    case model::Condition::Stale: return tr("stale");
  }
  return {};
}

std::optional<model::Condition> Words::conditionOf(const io::wire::TankView& tank) {
  return tank.condition.empty() ? std::nullopt : model::condition(tank.condition);
}

QString Words::conditionText(const io::wire::TankView& tank) {
  if (!tank.inService) return tr("out of service");
  const auto word = conditionOf(tank);
  if (!word) return tr("no result yet");
  //: the condition is doubtful
  return tank.doubtful ? tr("%1 ?").arg(condition(*word)) : condition(*word);
}

QString Words::marginTitle(const std::string& id, const std::string& ligand) {
  if (id == "ph_up") return tr("pH may rise by");
  if (id == "ph_down") return tr("pH may fall by");
  if (id == "ligand_loss") return tr("%1 that may be lost").arg(substance(ligand));
  if (id == "metal_gain") return tr("metal that may come in");
  if (id == "warming") return tr("bath may warm by");
  if (id == "cooling") return tr("bath may cool by");
  if (id == "dilution") return tr("bath may be diluted");
  return QString::fromStdString(id);
}

QString Words::marginShort(const std::string& id, const std::string& ligand) {
  if (id == "ph_up") return tr("pH room up");
  if (id == "ph_down") return tr("pH room down");
  if (id == "ligand_loss") return tr("%1 reserve").arg(substance(ligand));
  if (id == "metal_gain") return tr("metal room");
  if (id == "warming") return tr("warming room");
  if (id == "cooling") return tr("cooling room");
  if (id == "dilution") return tr("dilution room");
  return QString::fromStdString(id);
}

bool Words::marginIsFraction(const std::string& id) { return id == "ligand_loss" || id == "metal_gain"; }

QString Words::substance(const std::string& formula) {
  const std::string bare = formula.substr(0, formula.find('^'));
  if (bare.empty()) return tr("ligand");
  if (bare == "NH3") return tr("ammonia");
  if (bare == "citrate") return tr("citrate");
  if (bare == "tartrate") return tr("tartrate");
  if (bare == "lactate") return tr("lactate");
  if (bare == "glycolate") return tr("glycolate");
  if (bare == "CN") return tr("cyanide");
  if (bare == "P2O7") return tr("pyrophosphate");
  if (bare == "OH") return tr("caustic");
  if (bare == "SO3") return tr("sulfite");
  if (bare == "S2O3") return tr("thiosulfate");
  if (bare == "Cu") return tr("copper");
  if (bare == "Ni") return tr("nickel");
  if (bare == "Zn") return tr("zinc");
  if (bare == "Ag") return tr("silver");
  if (bare == "Sn") return tr("tin");
  if (bare == "Cd") return tr("cadmium");
  return formulaText(bare);  // a charge says nothing on a button
}

QString Words::channelShort(const std::string& id, const std::string& title) {
  if (id == "ph") return tr("pH");
  if (id == "temperature") return tr("Temperature");
  if (title.empty()) return QString::fromStdString(id);
  return QString::fromStdString(title.substr(0, title.find(',')));
}

QString Words::event(const std::string& code) {
  if (code == "addition") return tr("addition");
  if (code == "dump") return tr("dump and new make-up");
  if (code == "dilution") return tr("dilution");
  if (code == "level") return tr("level noted");
  if (code == "ampere_hours") return tr("ampere-hours");
  if (code == "note") return tr("note");
  if (code == "out_of_service") return tr("out of service");
  if (code == "in_service") return tr("in service");
  return QString::fromStdString(code);
}

QString Words::priority(const std::string& code) {
  if (code == "high") return tr("high");
  if (code == "medium") return tr("medium");
  if (code == "low") return tr("low");
  return QString::fromStdString(code);
}

}  // namespace tw::ui
