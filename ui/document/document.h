#pragma once
// The open document: one Loop that changes only through Changes on an undo stack, its file, and one typed signal.

#include <memory>
#include <string_view>
#include <vector>

#include <QObject>
#include <QString>
#include <QUndoStack>

#include "core/loop/change.h"
#include "core/loop/file.h"
#include "core/loop/loop.h"
#include "core/text/remark.h"

namespace ebbline::document {

class Document : public QObject {
  Q_OBJECT
 public:
  explicit Document(QObject* parent = nullptr);

  const loop::Loop& loop() const { return *loop_; }
  /// The loop as it is now, for work on other threads; never changes under its reader.
  std::shared_ptr<const loop::Loop> snapshot() const { return loop_; }
  bool isEmpty() const { return loop_->terminals.empty() && loop_->pumps.empty(); }

  /// Reads a file. With a fault in it the document stays as it was; the remarks say why.
  std::vector<text::Remark> open(const QString& path);
  /// The same for a text in memory, such as a sample; the document is then without a path.
  std::vector<text::Remark> openText(std::string_view text);
  /// Writes to the path given and makes it the document's. Empty = done.
  std::vector<text::Remark> save(const QString& path);
  /// Takes a loop made in the program; without a path.
  void take(loop::Loop loop);

  /// Does a change and puts it on the undo stack. A change that changes nothing is dropped. The remark says why a
  /// change could not be done; then nothing has changed.
  std::vector<text::Remark> push(const loop::Change& change);

  QUndoStack& undoStack() { return undo_; }
  /// Lines of the file by JSON pointer, as it was read; empty without a file.
  const loop::Lines& lines() const { return lines_; }
  const QString& path() const { return path_; }
  bool isDirty() const { return !undo_.isClean(); }
  /// "Quarry Lane Offices · chilled water", or the file's name, or "untitled".
  QString title() const;

 signals:
  /// After each change, undo and redo, with what was done.
  void changed(const ebbline::loop::Change& change);
  /// After another loop came in place of the old one.
  void replaced();
  /// Path, title or the saved state changed.
  void fileChanged();

 private:
  friend class ChangeCommand;
  loop::Change applyNow(const loop::Change& change);
  std::vector<text::Remark> takeReading(loop::Reading reading, const QString& path);
  void replaceWith(loop::Loop loop, const QString& path);

  std::shared_ptr<const loop::Loop> loop_;
  QUndoStack undo_;
  QString path_;
  loop::Lines lines_;
};

}  // namespace ebbline::document
