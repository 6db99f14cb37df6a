#pragma once
// The client report: question, number, picture, caution on paper. Everything is handed in solved; here it is only
// drawn.

#include <optional>
#include <string>
#include <vector>

#include <QByteArray>
#include <QString>

#include "core/loop/loop.h"
#include "core/network/part_load.h"
#include "core/quantity/quantity.h"
#include "core/study/sweep/sweep.h"
#include "core/text/remark.h"

namespace ebbline::report {

/// What a report tells. Borrowed pointers must outlive the call.
struct ReportContent {
  const loop::Loop* loop = nullptr;
  std::string file_name;   ///< As printed in the footer.
  std::string question;    ///< Headline; empty = the usual question.
  std::string state_name;  ///< Of the state drawn.
  std::string strategy;    ///< In words: "field sensor S1, 62 kPa".
  std::string series_key;  ///< Of the strategy's colour in the tokens, e.g. "field_sensor".
  const network::PartLoadGround* ground = nullptr;
  const network::PartLoadPicture* picture = nullptr;  ///< The state drawn; summary.usable().
  std::vector<study::SweepRow> rows;                  ///< The table, full load first.
  std::vector<study::SweepRow> state_rows;            ///< The load states of the file; may be empty.
  std::optional<double> method_difference;            ///< Of the state drawn; absent = second method not available.
  quantity::UnitSystem units = quantity::UnitSystem::kSi;
};

/// The pages as PDF: A4, or Letter with IP units. `error` is empty when written.
/// REQUIRES: a QApplication exists; content.loop, ground and picture are set and the picture is usable.
QString writeReport(const ReportContent& content, const QString& path);

/// Number of pages the report will have.
int pageCount(const ReportContent& content);

}  // namespace ebbline::report
