#include "tests/support/independent_laws.h"

#include <algorithm>
#include <cmath>
#include <functional>
#include <map>
#include <numbers>
#include <utility>
#include <vector>

namespace ebbline::test {
namespace {

using loop::End;
using loop::Side;

constexpr double kGravity = 9.80665;   // published: CGPM 1901
constexpr double kStandsStill = 1e-9;  // of the design flows: below this a loop carries nothing but rounding
constexpr double kHeldWithin = 1e-9;   // a requesting terminal this near to its request counts as holding it

struct Fluid {
  double density = 1000;
  double viscosity = 1e-3;
};

double odd(double flow, double amount) {
  return flow < 0 ? -amount : amount;
}

// IEC 60534-2-1: Kv is the flow in m³/h of water of 1000 kg/m³ at 1 bar.
double kvLoss(double kv_m3h, double flow, double density) {
  const double ratio = 3600 * std::abs(flow) / kv_m3h;
  return odd(flow, density / 1000 * ratio * ratio * 1e5);
}

double knownLoss(const loop::KnownLoss& known, double flow) {
  return odd(flow, 1000 * known.loss_kpa * std::pow(1000 * std::abs(flow) / known.flow_l_s, known.exponent));
}

double pipeLoss(const loop::Pipe& pipe, double flow, const Fluid& fluid) {
  if (pipe.known_loss) return knownLoss(*pipe.known_loss, flow);
  const double bore = *pipe.bore_mm / 1000;
  const double velocity = std::abs(flow) / (std::numbers::pi / 4 * bore * bore);
  const double reynolds = fluid.density * velocity * bore / fluid.viscosity;
  if (reynolds == 0) return 0;
  const double length = pipe.length_m * (1 + pipe.fittings_allowance_percent / 100);
  const auto friction = static_cast<double>(independentFriction(reynolds, *pipe.roughness_mm / 1000 / bore));
  return odd(flow, (friction * length / bore + pipe.extra_k) * fluid.density * velocity * velocity / 2);
}

// Cubic from (0, a) with slope sa to (w, b) with slope sb, by Hermite's four basis functions.
long double hermite(long double w, long double a, long double sa, long double b, long double sb, long double x) {
  const long double t = x / w;
  return a * (1 + 2 * t) * (1 - t) * (1 - t) + sa * w * t * (1 - t) * (1 - t) + b * t * t * (3 - 2 * t) +
         sb * w * t * t * (t - 1);
}

// Share of Kvs at a stroke: equal percentage or linear with leakage; below 5 % stroke the cubic to the seat that
// Ebbline's header words (its slope at the seat is the mean slope of the run).
double valveShare(const loop::ControlValve& valve, double stroke) {
  constexpr double kRun = 0.05;
  const double leakage = valve.leakage_percent / 100;
  if (valve.characteristic == loop::Characteristic::kLinear) return leakage + (1 - leakage) * stroke;
  const auto curve = [&](double h) { return std::pow(valve.rangeability, h - 1); };
  if (stroke >= kRun) return std::max(leakage, curve(stroke));
  const double end = curve(kRun);
  if (end <= leakage) return leakage;
  return static_cast<double>(
      hermite(kRun, leakage, (end - leakage) / kRun, end, end * std::log(valve.rangeability), stroke));
}

// Parabola through the readings (2: without linear term), its tangent past the last one; affinity laws for speed.
double headAtReference(const std::vector<loop::PumpPoint>& p, double q) {
  if (p.size() == 2) {
    const double a = (p[0].head_m - p[1].head_m) / (p[1].flow_l_s * p[1].flow_l_s - p[0].flow_l_s * p[0].flow_l_s);
    return p[0].head_m + a * (p[0].flow_l_s * p[0].flow_l_s - q * q);
  }
  double head = 0;  // Lagrange
  for (int i = 0; i < 3; ++i) {
    double weight = p[i].head_m;
    for (int j = 0; j < 3; ++j)
      if (j != i) weight *= (q - p[j].flow_l_s) / (p[i].flow_l_s - p[j].flow_l_s);
    head += weight;
  }
  return head;
}

double pumpRise(const loop::Pump& pump, double flow, double speed, double density) {
  const double q = 1000 * flow / speed;  // L/s at reference speed
  const double last = pump.curve.back().flow_l_s;
  double head = headAtReference(pump.curve, std::min(q, last));
  if (q > last) {  // a parabola's slope at a point is its exact central difference
    const double step = 0.25 * last;
    head +=
        (q - last) * (headAtReference(pump.curve, last + step) - headAtReference(pump.curve, last - step)) / (2 * step);
  }
  return density * kGravity * speed * speed * head;
}

// One drawn part between two ends, with its flow from the state.
struct Part {
  std::string tag;
  End from, to;
  double flow = 0;
  double loss = 0;
  enum class Bind { kFree, kHeld, kShut } bind = Bind::kFree;
  bool terminal = false;
  double bore_m = 0;
};

class Judge {
 public:
  Judge(const loop::Loop& loop, const network::Network& network, const network::State& state);
  Verdict verdict();

 private:
  double flowOf(loop::Id id, Side side) const;
  void add(loop::Id id, const std::string& tag, Side side, End from, End to, const std::function<double(double)>& loss);
  void addPipes();
  void addTerminals();
  void addMachines();
  loop::Demand demandOf(loop::Id id) const;
  int place(End end);
  void balance();
  void sumLoops();
  void judgeControl();
  double reading(End high, End low, double high_bore_mm, double low_bore_mm);

  const loop::Loop& loop_;
  Fluid fluid_;
  double speed_;
  double pump_pressure_ = 0;
  double largest_flow_ = 0;
  std::map<std::pair<loop::Id, int>, double> flow_;
  std::map<std::pair<loop::Id, int>, int> places_;
  std::vector<Part> parts_;
  std::vector<double> pressure_;
  std::vector<int> region_;
  Verdict verdict_;
};

Judge::Judge(const loop::Loop& loop, const network::Network& network, const network::State& state)
    : loop_(loop), speed_(state.speed) {
  fluid_ = {*loop.fluid.density_kg_m3, *loop.fluid.viscosity_mpa_s / 1000};
  for (std::size_t e = 0; e < network.edges.size(); ++e) {
    const network::Edge& edge = network.edges[e];
    for (int i = edge.first_element; i < edge.first_element + edge.num_elements; ++i) {
      const network::Element& element = network.elements[i];
      flow_[{element.id, static_cast<int>(element.side)}] = (element.reversed ? -1 : 1) * state.edge_flow_m3s[e];
    }
    largest_flow_ = std::max(largest_flow_, std::abs(state.edge_flow_m3s[e]));
  }
  double design = 0;
  for (const loop::Terminal& t : loop.terminals) design += t.design_flow_l_s / 1000;
  largest_flow_ = std::max(largest_flow_, kStandsStill * design);
  addPipes();
  addTerminals();
  addMachines();
}

// A part that the network left out carries nothing.
double Judge::flowOf(loop::Id id, Side side) const {
  const auto found = flow_.find({id, static_cast<int>(side)});
  return found == flow_.end() ? 0.0 : found->second;
}

void Judge::add(loop::Id id, const std::string& tag, Side side, End from, End to,
                const std::function<double(double)>& loss) {
  Part part;
  part.tag = tag;
  part.from = from;
  part.to = to;
  part.flow = flowOf(id, side);
  part.loss = loss(part.flow);
  parts_.push_back(part);
}

double boreOf(const loop::Pipe& pipe) {
  return pipe.bore_mm.value_or(0) / 1000;
}

void Judge::addPipes() {
  for (const loop::PairedRun& run : loop_.paired_runs) {
    const loop::Pipe& back = run.return_pipe ? *run.return_pipe : run.pipe;
    add(run.id, run.tag, Side::kSupply, {run.from, Side::kSupply}, {run.to, Side::kSupply},
        [&](double q) { return pipeLoss(run.pipe, q, fluid_); });
    parts_.back().bore_m = boreOf(run.pipe);
    add(run.id, run.tag, Side::kReturn, {run.from, Side::kReturn}, {run.to, Side::kReturn},
        [&](double q) { return pipeLoss(back, q, fluid_); });
    parts_.back().bore_m = boreOf(back);
  }
  for (const loop::PipeRun& run : loop_.pipe_runs) {
    add(run.id, run.tag, Side::kSingle, run.from, run.to, [&](double q) { return pipeLoss(run.pipe, q, fluid_); });
    parts_.back().bore_m = boreOf(run.pipe);
  }
}

loop::Demand Judge::demandOf(loop::Id id) const {
  const loop::LoadState& state = loop_.load_states.front();
  for (const loop::Demand& demand : state.demands)
    if (demand.of == id) return demand;
  return {id, state.rest_kind, state.rest_percent};
}

void Judge::addTerminals() {
  for (const loop::Terminal& t : loop_.terminals) {
    const loop::Demand demand = demandOf(t.id);
    const bool request = demand.kind == loop::DemandKind::kRequest;
    const double share = request ? 1.0 : valveShare(t.valve, demand.percent / 100);
    const auto loss = [&](double q) {
      double sum = knownLoss(t.coil, q);
      if (share > 0) sum += kvLoss(share * t.valve.kvs_m3h, q, fluid_.density);
      if (t.strainer_kv_m3h) sum += kvLoss(*t.strainer_kv_m3h, q, fluid_.density);
      if (t.balancing) sum += kvLoss(t.balancing->presetting_kv_m3h.value_or(t.balancing->kvs_m3h), q, fluid_.density);
      if (t.branch) sum += pipeLoss(*t.branch, q, fluid_);
      return sum;
    };
    add(t.id, t.tag, Side::kSingle, t.from, t.to, loss);
    Part& part = parts_.back();
    part.terminal = true;
    const double asked = request ? demand.percent / 100 * t.design_flow_l_s / 1000 : 0;
    if (share == 0 || (request && asked == 0)) {
      part.bind = Part::Bind::kShut;
      verdict_.excess = std::max(verdict_.excess, std::abs(part.flow) / largest_flow_);
    } else if (request) {
      verdict_.excess = std::max(verdict_.excess, (part.flow - asked) / largest_flow_);
      if (part.flow >= asked - kHeldWithin * largest_flow_) part.bind = Part::Bind::kHeld;
    }
  }
}

void Judge::addMachines() {
  for (const loop::Plant& plant : loop_.plants)
    add(plant.id, plant.tag, Side::kSingle, plant.from, plant.to, [&](double q) { return knownLoss(plant.loss, q); });
  for (const loop::Pump& pump : loop_.pumps) {
    add(pump.id, pump.tag, Side::kSingle, pump.from, pump.to,
        [&](double q) { return -pumpRise(pump, q, speed_, fluid_.density); });
    pump_pressure_ = std::max(pump_pressure_, pumpRise(pump, 0, speed_, fluid_.density));
  }
  for (const loop::Valve& valve : loop_.valves) {
    add(valve.id, valve.tag, Side::kSingle, valve.from, valve.to,
        [&](double q) { return kvLoss(valve.kvs_m3h, q, fluid_.density); });
    if (valve.opening_percent > 0) continue;
    parts_.back().bind = Part::Bind::kShut;
    verdict_.excess = std::max(verdict_.excess, std::abs(parts_.back().flow) / largest_flow_);
  }
}

int Judge::place(End end) {
  return places_.try_emplace({end.joint, static_cast<int>(end.side)}, static_cast<int>(places_.size())).first->second;
}

void Judge::balance() {
  std::vector<double> sum;
  for (const Part& part : parts_) {
    const int a = place(part.from);
    const int b = place(part.to);
    sum.resize(places_.size(), 0.0);
    sum[a] -= part.flow;
    sum[b] += part.flow;
  }
  for (double left : sum) verdict_.flow = std::max(verdict_.flow, std::abs(left) / largest_flow_);
}

// Pressures along a tree of free parts; every other free or held part closes a loop.
void Judge::sumLoops() {
  pressure_.assign(places_.size(), 0.0);
  region_.assign(places_.size(), -1);
  std::vector<char> used(parts_.size(), 0);
  const auto spread = [&](bool with_terminals) {
    for (bool grown = true; grown;) {
      grown = false;
      for (std::size_t i = 0; i < parts_.size(); ++i) {
        const Part& part = parts_[i];
        if (part.bind != Part::Bind::kFree || (part.terminal && !with_terminals)) continue;
        const int a = place(part.from);
        const int b = place(part.to);
        if ((region_[a] < 0) == (region_[b] < 0)) continue;
        if (region_[b] < 0)
          pressure_[b] = pressure_[a] - part.loss, region_[b] = region_[a];
        else
          pressure_[a] = pressure_[b] + part.loss, region_[a] = region_[b];
        used[i] = grown = true;
      }
    }
  };
  for (std::size_t root = 0; root < places_.size(); ++root) {
    if (region_[root] >= 0) continue;
    region_[root] = static_cast<int>(root);
    spread(false);
    spread(true);
    spread(false);
  }
  for (std::size_t i = 0; i < parts_.size(); ++i) {
    const Part& part = parts_[i];
    if (used[i] || part.bind == Part::Bind::kShut || region_[place(part.from)] != region_[place(part.to)]) continue;
    const double lacking = part.loss - (pressure_[place(part.from)] - pressure_[place(part.to)]);
    const double unmet = (part.bind == Part::Bind::kHeld ? std::max(0.0, lacking) : std::abs(lacking)) / pump_pressure_;
    if (!(unmet <= verdict_.pressure)) verdict_.pressure = unmet, verdict_.worst = part.tag;
  }
}

// Static pressures: the largest flow at a tap through its bore gives the velocity head there. Without a typed bore the
// widest pipe that meets there counts; without any pipe nothing is taken off.
double Judge::reading(End high, End low, double high_bore_mm, double low_bore_mm) {
  const auto staticAt = [&](End end, double bore_mm) {
    double flow = 0;
    double widest = 0;
    for (const Part& part : parts_) {
      if (!(part.from == end) && !(part.to == end)) continue;
      flow = std::max(flow, std::abs(part.flow));
      widest = std::max(widest, part.bore_m);
    }
    const double bore = bore_mm > 0 ? bore_mm / 1000 : widest;
    const double velocity = bore > 0 ? flow / (std::numbers::pi / 4 * bore * bore) : 0;
    return pressure_[place(end)] - fluid_.density * velocity * velocity / 2;
  };
  return staticAt(high, high_bore_mm) - staticAt(low, low_bore_mm);
}

void Judge::judgeControl() {
  const loop::Control& control = loop_.control;
  if (control.strategy == loop::Strategy::kConstantSpeed) {
    verdict_.control = std::abs(speed_ - control.speed_percent / 100);
    return;
  }
  const loop::Pump& pump = loop_.pumps.front();
  double margin = 1e300;
  if (control.strategy == loop::Strategy::kDpPump) {
    margin = reading(pump.to, pump.from, 0, 0) - 1000 * *control.set_point_kpa;
  } else if (control.strategy == loop::Strategy::kDpHeaders) {
    margin = reading(*control.header_supply, *control.header_return, 0, 0) - 1000 * *control.set_point_kpa;
  } else {
    for (const loop::Sensor& s : loop_.sensors)
      margin = std::min(margin, reading(s.high, s.low, s.high_bore_mm.value_or(0), s.low_bore_mm.value_or(0)) -
                                    1000 * *s.set_point_kpa);
  }
  const double relative = margin / pump_pressure_;
  if (speed_ >= pump.maximum_speed_percent / 100) {
    verdict_.control = std::max(0.0, relative);
  } else if (speed_ <= pump.minimum_speed_percent / 100) {
    verdict_.control = std::max(0.0, -relative);
  } else {
    verdict_.control = std::abs(relative);
  }
}

Verdict Judge::verdict() {
  balance();
  sumLoops();
  judgeControl();
  return verdict_;
}

long double colebrook(long double reynolds, long double relative_roughness) {
  // Left side minus right side of 1/√f = −2 log10(ε/3.7 + 2.51/(Re √f)) falls as f rises.
  const auto excess = [&](long double f) {
    return 1 / std::sqrt(f) + 2 * std::log10(relative_roughness / 3.7L + 2.51L / (reynolds * std::sqrt(f)));
  };
  long double low = 1e-4L;
  long double high = 10;
  for (int i = 0; i < 80; ++i) {
    const long double middle = (low + high) / 2;
    (excess(middle) > 0 ? low : high) = middle;
  }
  return (low + high) / 2;
}

}  // namespace

long double independentFriction(long double reynolds, long double relative_roughness) {
  if (reynolds <= 2000) return 64 / reynolds;
  if (reynolds >= 4000) return colebrook(reynolds, relative_roughness);
  // Slope of f Re² at 4000 by implicit differentiation of Colebrook in x = 1/√f.
  const long double f = colebrook(4000, relative_roughness);
  const long double x = 1 / std::sqrt(f);
  const long double b = 2.51L / 4000;
  const long double pull = 2 / std::numbers::ln10_v<long double> * b / (relative_roughness / 3.7L + b * x);
  const long double x_slope = pull * x / 4000 / (1 + pull);
  const long double end_slope = -2 * f / x * x_slope * 4000 * 4000 + 2 * f * 4000;
  return hermite(2000, 64 * 2000, 64, f * 4000 * 4000, end_slope, reynolds - 2000) / (reynolds * reynolds);
}

Verdict judge(const loop::Loop& loop, const network::Network& network, const network::State& state) {
  return Judge(loop, network, state).verdict();
}

}  // namespace ebbline::test
