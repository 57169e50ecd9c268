// SPDX-License-Identifier: GPL-3.0-or-later
// The look of standard controls: Fusion, our palette, sizes for gloves.
#pragma once

#include <QString>

#include "ui/theme/palette.hpp"

class QApplication;
class QFont;

namespace tw::ui {

/// Smallest height and width of anything that is pressed, in logical pixels.
inline constexpr int kTarget = 44;
inline constexpr int kTextPx = 15;
inline constexpr int kSmallPx = 13;
inline constexpr int kTitlePx = 21;

/// The application's font at a size in logical pixels.
[[nodiscard]] QFont textFont(int pixelSize, bool bold = false);
/// Style, palette, font and style sheet of the whole program.
void applyTheme(QApplication& application, const Theme& theme);
[[nodiscard]] QString styleSheet(const Theme& theme);

}  // namespace tw::ui
