#pragma once
// Results as JSON for scripts: keys carry their units, numbers are written so that they read back exactly.

#include <nlohmann/json.hpp>

#include "app/loop_source.h"
#include "core/network/results.h"
#include "core/study/sweep/sweep.h"

namespace ebbline::app {

using Json = nlohmann::ordered_json;

Json jsonOf(const std::vector<text::Remark>& remarks);
/// How a solve ended, residuals with their places.
Json jsonOf(const network::Summary& summary, const loop::Loop& loop, const network::Network& network);
/// Ends, parts, terminals, pumps and sensors of one state. REQUIRES: results of `request` on the opened loop.
Json jsonOf(const network::Results& results, const OpenedLoop& opened, const network::Request& request);
Json jsonOf(const study::SweepRow& row);

/// Words for people and scripts: "pipe", "supply".
const char* wordOf(network::Element::Kind kind);
const char* wordOf(loop::Side side);

/// Where a residual stands: tag of the part or joint nearest to a node or edge; empty if there is none.
std::string placeOfNode(const loop::Loop& loop, const network::Network& network, int node);
std::string placeOfEdge(const loop::Loop& loop, const network::Network& network, int edge);

}  // namespace ebbline::app
