// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/store/sqlite_store.hpp"

namespace tw::io::store {

model::Result<model::Done> SqliteStore::transaction(
    const std::function<model::Result<model::Done>(Store&)>& work) {
  return write([&] { return work(*this); });
}

}  // namespace tw::io::store
