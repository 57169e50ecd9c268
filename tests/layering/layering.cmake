# SPDX-License-Identifier: GPL-3.0-or-later
# Fails, naming each file and include, when a file includes what its folder may not, or asks the system for the time.
# Folders are the longest match: io/recipe and io/wire are the target tw_recipe, the rest of io is tw_io.

cmake_policy(VERSION 3.25)

set(allowed_model     model)
set(allowed_io_recipe model io/recipe io/wire)
set(allowed_io_wire   model io/recipe io/wire)
set(allowed_io        model io/recipe io/wire io)
set(allowed_monitor   model io/recipe io/wire io monitor)
set(allowed_ui        model io/recipe io/wire ui)

# Libraries that a folder must not see at all (regular expressions on the included header).
set(forbidden_model     "^(boost|Q[A-Z]|qcustomplot|sqlite3|nlohmann|toml|fmt|spdlog|curl|mosquitto|sodium|date)")
set(forbidden_io_recipe "^(boost|Q[A-Z]|qcustomplot|sqlite3|curl|mosquitto|date)")
set(forbidden_io_wire   "^(boost|Q[A-Z]|qcustomplot|sqlite3|curl|mosquitto|date)")
set(forbidden_io        "^(Q[A-Z]|qcustomplot)")
set(forbidden_monitor   "^(Q[A-Z]|qcustomplot|sqlite3)")
set(forbidden_ui        "^(boost|sqlite3|curl|mosquitto|sodium)")
# Headers that others include must not drag these in; loop_asio.hpp and sqlite_db.hpp exist to do so.
set(private_headers "(loop_asio|sqlite_db|beast_[a-z_]+)\\.hpp$")

function(folder_of path out)
  string(REGEX MATCH "^(io/recipe|io/wire|io|model|monitor|ui)/" folder "${path}")
  string(REGEX REPLACE "/$" "" folder "${folder}")
  set(${out} "${folder}" PARENT_SCOPE)
endfunction()

set(faults "")
file(GLOB_RECURSE files RELATIVE "${ROOT}"
  "${ROOT}/model/*.?pp" "${ROOT}/io/*.?pp" "${ROOT}/monitor/*.?pp" "${ROOT}/ui/*.?pp")
foreach(file IN LISTS files)
  folder_of("${file}" folder)
  string(REPLACE "/" "_" key "${folder}")
  # Only lines that matter: brackets in others would upset a CMake list.
  file(STRINGS "${ROOT}/${file}" lines REGEX "#[ \t]*include|::now\\(|currentDateTime|[^a-z_]time\\((nullptr|NULL|0)")
  foreach(line IN LISTS lines)
    if(line MATCHES "^[ \t]*#[ \t]*include[ \t]*\"([^\"]+)\"")
      folder_of("${CMAKE_MATCH_1}" target)
      if(target STREQUAL "")
        list(APPEND faults "${file}: includes \"${CMAKE_MATCH_1}\", which is not written from the root")
      elseif(NOT target IN_LIST allowed_${key})
        list(APPEND faults "${file}: ${folder} may not include ${target} (\"${CMAKE_MATCH_1}\")")
      endif()
    elseif(line MATCHES "^[ \t]*#[ \t]*include[ \t]*<([^>]+)>")
      set(header "${CMAKE_MATCH_1}")
      if(header MATCHES "${forbidden_${key}}")
        list(APPEND faults "${file}: ${folder} may not use <${header}>")
      elseif(file MATCHES "\\.hpp$" AND NOT file MATCHES "^ui/" AND NOT file MATCHES "${private_headers}"
             AND header MATCHES "^(boost|sqlite3|Q[A-Z])")
        list(APPEND faults "${file}: <${header}> must stay behind the header")
      endif()
    endif()
    if(line MATCHES "(system_clock|steady_clock)::now\\(|QDateTime::currentDateTime|[^a-z_]time\\((nullptr|NULL|0)\\)"
       AND NOT file MATCHES "^(io/clock\\.cpp|monitor/main\\.cpp|ui/main\\.cpp|ui/client/clock\\.cpp)$"
       AND NOT line MATCHES "steady_clock")
      list(APPEND faults "${file}: reads the clock itself; take a Clock")
    endif()
  endforeach()
endforeach()

if(faults)
  list(JOIN faults "\n  " text)
  message(FATAL_ERROR "Arrows broken:\n  ${text}")
endif()
list(LENGTH files count)
if(count LESS 10)
  message(FATAL_ERROR "Only ${count} files seen under ${ROOT}: the check looks in the wrong place")
endif()
message(STATUS "${count} files keep the arrows")
