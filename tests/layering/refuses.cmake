# SPDX-License-Identifier: GPL-3.0-or-later
# For each forbidden include, a copy of the tree's headers plus one bad file must be refused.
cmake_policy(VERSION 3.25)
set(cases
  "model/bad.cpp|#include \"io/loop.hpp\""
  "model/bad.cpp|#include <nlohmann/json.hpp>"
  "io/recipe/bad.cpp|#include \"io/store/store.hpp\""
  "io/bad.cpp|#include \"monitor/cli/commands.hpp\""
  "io/bad.hpp|#include <boost/asio.hpp>"
  "ui/bad.cpp|#include \"io/store/store.hpp\""
  "ui/bad.cpp|#include \"monitor/cli/commands.hpp\""
  "monitor/bad.cpp|#include <QWidget>"
  "monitor/bad.cpp|auto t = std::chrono::system_clock::now()")
foreach(case IN LISTS cases)
  string(REGEX REPLACE "\\|.*" "" path "${case}")
  string(REGEX REPLACE "^[^|]*\\|" "" text "${case}")
  file(REMOVE_RECURSE "${WORK}")
  file(MAKE_DIRECTORY "${WORK}")
  file(COPY "${ROOT}/model" "${ROOT}/io" DESTINATION "${WORK}" FILES_MATCHING PATTERN "*.hpp")
  file(WRITE "${WORK}/${path}" "${text}\n")
  execute_process(COMMAND ${CMAKE_COMMAND} -DROOT=${WORK} -P "${CMAKE_CURRENT_LIST_DIR}/layering.cmake"
    RESULT_VARIABLE status ERROR_VARIABLE said OUTPUT_QUIET)
  if(status EQUAL 0 OR NOT said MATCHES "${path}")
    message(FATAL_ERROR "Not refused: ${text} in ${path}\n${said}")
  endif()
endforeach()
