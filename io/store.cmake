# SPDX-License-Identifier: GPL-3.0-or-later
target_sources(tw_io PRIVATE
  store/export.cpp
  store/open_store.cpp
  store/schema.cpp
  store/schema_v1.cpp
  store/sqlite_db.cpp
  store/sqlite_liquors.cpp
  store/sqlite_readings.cpp
  store/sqlite_records.cpp
  store/sqlite_results.cpp
  store/sqlite_store.cpp
  store/store_lock.cpp
  store/writer.cpp
)
