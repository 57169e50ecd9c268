// SPDX-License-Identifier: GPL-3.0-or-later
// What every painting widget is handed: the theme in force. A change of theme reaches widgets as Qt's
// own PaletteChange, so nobody needs to subscribe.
#pragma once

#include "ui/theme/palette.hpp"

namespace tw::ui {

class Look {
 public:
  explicit Look(ThemeName name) : m_theme(name) {}
  [[nodiscard]] const Theme& theme() const { return m_theme; }
  void setTheme(ThemeName name) { m_theme = Theme(name); }

 private:
  Theme m_theme;
};

}  // namespace tw::ui
