#pragma once
// Pipe tables by standard, and the equivalent sand roughness of their materials. Each size carries where its numbers
// come from, so that the source is one click away.

#include <string>
#include <string_view>
#include <vector>

#include <tl/expected.hpp>

#include "core/text/remark.h"

namespace ebbline::catalogue {

/// One size of a pipe table. SI.
struct PipeSize {
  std::string name;        ///< As the trade says it: "DN 50", "NPS 1-1/4", "2 in", "22 mm".
  std::string other_name;  ///< A second accepted name ("DN 50" of an NPS size); empty if none.
  double bore_m = 0;       ///< Inside diameter.
  double outside_m = 0;
  double wall_m = 0;
  double roughness_m = 0;  ///< Of the series' material, new.
  /// As in the table: "published", "memory" (recalled, to be verified), or which of the two for what.
  std::string mark;
  std::string source;  ///< Where the dimensions were read.
};

/// One pipe table, sizes rising.
struct PipeSeries {
  std::string name;      ///< Key in the file, e.g. "steel-en10255-medium".
  std::string title;     ///< For people, e.g. "Steel EN 10255, medium".
  std::string material;  ///< Row of the roughness table.
  std::string roughness_mark;
  std::string roughness_source;
  std::vector<PipeSize> sizes;
};

struct Roughness {
  std::string material;
  double roughness_m = 0;
  std::string mark;
  std::string source;
};

/// steel-en10255-medium, steel-en10220, steel-b36-sch40, steel-b36-std, copper-b88-k, copper-b88-l, copper-en1057-x,
/// copper-en1057-y. Built once at first use; safe from any thread.
const std::vector<PipeSeries>& pipeSeries();

/// nullptr if there is no such series.
const PipeSeries* findSeries(std::string_view series);

/// A size by name; capitals and spaces do not matter ("dn50" finds "DN 50"). The remark lists what there is.
tl::expected<PipeSize, text::Remark> pipeSize(std::string_view series, std::string_view size);

/// All materials of the roughness table.
const std::vector<Roughness>& roughnesses();

/// One row of the table of largest design flows by pipe size.
struct MaximumFlow {
  std::string size;       ///< "NPS 4".
  double flow_m3s[3][2];  ///< [hours a year: 0 = up to 2000, 1 = up to 4400, 2 = more][0 = other, 1 = variable flow].
};
/// Largest design flow of chilled- and condenser-water pipes by size, hours a year and control.
/// [published: Washington Administrative Code 51-11C-40337, Table C403.3.7]
const std::vector<MaximumFlow>& maximumFlows();
/// Where that table comes from.
const std::string& maximumFlowSource();

}  // namespace ebbline::catalogue
