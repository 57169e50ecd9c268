// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/ui/service_double.hpp"

#include <QTcpSocket>

#include "tests/ui/samples.hpp"

namespace tw::test {

ServiceDouble::ServiceDouble() {
  connect(&m_server, &QTcpServer::newConnection, this, [this] {
    while (QTcpSocket* socket = m_server.nextPendingConnection()) {
      m_sockets.append(socket);
      connect(socket, &QTcpSocket::readyRead, this, [this, socket] { take(socket); });
      connect(socket, &QTcpSocket::disconnected, this, [this, socket] {
        m_sockets.removeAll(socket);
        socket->deleteLater();
      });
    }
  });
  m_server.listen(QHostAddress::LocalHost, 0);
  m_port = m_server.serverPort();
}

ServiceDouble::~ServiceDouble() {
  // The sockets are the server's children and would speak to members that are gone already.
  for (QTcpSocket* socket : m_sockets) socket->disconnect(this);
}

void ServiceDouble::put(const QByteArray& path, const std::string& body, int status) {
  m_answers[path] = {status, QByteArray::fromStdString(body)};
}

void ServiceDouble::putShop() {
  put("/api/v1/shop", shopBody());
  put("/api/v1/tanks", tanksBody());
  put("/api/v1/alarms", alarmsBody());
  put("/api/v1/due", dueBody());
  for (const char* tank : {"T1", "T2"}) {
    const QByteArray base = QByteArray("/api/v1/tanks/") + tank;
    for (const char* what : {"/results", "/readings", "/events"}) put(base + what, "[]");
  }
}

QUrl ServiceDouble::url() const {
  return QUrl(QStringLiteral("http://127.0.0.1:%1").arg(m_port));
}

void ServiceDouble::goAway() {
  m_server.close();
  const QList<QTcpSocket*> open = m_sockets;
  for (QTcpSocket* socket : open) socket->abort();
}

void ServiceDouble::comeBack() { m_server.listen(QHostAddress::LocalHost, m_port); }

void ServiceDouble::take(QTcpSocket* socket) {
  QByteArray pending = socket->property("pending").toByteArray() + socket->readAll();
  const qsizetype end = pending.indexOf("\r\n\r\n");
  if (end < 0) {
    socket->setProperty("pending", pending);
    return;
  }
  const QByteArray head = pending.left(end);
  const qsizetype lengthAt = head.toLower().indexOf("content-length:");
  const qsizetype length = lengthAt < 0 ? 0 : head.mid(lengthAt + 15, head.indexOf("\r\n", lengthAt) - lengthAt - 15).trimmed().toInt();
  if (pending.size() < end + 4 + length) {
    socket->setProperty("pending", pending);
    return;
  }
  socket->setProperty("pending", pending.mid(end + 4 + length));
  const QList<QByteArray> words = head.left(head.indexOf("\r\n")).split(' ');
  requests.append(words.value(0) + ' ' + words.value(1));
  heads.append(head);
  if (words.value(0) == "POST") bodies.append(pending.mid(end + 4, length));
  if (m_silent) return;
  const QByteArray path = words.value(1).split('?').value(0);
  const Answer answer = m_answers.value(path, {404, R"({"title":"Not Found","detail":"no such thing"})"});
  socket->write("HTTP/1.1 " + QByteArray::number(answer.status) + " X\r\nContent-Type: application/json\r\nContent-Length: " +
                QByteArray::number(answer.body.size()) + "\r\n\r\n" + answer.body);
}

}  // namespace tw::test
