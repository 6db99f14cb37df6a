#pragma once
// The sentences of the report, made from its numbers.

#include <QString>
#include <QStringList>

#include "ui/report/report.h"
#include "ui/theme/theme.h"

namespace ebbline::report {

/// The one large figure with its sentence.
struct Headline {
  QString figure;    ///< "72", "3".
  QString unit;      ///< "%", "terminals".
  QString strong;    ///< "less pump power at half load"
  QString words;     ///< What it is made of.
  bool bad = false;  ///< Set in the colour of the under-supplied.
};

QString questionOf(const ReportContent& content);
Headline headlineOf(const ReportContent& content);
QString assumedOf(const ReportContent& content);
QString cautionOf(const ReportContent& content);
/// "The loop on a July morning, meeting rooms on: 46 % of design flow".
QString pictureTitle(const ReportContent& content);
/// Left and right half of the foot.
QString footLeft(const ReportContent& content);
QString footRight(const ReportContent& content);

/// Names of plants whose minimum flow is not kept in some usable row, with the first load where it happens.
QString minimumFlowSentence(const ReportContent& content);

QString shownNumber(double base, quantity::Quantity quantity, quantity::UnitSystem units);
QString shownWithUnit(double base, quantity::Quantity quantity, quantity::UnitSystem units);
QString unitOf(quantity::Quantity quantity, quantity::UnitSystem units);

}  // namespace ebbline::report
