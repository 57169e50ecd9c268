# SPDX-License-Identifier: GPL-3.0-or-later
target_sources(tw_io PRIVATE
  ${CMAKE_CURRENT_LIST_DIR}/drop/batch_builder.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/dialect.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/filing.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/header.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/json_lines.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/json_object.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/number_text.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/rows.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/table.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/text_encoding.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/waiting_files.cpp
  ${CMAKE_CURRENT_LIST_DIR}/drop/watcher.cpp)
