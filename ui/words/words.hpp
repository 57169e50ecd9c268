// SPDX-License-Identifier: GPL-3.0-or-later
// Single words and short names: what the ids and codes of the wire are called on screen.
#pragma once

#include <QCoreApplication>
#include <QString>
#include <optional>
#include <string>

#include "io/wire/api.hpp"
#include "model/condition.hpp"

namespace tw::ui {

class Words {
  Q_DECLARE_TR_FUNCTIONS(Words)

 public:
  [[nodiscard]] static QString condition(model::Condition condition);
  /// Condition of a tank as drawn; nullopt while there is no result.
  [[nodiscard]] static std::optional<model::Condition> conditionOf(const io::wire::TankView& tank);
  /// The word on screen: with a question mark when doubtful, "no result yet", "out of service".
  [[nodiscard]] static QString conditionText(const io::wire::TankView& tank);

  /// "pH may rise by", "ammonia that may be lost" ... `ligand` is a formula or empty.
  [[nodiscard]] static QString marginTitle(const std::string& id, const std::string& ligand);
  /// Short, for axes and lists: "pH room up", "ammonia reserve".
  [[nodiscard]] static QString marginShort(const std::string& id, const std::string& ligand);
  /// Unit of the judged number: "%" (of a fraction), "pH", "K", or "times".
  [[nodiscard]] static bool marginIsFraction(const std::string& id);

  /// Everyday name of a ligand or metal: NH3 -> "ammonia"; the formula itself when we have no word.
  [[nodiscard]] static QString substance(const std::string& formula);
  /// A channel's name where room is short: "pH", "temperature", and titles without their ", as NH3".
  [[nodiscard]] static QString channelShort(const std::string& id, const std::string& title);
  /// "addition", "dump", ...
  [[nodiscard]] static QString event(const std::string& code);
  [[nodiscard]] static QString priority(const std::string& code);
};

}  // namespace tw::ui
