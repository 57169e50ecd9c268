// SPDX-License-Identifier: GPL-3.0-or-later
// What stands behind Loop, for the few .cpp files that own a socket, port or descriptor. Never included
// from a header.
#pragma once

#include <boost/asio/executor_work_guard.hpp>
#include <boost/asio/io_context.hpp>
#include <boost/asio/signal_set.hpp>

#include "io/loop.hpp"

namespace tw::io {

struct Loop::Impl {
  /// One thread runs it.
  boost::asio::io_context context{1};
  /// run() waits for work instead of returning when there is none.
  boost::asio::executor_work_guard<boost::asio::io_context::executor_type> guard{
      context.get_executor()};
  boost::asio::signal_set signals{context};
};

}  // namespace tw::io
