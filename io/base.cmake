# SPDX-License-Identifier: GPL-3.0-or-later
target_sources(tw_io PRIVATE
  ${CMAKE_CURRENT_LIST_DIR}/clock.cpp
  ${CMAKE_CURRENT_LIST_DIR}/local_time.cpp
  ${CMAKE_CURRENT_LIST_DIR}/log.cpp
  ${CMAKE_CURRENT_LIST_DIR}/loop.cpp
  ${CMAKE_CURRENT_LIST_DIR}/time_text.cpp)
