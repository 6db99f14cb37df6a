#include "ui/document/document.h"

#include <stdexcept>

#include <QFileInfo>
#include <QUndoCommand>

namespace ebbline::document {

/// One Change on the undo stack; undo and redo are the same swap with the inverse.
class ChangeCommand : public QUndoCommand {
 public:
  ChangeCommand(Document& document, loop::Change change)
      : QUndoCommand(QString::fromStdString(change.name)), document_(document), next_(std::move(change)) {}
  void redo() override { swap(); }
  void undo() override { swap(); }

 private:
  void swap() { next_ = document_.applyNow(next_); }
  Document& document_;
  loop::Change next_;
};

Document::Document(QObject* parent) : QObject(parent), loop_(std::make_shared<const loop::Loop>()) {
  connect(&undo_, &QUndoStack::cleanChanged, this, &Document::fileChanged);
}

std::vector<text::Remark> Document::open(const QString& path) {
  return takeReading(loop::readLoopFile(path.toStdString()), path);
}

std::vector<text::Remark> Document::openText(std::string_view text) {
  return takeReading(loop::readLoop(text), {});
}

std::vector<text::Remark> Document::takeReading(loop::Reading reading, const QString& path) {
  if (reading.usable()) {
    lines_ = std::move(reading.lines);
    replaceWith(std::move(reading.loop), path);
  }
  return std::move(reading.remarks);
}

std::vector<text::Remark> Document::save(const QString& path) {
  std::vector<text::Remark> remarks = loop::writeLoopFile(*loop_, path.toStdString());
  if (text::anyFault(remarks)) return remarks;
  path_ = path;
  undo_.setClean();
  emit fileChanged();
  return remarks;
}

void Document::take(loop::Loop loop) {
  lines_ = {};
  replaceWith(std::move(loop), {});
}

std::vector<text::Remark> Document::push(const loop::Change& change) {
  if (loop::changesNothing(*loop_, change)) return {};
  loop::Loop trial = *loop_;
  if (const auto inverse = loop::apply(trial, change); !inverse) return {inverse.error()};
  undo_.push(new ChangeCommand(*this, change));
  return {};
}

QString Document::title() const {
  const QString name = QString::fromStdString(loop_->project.title);
  const QString subject = QString::fromStdString(loop_->project.subject);
  if (!name.isEmpty()) return subject.isEmpty() ? name : name + QStringLiteral(" · ") + subject;
  return path_.isEmpty() ? tr("untitled") : QFileInfo(path_).completeBaseName();
}

loop::Change Document::applyNow(const loop::Change& change) {
  auto next = std::make_shared<loop::Loop>(*loop_);
  auto inverse = loop::apply(*next, change);
  // push() tried it first, and the undo stack replays in order: a refusal here is a broken invariant.
  if (!inverse) throw std::logic_error(text::oneLine(inverse.error()));
  loop_ = std::move(next);
  emit changed(change);
  return *inverse;
}

void Document::replaceWith(loop::Loop loop, const QString& path) {
  loop_ = std::make_shared<const loop::Loop>(std::move(loop));
  path_ = path;
  undo_.clear();
  emit replaced();
  emit fileChanged();
}

}  // namespace ebbline::document
