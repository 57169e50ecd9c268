# SPDX-License-Identifier: GPL-3.0-or-later
target_sources(tw_io PRIVATE
  ${CMAKE_CURRENT_LIST_DIR}/serial/condenser.cpp
  ${CMAKE_CURRENT_LIST_DIR}/serial/frame.cpp
  ${CMAKE_CURRENT_LIST_DIR}/serial/frame_pattern.cpp
  ${CMAKE_CURRENT_LIST_DIR}/serial/link.cpp)
