#include <algorithm>
#include <numeric>

#include "core/network/compile_draft.h"
#include "core/network/linear_system.h"

namespace ebbline::network {

namespace {

/// Links in series from one node to the next. `reversed`: the link is drawn against the chain.
struct ChainStep {
  int link = 0;
  bool reversed = false;
};

class Lumper {
 public:
  explicit Lumper(Draft& draft) : draft_(draft), network_(draft.network) {}
  void run();

 private:
  struct Touch {
    int first = -1;
    int second = -1;
  };
  void findTouches();
  void splitAtTerminals();
  int other(int link, int point) const {
    return draft_.links[link].from == point ? draft_.links[link].to : draft_.links[link].from;
  }
  bool isTerminal(int link) const { return network_.elements[draft_.links[link].element].terminal >= 0; }
  bool inner(int point) const { return draft_.points[point].degree == 2 && !draft_.points[point].kept; }
  std::vector<ChainStep> chainFrom(int link);
  void numberNodes();
  void addEdge(std::vector<ChainStep> chain);
  void renumberNodes();
  void sortEdges();
  void placeEnds();

  Draft& draft_;
  Network& network_;
  std::vector<Touch> touch_;     // the two links of each point of degree 2
  std::vector<char> done_;       // links already in a chain
  std::vector<int> node_;        // of each point, −1 = inner
  std::vector<EndPlace> place_;  // of each point
  std::vector<Element> elements_;
  std::vector<int> new_index_;  // of each drafted element
};

void Lumper::findTouches() {
  touch_.assign(draft_.points.size(), {});
  for (int l = 0; l < static_cast<int>(draft_.links.size()); ++l)
    for (const int point : {draft_.links[l].from, draft_.links[l].to})
      (touch_[point].first < 0 ? touch_[point].first : touch_[point].second) = l;
}

/// The chain through a link, from node to node. A ring without any node gets one where it was entered.
std::vector<ChainStep> Lumper::chainFrom(int link) {
  int point = draft_.links[link].from;
  int at = link;
  const int start = link;
  while (inner(point)) {  // back to its beginning
    at = touch_[point].first == at ? touch_[point].second : touch_[point].first;
    if (at == start) {
      draft_.points[point].kept = true;
      break;
    }
    point = other(at, point);
  }
  std::vector<ChainStep> chain;
  while (true) {
    done_[at] = 1;
    chain.push_back({at, draft_.links[at].from != point});
    point = other(at, point);
    if (!inner(point)) return chain;
    at = touch_[point].first == at ? touch_[point].second : touch_[point].first;
  }
}

/// An edge holds one terminal at most: the point before a second one becomes a node.
void Lumper::splitAtTerminals() {
  done_.assign(draft_.links.size(), 0);
  for (int l = 0; l < static_cast<int>(draft_.links.size()); ++l) {
    if (done_[l]) continue;
    bool seen = false;
    for (const ChainStep& step : chainFrom(l)) {
      if (!isTerminal(step.link)) continue;
      const Link& link = draft_.links[step.link];
      if (seen) draft_.points[step.reversed ? link.to : link.from].kept = true;
      seen = true;
    }
  }
}

void Lumper::numberNodes() {
  node_.assign(draft_.points.size(), -1);
  for (std::size_t p = 0; p < draft_.points.size(); ++p) {
    const DraftPoint& point = draft_.points[p];
    if (point.degree == 0 || inner(static_cast<int>(p))) continue;
    node_[p] = network_.num_nodes++;
    network_.node_elevation_m.push_back(point.elevation_m);
  }
}

void Lumper::addEdge(std::vector<ChainStep> chain) {
  for (std::size_t i = 0; i < chain.size(); ++i) {
    if (!isTerminal(chain[i].link) || !chain[i].reversed) continue;
    std::reverse(chain.begin(), chain.end());
    for (ChainStep& step : chain) step.reversed = !step.reversed;
    break;
  }
  const auto begin = [&](const ChainStep& s) {
    return s.reversed ? draft_.links[s.link].to : draft_.links[s.link].from;
  };
  const auto end = [&](const ChainStep& s) { return s.reversed ? draft_.links[s.link].from : draft_.links[s.link].to; };
  Edge edge;
  edge.from = node_[begin(chain.front())];
  edge.to = node_[end(chain.back())];
  edge.first_element = static_cast<int>(elements_.size());
  edge.num_elements = static_cast<int>(chain.size());
  for (const ChainStep& step : chain) {
    const int drafted = draft_.links[step.link].element;
    new_index_[drafted] = static_cast<int>(elements_.size());
    elements_.push_back(network_.elements[drafted]);
    elements_.back().reversed = step.reversed;
    elements_.back().tag = draft_.links[step.link].tag;
    const int point = end(step);
    if (node_[point] >= 0) continue;
    place_[point].edge = static_cast<int>(network_.edges.size());
    place_[point].element = static_cast<int>(elements_.size()) - 1;
  }
  network_.edges.push_back(edge);
}

/// Nodes in the order in which the linear system eliminates them.
void Lumper::renumberNodes() {
  const LinearSystem system(network_);
  std::vector<double> elevation(network_.num_nodes);
  for (int node = 0; node < network_.num_nodes; ++node) elevation[system.step(node)] = network_.node_elevation_m[node];
  network_.node_elevation_m = std::move(elevation);
  for (Edge& edge : network_.edges) {
    edge.from = system.step(edge.from);
    edge.to = system.step(edge.to);
  }
  for (int& node : node_)
    if (node >= 0) node = system.step(node);
  network_.datum_node = system.step(network_.datum_node);
  network_.ordered = true;
}

/// Edges by the node that is eliminated first, and their elements and laws in the same order.
void Lumper::sortEdges() {
  std::vector<int> order(network_.edges.size());
  std::iota(order.begin(), order.end(), 0);
  const auto key = [&](int e) { return std::min(network_.edges[e].from, network_.edges[e].to); };
  std::stable_sort(order.begin(), order.end(), [&](int a, int b) { return key(a) < key(b); });
  std::vector<Edge> edges;
  std::vector<Element> elements;
  std::vector<int> edge_at(order.size());
  std::vector<int> element_at(elements_.size());
  for (const int e : order) {
    edge_at[e] = static_cast<int>(edges.size());
    Edge edge = network_.edges[e];
    for (int i = 0; i < edge.num_elements; ++i) {
      element_at[edge.first_element + i] = static_cast<int>(elements.size());
      elements.push_back(std::move(elements_[edge.first_element + i]));
    }
    edge.first_element = static_cast<int>(elements.size()) - edge.num_elements;
    edges.push_back(edge);
  }
  network_.edges = std::move(edges);
  elements_ = std::move(elements);
  for (int& index : new_index_) index = element_at[index];
  for (EndPlace& place : place_) {
    if (place.edge < 0) continue;
    place.edge = edge_at[place.edge];
    place.element = element_at[place.element];
  }
}

void Lumper::placeEnds() {
  for (std::size_t p = 0; p < draft_.points.size(); ++p) {
    const DraftPoint& point = draft_.points[p];
    if (point.degree == 0) continue;
    place_[p].end = point.end;
    place_[p].elevation_m = point.elevation_m;
    place_[p].node = node_[p];
    network_.ends.push_back(place_[p]);
  }
  std::sort(network_.ends.begin(), network_.ends.end(), [](const EndPlace& a, const EndPlace& b) {
    return a.end.joint != b.end.joint ? a.end.joint < b.end.joint : a.end.side < b.end.side;
  });
}

void Lumper::run() {
  findTouches();
  splitAtTerminals();
  done_.assign(draft_.links.size(), 0);
  std::vector<std::vector<ChainStep>> chains;
  for (int l = 0; l < static_cast<int>(draft_.links.size()); ++l)
    if (!done_[l]) chains.push_back(chainFrom(l));
  numberNodes();
  place_.assign(draft_.points.size(), {});
  new_index_.assign(network_.elements.size(), -1);
  elements_.reserve(network_.elements.size());
  for (std::vector<ChainStep>& chain : chains) addEdge(std::move(chain));
  network_.datum_node = node_[draft_.datum_point];
  renumberNodes();
  sortEdges();
  network_.elements = std::move(elements_);
  for (TerminalLaw& terminal : network_.terminals) terminal.element = new_index_[terminal.element];
  for (PumpLaw& pump : network_.pumps) pump.element = new_index_[pump.element];
  network_.datum_elevation_m = draft_.points[draft_.datum_point].elevation_m;
  placeEnds();
}

}  // namespace

void lump(Draft& draft) {
  Lumper(draft).run();
}

}  // namespace ebbline::network
