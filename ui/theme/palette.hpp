// SPDX-License-Identifier: GPL-3.0-or-later
// The colours of the desk by what they are for, light and dark. Nobody else names a colour, except the
// liquor's own, which comes from the shop file.
#pragma once

#include <QColor>
#include <QString>
#include <optional>

#include "model/condition.hpp"

namespace tw::ui {

enum class Role {
  Window,       ///< behind everything
  Surface,      ///< panels, fields, plots
  Raised,       ///< a row or button that lies on a surface
  Hairline,     ///< separators that carry no meaning
  Edge,         ///< outline of a control: 3:1 on window and surface
  Ink,          ///< text, outlines of tanks
  InkSoft,      ///< secondary text, still 4.5:1
  Press,        ///< filled button
  PressInk,     ///< text on it
  Focus,        ///< ring around what has the keyboard
  Gap,          ///< between bed and liquor: pale in both themes
  Band,         ///< the window of a channel, as an area
  Caution,      ///< the caution line
  Act,          ///< the act line
  Curve,        ///< measured and computed points
  Fine,
  Drifting,
  Tight,
  Brink,
  Sludging,     ///< the word's own colour where it is not reversed: glyph, bed
  SludgingFill, ///< behind the reversed word
  SludgingInk,  ///< the reversed word
  Stale,
  LostFill,     ///< banner of a lost service
  LostInk,
};

enum class ThemeName { Light, Dark };

class Theme {
 public:
  explicit Theme(ThemeName name) : m_name(name) {}
  [[nodiscard]] ThemeName name() const { return m_name; }
  [[nodiscard]] QColor color(Role role) const;
  /// Colour of a condition word and its glyph on window and surface.
  [[nodiscard]] QColor condition(model::Condition condition) const;

 private:
  ThemeName m_name;
};

/// "light" and "dark", as on the command line.
[[nodiscard]] QString themeId(ThemeName name);
[[nodiscard]] std::optional<ThemeName> themeFromId(const QString& id);

}  // namespace tw::ui
