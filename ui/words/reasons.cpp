// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/words/reasons.hpp"

#include <algorithm>

#include "ui/words/words.hpp"

namespace tw::ui {
namespace {

using io::wire::ReasonView;
using io::wire::TankView;

std::string ligandOf(const TankView* tank, const std::string& marginId) {
  const io::wire::MarginView* margin = tank != nullptr ? findMargin(*tank, marginId) : nullptr;
  return margin != nullptr ? margin->ligand : std::string{};
}

QString titleOf(const TankView* tank, const std::string& channelId) {
  const io::wire::ChannelView* channel = tank != nullptr ? findChannel(*tank, channelId) : nullptr;
  return QString::fromStdString(channel != nullptr && !channel->title.empty() ? channel->title : channelId);
}

}  // namespace

const io::wire::ChannelView* findChannel(const TankView& tank, const std::string& id) {
  const auto found =
      std::find_if(tank.channels.begin(), tank.channels.end(), [&](const auto& c) { return c.id == id; });
  return found == tank.channels.end() ? nullptr : &*found;
}

const io::wire::MarginView* findMargin(const TankView& tank, const std::string& id) {
  const auto found =
      std::find_if(tank.margins.begin(), tank.margins.end(), [&](const auto& m) { return m.id == id; });
  return found == tank.margins.end() ? nullptr : &*found;
}

const io::wire::MarginView* nearestMargin(const TankView& tank) {
  const io::wire::MarginView* nearest = nullptr;
  double smallest = 0.0;
  for (const io::wire::MarginView& margin : tank.margins) {
    if (!margin.limit || margin.limit->caution <= 0.0) continue;
    const double room = margin.judged / margin.limit->caution;
    if (nearest == nullptr || room < smallest) {
      nearest = &margin;
      smallest = room;
    }
  }
  return nearest;
}

QString Reasons::marginNumber(const std::string& id, double judged) const {
  if (Words::marginIsFraction(id)) return m_format.percent(judged);
  if (id == "ph_up" || id == "ph_down") return m_format.fixed(judged, 2) + QStringLiteral("\u00A0pH");
  if (id == "warming" || id == "cooling") return m_format.fixed(judged, 1) + QStringLiteral("\u00A0K");
  if (id == "dilution") return tr("%1 times").arg(m_format.number(judged));
  return m_format.number(judged);
}

QString Reasons::margin(const ReasonView& reason, const std::string& ligand) const {
  const QString name = Words::marginShort(reason.subject, ligand);
  if (!reason.value) return name;
  const QString value = marginNumber(reason.subject, *reason.value);
  if (!reason.limit) return tr("%1: %2").arg(name, value);
  const QString limit = marginNumber(reason.subject, *reason.limit);
  if (reason.word == "brink") return tr("%1: only %2 left, act limit %3").arg(name, value, limit);
  return tr("%1: only %2 left, caution limit %3").arg(name, value, limit);
}

QString Reasons::outside(const ReasonView& reason, const TankView* tank, bool guard) const {
  const io::wire::ChannelView* channel = tank != nullptr ? findChannel(*tank, reason.subject) : nullptr;
  const QString name = titleOf(tank, reason.subject);
  const std::string unit = channel != nullptr ? channel->unit : std::string{};
  if (!reason.value) return tr("%1 outside its limits").arg(name);
  const QString value = m_format.quantity(reason.value, unit);
  if (!guard && channel != nullptr) {
    const QString low = m_format.number(channel->low);
    const QString high = m_format.quantity(channel->high, unit);
    return *reason.value < channel->low ? tr("%1 %2, below its window %3\u2013%4").arg(name, value, low, high)
                                        : tr("%1 %2, above its window %3\u2013%4").arg(name, value, low, high);
  }
  if (!reason.limit) return tr("%1: %2").arg(name, value);
  const QString limit = m_format.quantity(reason.limit, unit);
  if (reason.word == "brink") return tr("%1 %2, past its act limit %3").arg(name, value, limit);
  return tr("%1 %2, past its caution limit %3").arg(name, value, limit);
}

QString Reasons::staleSentence(const std::string& subject, const TankView* tank) const {
  const io::wire::ChannelView* channel = tank != nullptr ? findChannel(*tank, subject) : nullptr;
  const QString name = titleOf(tank, subject);
  if (subject.empty()) return tr("a reading is too old or missing");
  if (channel == nullptr || channel->sampledAt.empty()) return tr("%1 never measured").arg(name);
  return tr("%1 older than %2").arg(name, m_format.span(channel->maxAge_h));
}

QString Reasons::sentence(const ReasonView& reason, const TankView& tank) const {
  if (reason.code == "margin") return margin(reason, ligandOf(&tank, reason.subject));
  if (reason.code == "guard") return outside(reason, &tank, true);
  if (reason.code == "window") return outside(reason, &tank, false);
  if (reason.code == "solid") return tr("%1 past its sludge line").arg(formulaText(reason.subject));
  if (reason.code == "stale") return staleSentence(reason.subject, &tank);
  if (reason.code == "link") return tr("nothing heard from %1").arg(QString::fromStdString(reason.subject));
  if (reason.code == "unreliable") return warning(reason.subject);
  if (reason.code == "forecast") {
    const QString name = Words::marginShort(reason.subject, ligandOf(&tank, reason.subject));
    if (!reason.hours) return tr("%1 falling").arg(name);
    return tr("%1 falling, %2 to the caution limit").arg(name, m_format.span(*reason.hours));
  }
  return QString::fromStdString(reason.code + ": " + reason.subject);
}

QString Reasons::headline(const TankView& tank, const QDateTime& now) const {
  if (!tank.inService) return tr("not watched while out of service");
  if (tank.condition.empty()) return tr("waiting for a first complete set of readings");
  if (tank.condition == "stale") {
    return tr("no complete reading since %1").arg(m_format.clock(instant(tank.sampledAt), now));
  }
  if (!tank.reasons.empty()) return sentence(tank.reasons.front(), tank);
  const io::wire::MarginView* nearest = nearestMargin(tank);
  if (nearest == nullptr) return tr("every value inside its window");
  return tr("%1 %2, caution limit %3")
      .arg(Words::marginShort(nearest->id, nearest->ligand), marginNumber(nearest->id, nearest->judged),
           marginNumber(nearest->id, nearest->limit->caution));
}

QString Reasons::alarm(const io::wire::AlarmView& alarm, const TankView* tank) const {
  const ReasonView reason{alarm.kind, alarm.subject, alarm.word, alarm.value, alarm.limit, std::nullopt};
  if (alarm.kind == "margin") return margin(reason, ligandOf(tank, alarm.subject));
  if (alarm.kind == "guard") return outside(reason, tank, true);
  if (alarm.kind == "window") return outside(reason, tank, false);
  if (alarm.kind == "solid") return tr("%1 past its sludge line").arg(formulaText(alarm.subject));
  if (alarm.kind == "stale") return staleSentence(alarm.subject, tank);
  if (alarm.kind == "link") return tr("nothing heard from %1").arg(QString::fromStdString(alarm.subject));
  return QString::fromStdString(alarm.kind + ": " + alarm.subject);
}

QString Reasons::toDo(const io::wire::AlarmView& alarm, const TankView* tank) const {
  if (alarm.kind == "stale") return tr("Sample the bath and titrate %1.").arg(titleOf(tank, alarm.subject));
  if (alarm.kind == "link") return tr("Look at cable, power and port of the instrument.");
  if (alarm.kind == "window" || alarm.kind == "guard") {
    return tr("Repeat the analysis of %1; correct the bath by the shop's procedure if it is confirmed.")
        .arg(titleOf(tank, alarm.subject));
  }
  if (alarm.kind == "solid") {
    return tr("Stop additions of metal and anything that moves pH away; look for haze; call the supervisor.");
  }
  if (alarm.subject == "ligand_loss") {
    return tr("Titrate %1 again; add it by the shop's procedure if it is confirmed.")
        .arg(Words::substance(ligandOf(tank, alarm.subject)));
  }
  if (alarm.subject == "ph_up") return tr("Read pH again with a checked meter; nothing alkaline into the bath.");
  if (alarm.subject == "ph_down") return tr("Read pH again with a checked meter; nothing acid into the bath.");
  if (alarm.subject == "metal_gain") return tr("Titrate the metal again; no metal salt into the bath.");
  if (alarm.subject == "warming") return tr("Look at heater and thermometer; let the bath cool.");
  if (alarm.subject == "cooling") return tr("Look at heater and thermometer; warm the bath.");
  if (alarm.subject == "dilution") return tr("Look at level and rinse water; add no water.");
  return tr("Repeat the analysis and call the supervisor.");
}

QString Reasons::warning(const std::string& code) const {
  const std::string head = code.substr(0, code.find(':'));
  const QString subject =
      head.size() < code.size() ? formulaText(code.substr(head.size() + 1)) : QString();
  if (head == "activity_model_out_of_range") return tr("liquor stronger than the activity model covers");
  if (head == "interaction_missing") return tr("no interaction coefficient for %1").arg(subject);
  if (head == "no_enthalpy_far") return tr("constant of %1 not known at this temperature").arg(subject);
  if (head == "implausible") return tr("%1 is implausible").arg(subject);
  if (head == "no_sigma") return tr("uncertainty of %1 not known").arg(subject);
  return QString::fromStdString(code);
}

}  // namespace tw::ui
