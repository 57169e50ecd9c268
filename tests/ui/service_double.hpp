// SPDX-License-Identifier: GPL-3.0-or-later
// A tiny HTTP/1.1 server on loopback: fixed bodies by path, a record of what was asked, and the two ways a
// service can be away: gone, or silent.
#pragma once

#include <QByteArray>
#include <QHash>
#include <QList>
#include <QObject>
#include <QTcpServer>
#include <QUrl>

class QTcpSocket;

namespace tw::test {

class ServiceDouble : public QObject {
 public:
  struct Answer {
    int status = 200;
    QByteArray body;
  };

  ServiceDouble();
  ~ServiceDouble() override;
  /// Answers `path` (with /api/v1, without query) with `body`.
  void put(const QByteArray& path, const std::string& body, int status = 200);
  /// All of a small shop: see samples.hpp.
  void putShop();
  [[nodiscard]] QUrl url() const;
  [[nodiscard]] quint16 port() const { return m_port; }
  void goAway();     ///< closes the port and every connection
  void comeBack();   ///< listens on the same port again
  void fallSilent(bool silent) { m_silent = silent; }  ///< takes requests, never answers

  QList<QByteArray> requests;  ///< "GET /api/v1/tanks?x" in order
  QList<QByteArray> bodies;    ///< of POSTs
  QList<QByteArray> heads;     ///< whole heads

 private:
  void take(QTcpSocket* socket);

  QTcpServer m_server;
  QHash<QByteArray, Answer> m_answers;
  QList<QTcpSocket*> m_sockets;
  quint16 m_port = 0;
  bool m_silent = false;
};

}  // namespace tw::test
