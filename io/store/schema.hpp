// SPDX-License-Identifier: GPL-3.0-or-later
// Private to io/store/: the store's version and the steps that lead to it, one file per step.
#pragma once

#include <string>
#include <vector>

#include "io/store/sqlite_db.hpp"

namespace tw::io::store {

/// SQL that turns version N-1 into version N. Once released it is never edited: a change is a new step.
std::string schemaStep1();

/// Stands in the file's header, so that another program's database is not taken for a store ("Twrd").
inline constexpr int kApplicationId = 0x54777264;

/// All steps in order; the current version is their number.
[[nodiscard]] const std::vector<std::string>& schemaSteps();

/// Brings the database to version steps.size(); each step is one transaction together with its version.
/// Faults `store_newer` when the file is of a later version, `store_open` when it is no store at all.
model::Result<model::Done> migrate(Database& db, const std::vector<std::string>& steps);
/// The same judgement for a reader, which may not change anything: also `store_open` when older.
model::Result<model::Done> checkVersion(Database& db, const std::vector<std::string>& steps);

}  // namespace tw::io::store
