#include "core/network/system_curve.h"

#include <algorithm>
#include <cmath>

#include "core/quantity/quantity.h"

namespace ebbline::network {

namespace {

constexpr double kStandsStill = 1e-9;  // ours, of the flow where the pump's data end: less is what rounding leaves

double pressureAt(const PumpLaw& pump, double density_kg_m3, double flow_m3s, double speed) {
  return pump.curve.head(flow_m3s, speed).value * density_kg_m3 * quantity::kGravity;
}

/// Flow at which the pump gives no head any more, or the last reading of its data if that comes first.
double endFlow(const PumpLaw& pump) {
  const double last = pump.curve.lastFlow();
  if (pump.curve.head(last, 1).value >= 0) return last;
  double low = 0;
  double high = last;
  for (int i = 0; i < 60; ++i) {
    const double middle = 0.5 * (low + high);
    (pump.curve.head(middle, 1).value > 0 ? low : high) = middle;
  }
  return low;
}

/// Where one pump works in a solved state, without telling everything else.
HeadFlowPoint pumpPoint(const Network& network, const State& state, int pump) {
  for (std::size_t e = 0; e < network.edges.size(); ++e) {
    const Edge& edge = network.edges[e];
    for (int i = edge.first_element; i < edge.first_element + edge.num_elements; ++i) {
      const Element& element = network.elements[static_cast<std::size_t>(i)];
      if (element.kind != Element::Kind::kPump || element.pump != pump) continue;
      const double flow = element.reversed ? -state.edge_flow_m3s[e] : state.edge_flow_m3s[e];
      const PumpLaw& law = network.pumps[static_cast<std::size_t>(pump)];
      return {flow, pressureAt(law, network.density_kg_m3, flow, state.speed)};
    }
  }
  return {};
}

/// Scales a solved state to another speed: a good start, since most of the loop is nearly quadratic.
void scaleTo(State& state, double speed) {
  const double ratio = speed / state.speed;
  for (double& flow : state.edge_flow_m3s) flow *= ratio;
  for (double& pressure : state.node_pressure_pa) pressure *= ratio * ratio;
  state.speed = speed;
}

/// Puts points between the solved ones with Δp/q² linear in q. `solved` rises in flow from > 0.
std::vector<HeadFlowPoint> filledIn(const std::vector<HeadFlowPoint>& solved, int between) {
  std::vector<HeadFlowPoint> all;
  double flow_before = 0;
  double ratio_before = solved.front().pressure_pa / (solved.front().flow_m3s * solved.front().flow_m3s);
  all.push_back({});
  for (const HeadFlowPoint& point : solved) {
    const double ratio = point.pressure_pa / (point.flow_m3s * point.flow_m3s);
    for (int i = 1; i < between; ++i) {
      const double share = static_cast<double>(i) / between;
      const double flow = flow_before + share * (point.flow_m3s - flow_before);
      all.push_back({flow, flow * flow * (ratio_before + share * (ratio - ratio_before))});
    }
    all.push_back(point);
    flow_before = point.flow_m3s;
    ratio_before = ratio;
  }
  return all;
}

/// Speeds to solve at, highest last; spaced evenly, because the flow goes nearly with the speed.
std::vector<double> traceSpeeds(double operating_speed, double operating_pa, double top_pa, int count) {
  const double top_speed = operating_speed * std::sqrt(std::max(1.02, top_pa / operating_pa));
  std::vector<double> speeds;
  for (int i = 1; i <= count; ++i) speeds.push_back(top_speed * i / count);
  return speeds;
}

}  // namespace

double headMetres(double pressure_pa, double density_kg_m3) {
  return pressure_pa / (density_kg_m3 * quantity::kGravity);
}

HeadFlowCurve pumpCurve(const PumpLaw& pump, double density_kg_m3, double speed, int num_points) {
  HeadFlowCurve curve{speed, {}};
  const double last = endFlow(pump) * speed;
  curve.points.reserve(static_cast<std::size_t>(num_points));
  for (int i = 0; i < num_points; ++i) {
    const double flow = last * i / (num_points - 1);
    curve.points.push_back({flow, std::max(0.0, pressureAt(pump, density_kg_m3, flow, speed))});
  }
  return curve;
}

std::vector<HeadFlowCurve> pumpFamily(const PumpLaw& pump, double density_kg_m3) {
  std::vector<HeadFlowCurve> family{pumpCurve(pump, density_kg_m3, pump.maximum_speed)};
  const int top_tenth = static_cast<int>(std::ceil(pump.maximum_speed * 10 - 0.25)) - 1;
  for (int tenth = top_tenth; tenth >= 1 && tenth * 0.1 > pump.minimum_speed - 1e-9; --tenth)
    family.push_back(pumpCurve(pump, density_kg_m3, tenth * 0.1));
  return family;
}

std::vector<EfficiencyLine> efficiencyLines(const PumpLaw& pump, double density_kg_m3, int most) {
  std::vector<EfficiencyLine> lines;
  if (!pump.curve.hasEfficiency()) return lines;
  constexpr int kSteps = 400;
  const double last = endFlow(pump);
  double best = 0;
  for (int i = 0; i <= kSteps; ++i) best = std::max(best, pump.curve.efficiency(last * i / kSteps, 1));
  const int best_percent = static_cast<int>(std::floor(best * 100));
  // Every 10 % below the hill, every 4 % near its top, as height lines on a map.
  const auto wanted = [&](int percent) {
    return percent <= best_percent &&
           (percent % 10 == 0 ? percent >= 40 : percent > best_percent - 9 && percent % 4 == 0);
  };
  double before = pump.curve.efficiency(0, 1);
  for (int i = 1; i <= kSteps && static_cast<int>(lines.size()) < most; ++i) {
    const double flow = last * i / kSteps;
    const double now = pump.curve.efficiency(flow, 1);
    for (int percent = 40; percent <= best_percent && static_cast<int>(lines.size()) < most; ++percent) {
      const double level = percent * 0.01;
      if (!wanted(percent) || (before - level) * (now - level) > 0 || before == now || before == level) continue;
      const double crossing = flow - last / kSteps * (now - level) / (now - before);
      EfficiencyLine line{level, {}};
      for (int k = 0; k <= 16; ++k) {
        const double n = pump.minimum_speed + (pump.maximum_speed - pump.minimum_speed) * k / 16;
        line.curve.points.push_back({crossing * n, pressureAt(pump, density_kg_m3, crossing * n, n)});
      }
      lines.push_back(std::move(line));
    }
    before = now;
  }
  return lines;
}

Request frozenAt(const Request& request, const Results& results) {
  Request frozen = request;
  for (std::size_t i = 0; i < frozen.terminals.size(); ++i) {
    TerminalDemand& demand = frozen.terminals[i];
    const bool shut = demand.kind == loop::DemandKind::kRequest && demand.flow_m3s == 0;
    if (!shut) demand = {loop::DemandKind::kPosition, 0, results.terminals[i].stroke};
  }
  return frozen;
}

Traced systemCurve(Solver& solver, const Network& network, const Request& request, const State& state,
                   const Results& results, double top_pressure_pa, int pump, int num_solves, std::stop_token stop) {
  Traced traced;
  const PumpResult& now = results.pumps[static_cast<std::size_t>(pump)];
  const double least_flow = kStandsStill * network.pumps[static_cast<std::size_t>(pump)].curve.lastFlow();
  if (now.flow_m3s <= least_flow || now.pressure_pa <= 0) {
    traced.summary.why = "no flow through the pump, so the loop has no curve";
    return traced;
  }
  Request at_speed = frozenAt(request, results);
  at_speed.speed = {};
  State walking = state;
  std::vector<HeadFlowPoint> solved;
  for (const double speed : traceSpeeds(now.speed, now.pressure_pa, top_pressure_pa, num_solves)) {
    at_speed.speed.speed = speed;
    scaleTo(walking, speed);
    traced.summary = solver.solve(at_speed, walking, stop);
    if (!traced.summary.usable()) return traced;
    const HeadFlowPoint there = pumpPoint(network, walking, pump);
    if (there.flow_m3s > 0 && there.pressure_pa > 0) solved.push_back(there);
  }
  solved.push_back({now.flow_m3s, now.pressure_pa});
  std::sort(solved.begin(), solved.end(), [](const auto& a, const auto& b) { return a.flow_m3s < b.flow_m3s; });
  traced.curve.points = filledIn(solved, 6);
  return traced;
}

Traced controlPath(Solver& solver, const Network& network, const SpeedRule& rule, int pump, int num_solves,
                   std::stop_token stop) {
  Traced traced;
  Request request;
  request.speed = rule;
  State state;
  for (int i = num_solves; i >= 1; --i) {
    const double share = static_cast<double>(i) / num_solves;
    request.terminals.clear();
    for (const TerminalLaw& terminal : network.terminals)
      request.terminals.push_back({loop::DemandKind::kRequest, terminal.design_flow_m3s * share, 1});
    traced.summary = solver.solve(request, state, stop);
    if (!traced.summary.usable()) return {{}, traced.summary};
    traced.curve.points.push_back(pumpPoint(network, state, pump));
  }
  std::reverse(traced.curve.points.begin(), traced.curve.points.end());
  return traced;
}

HeadFlowPoint planeLimits(const PumpLaw& pump, double density_kg_m3, const HeadFlowPoint& design) {
  HeadFlowPoint limits;
  for (const HeadFlowPoint& point : pumpCurve(pump, density_kg_m3, std::max(1.0, pump.maximum_speed)).points) {
    limits.flow_m3s = std::max(limits.flow_m3s, point.flow_m3s);
    limits.pressure_pa = std::max(limits.pressure_pa, point.pressure_pa);
  }
  limits.flow_m3s = std::max(limits.flow_m3s, 1.15 * design.flow_m3s);
  limits.pressure_pa = std::max(1.1 * limits.pressure_pa, 1.15 * design.pressure_pa);
  return limits;
}

}  // namespace ebbline::network
