// SPDX-License-Identifier: GPL-3.0-or-later
#include <QDateTime>

#include "ui/app/start.hpp"

int main(int argc, char** argv) {
  return tw::ui::runDesk(argc, argv, [] { return QDateTime::currentMSecsSinceEpoch(); });
}
