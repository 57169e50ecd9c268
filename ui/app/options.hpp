// SPDX-License-Identifier: GPL-3.0-or-later
// The command line of tankward-desk (FORMATS section 6).
#pragma once

#include <QSize>
#include <QString>
#include <QStringList>
#include <QUrl>
#include <optional>

#include "model/result.hpp"
#include "ui/theme/palette.hpp"

namespace tw::ui {

struct DeskOptions {
  QUrl url{QStringLiteral("http://127.0.0.1:8484")};
  QByteArray token;              ///< read from --token-file
  QString snapshotDir;           ///< empty = the interactive form
  QSize size{1400, 900};
  QStringList views;             ///< views to grab; all of this version without --view
  QString tank;
  std::optional<ThemeName> theme;
  QString language;              ///< "en" | "de"; empty = the system's (interactive), English (snapshot)
  double scale = 1.0;
  QString help;                  ///< not empty: print and leave
};

/// `arguments` without the program's name. Fault kinds: Usage; Input for a token file that cannot be read.
[[nodiscard]] model::Result<DeskOptions> parseOptions(const QStringList& arguments);

}  // namespace tw::ui
