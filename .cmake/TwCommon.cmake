# SPDX-License-Identifier: GPL-3.0-or-later
# Compiler settings shared by every target, through the INTERFACE target tw_common.

set(CMAKE_CXX_STANDARD 20)
set(CMAKE_CXX_STANDARD_REQUIRED ON)
set(CMAKE_CXX_EXTENSIONS OFF)
set(CMAKE_EXPORT_COMPILE_COMMANDS ON)
if(NOT CMAKE_BUILD_TYPE)
  set(CMAKE_BUILD_TYPE RelWithDebInfo CACHE STRING "" FORCE)
endif()
# -g1 keeps line numbers and halves compile time against -g.
set(CMAKE_CXX_FLAGS_DEBUG "-O0 -g1")
set(CMAKE_CXX_FLAGS_RELWITHDEBINFO "-O2 -g1")

find_program(TW_CCACHE ccache)
if(TW_CCACHE)
  # With a precompiled header ccache only hits when it may ignore these; depend mode saves a preprocessor
  # run on every miss; without the folder in the hash all build folders share one cache.
  set(CMAKE_CXX_COMPILER_LAUNCHER
    "${CMAKE_COMMAND};-E;env;CCACHE_SLOPPINESS=pch_defines,time_macros,include_file_mtime,include_file_ctime;CCACHE_DEPEND=1;CCACHE_NOHASHDIR=1;${TW_CCACHE}")
endif()

find_program(TW_MOLD mold)
if(TW_MOLD)
  add_link_options(-fuse-ld=mold)
endif()

if(TW_SANITIZE)
  add_compile_options(-fsanitize=${TW_SANITIZE} -fno-omit-frame-pointer -fno-sanitize-recover=all)
  add_link_options(-fsanitize=${TW_SANITIZE})
endif()

add_library(tw_common INTERFACE)
target_include_directories(tw_common INTERFACE "${CMAKE_SOURCE_DIR}")
target_compile_options(tw_common INTERFACE
  -Wall -Wextra -Wpedantic -Wconversion -Wshadow -Wnon-virtual-dtor -Woverloaded-virtual
  -Wold-style-cast -Wformat=2 -Wdouble-promotion
  $<$<BOOL:${TW_WERROR}>:-Werror>
  # g++ 12 reports false positives here from inside libstdc++ once it inlines std::string and
  # std::variant (seen with 12.2 at -O1 and above).
  $<$<CXX_COMPILER_ID:GNU>:-Wno-maybe-uninitialized;-Wno-restrict;-Wno-array-bounds;-Wno-stringop-overflow>)
if(CMAKE_UNITY_BUILD)
  # In a unity build g++ takes each file for a header and warns of test fixtures in unnamed namespaces.
  target_compile_options(tw_common INTERFACE -Wno-subobject-linkage)
endif()
target_compile_definitions(tw_common INTERFACE
  TW_VERSION="${PROJECT_VERSION}")

# tw_alone(file...): these stay units of their own in a unity build, because they share a local name with a
# neighbour.
function(tw_alone)
  set_source_files_properties(${ARGN} PROPERTIES SKIP_UNITY_BUILD_INCLUSION ON)
endfunction()

# tw_test(NAME lib... SOURCES file... [LABELS l...]): one GoogleTest binary that links only what it tests.
function(tw_test name)
  cmake_parse_arguments(ARG "" "TIMEOUT" "LIBS;SOURCES;LABELS" ${ARGN})
  add_executable(${name} ${ARG_SOURCES})
  target_link_libraries(${name} PRIVATE tw_common ${ARG_LIBS} GTest::gtest GTest::gmock GTest::gtest_main)
  target_compile_definitions(${name} PRIVATE
    TW_SOURCE_DIR="${CMAKE_SOURCE_DIR}" TW_BINARY_DIR="${CMAKE_BINARY_DIR}")
  if(NOT ARG_TIMEOUT)
    set(ARG_TIMEOUT 900)  # four times the longest under sanitizers on two cores
  endif()
  add_test(NAME ${name} COMMAND ${name})
  set_tests_properties(${name} PROPERTIES TIMEOUT ${ARG_TIMEOUT} LABELS "${ARG_LABELS}")
  foreach(source IN LISTS ARG_SOURCES)
    set_property(GLOBAL APPEND PROPERTY TW_TEST_SOURCES "${CMAKE_CURRENT_SOURCE_DIR}/${source}")
  endforeach()
endfunction()
