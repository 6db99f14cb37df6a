// Looped networks from print and from exact construction, solved by Hardy Cross. Sources and marks at each test;
// numbers as collected with their sources in check values, section A.

#include <gtest/gtest.h>

#include <cmath>
#include <string>
#include <vector>

#include "core/network/loop_flow.h"
#include "core/network/solver.h"

namespace ebbline::network {
namespace {

constexpr double kGravity = 9.80665;

// A network built edge by edge, every edge one element between two nodes.
struct Built {
  Network network;

  explicit Built(int num_nodes) {
    network.num_nodes = num_nodes;
    network.node_elevation_m.assign(num_nodes, 0.0);
  }
  Element& addElement(int from, int to, Element::Kind kind) {
    network.edges.push_back({from, to, static_cast<int>(network.elements.size()), 1});
    Element element;
    element.kind = kind;
    element.id = static_cast<loop::Id>(network.elements.size() + 1);
    network.elements.push_back(element);
    return network.elements.back();
  }
  void addPower(int from, int to, double coefficient, double exponent = 2) {
    Element& element = addElement(from, to, Element::Kind::kPipe);
    element.first_power = static_cast<int>(network.powers.size());
    element.num_powers = 1;
    network.powers.push_back({coefficient, exponent});
  }
  void addPipe(int from, int to, const PipeLaw& pipe) {
    Element& element = addElement(from, to, Element::Kind::kPipe);
    element.first_pipe = static_cast<int>(network.pipes.size());
    element.num_pipes = 1;
    element.bore_m = pipe.bore_m;
    network.pipes.push_back(pipe);
  }
  // A level difference between two sources is a pump whose head does not depend on flow.
  void addLift(int from, int to, double head) {
    Element& element = addElement(from, to, Element::Kind::kPump);
    element.pump = static_cast<int>(network.pumps.size());
    PumpLaw pump;
    pump.element = static_cast<int>(network.elements.size()) - 1;
    pump.curve = part::PumpCurve({{0, head, 0}, {100, head, 0}});
    network.pumps.push_back(pump);
  }
  void draw(int node, double flow) { network.draws.push_back({node, flow}); }
};

Request fullSpeed() {
  return {};
}

State solveByHardyCross(const Network& network) {
  State state;
  HardyCross method(network);
  const Summary summary = method.solve(fullSpeed(), state);
  EXPECT_EQ(summary.ended, Ended::kConverged) << summary.why;
  EXPECT_LT(summary.flow_residual, 1e-9);
  EXPECT_LT(summary.pressure_residual, 1e-8);
  return state;
}

void expectFlows(const State& state, const std::vector<double>& expected, double relative) {
  for (std::size_t e = 0; e < expected.size(); ++e)
    EXPECT_NEAR(state.edge_flow_m3s[e], expected[e], relative * std::abs(expected[e])) << "pipe " << e + 1;
}

// N1 [published: course CE 3620 Water Resources Engineering, slide set 9 Pipe Networks (Hardy Cross), 6 Feb 2013]:
// two sources, three loops; ft and ft³/s taken as the program's units, ρg = 1. Nodes A 0, B 1, 1…4 as 2…5.
Built twoSources() {
  Built n1(6);
  n1.network.density_kg_m3 = 1 / kGravity;
  const int a = 0, b = 1, n[] = {0, 2, 3, 4, 5};
  n1.addPower(a, n[1], 0.38);
  n1.addPower(n[1], n[2], 2.89);
  n1.addPower(n[1], n[4], 2.53);
  n1.addPower(n[4], n[2], 12.13);
  n1.addPower(n[3], n[2], 2.17);
  n1.addPower(n[3], n[4], 2.89);
  n1.addPower(b, n[3], 0.94);
  n1.addLift(b, a, 10);
  const double demands[] = {0, 2, 4, 1, 3};
  for (int i = 1; i <= 4; ++i) n1.draw(n[i], demands[i]);
  n1.draw(b, -10);
  return n1;
}

TEST(PublishedLoopedNetworks, TwoSourcesByHardyCross) {
  const State state = solveByHardyCross(twoSources().network);
  expectFlows(state, {6.2899065550, 2.1287066867, 2.1611998683, 0.3246708795, 1.5466224338, 1.1634710112, 3.7100934450},
              1e-6);
  // Heads relative to B [computed: simultaneous node equations]; last printed digit 1e-9.
  const double heads[] = {10, 0, -5.033911299, -18.129634636, -12.938905768, -16.850997022};
  for (int node = 0; node < 6; ++node)
    EXPECT_NEAR(state.node_pressure_pa[node] - state.node_pressure_pa[1], heads[node], 2e-8) << node;
}

// Loops as the slides draw them, edges from 1; 8 is the lift from B to A.
LoopPath drawnLoop(const std::vector<int>& signed_pipes) {
  LoopPath path;
  for (int pipe : signed_pipes) path.push_back({std::abs(pipe) - 1, pipe > 0 ? 1 : -1});
  return path;
}

EdgeLosses lossesAt(const Network& network, const std::vector<double>& flow) {
  EdgeLosses losses;
  EdgeLaws laws(network);
  for (std::size_t e = 0; e < flow.size(); ++e) {
    const LossSlope law = laws.evaluate(static_cast<int>(e), flow[e], 1);
    losses.loss_pa.push_back(law.loss_pa);
    losses.slope_pa_s_m3.push_back(law.slope_pa_s_m3);
  }
  return losses;
}

TEST(PublishedLoopedNetworks, TwoSourcesPrintedRounds) {
  const Built n1 = twoSources();
  const std::vector<LoopPath> loops = {drawnLoop({2, -4, -3}), drawnLoop({-5, 6, 4}), drawnLoop({-1, -8, 7, -2, 5})};
  std::vector<double> flow = {6, 2, 2, 0.5, 1.5, 1.5, 4, 6};
  const double half_digit = 0.5e-4 + 1e-12;
  const double printed[2][3] = {{0.0471, -0.1704, -0.1553}, {-0.1154, -0.0519, -0.0147}};
  for (int round = 0; round < 16; ++round) {
    const std::vector<double> corrections = roundTogether(loops, lossesAt(n1.network, flow), flow);
    for (int l = 0; round < 2 && l < 3; ++l) EXPECT_NEAR(corrections[l], printed[round][l], half_digit) << round;
  }
  // Printed after 16 rounds, half a unit of the last digit.
  EXPECT_NEAR(flow[1], 2.13, 0.005);
  EXPECT_NEAR(flow[3], 0.32, 0.005);
  EXPECT_NEAR(flow[2], 2.16, 0.005);
  // [computed: the same rounds done independently]
  const double round16[] = {6.2897, 2.1287, 2.1610, 0.3247, 1.5466, 1.1637, 3.7103};
  for (int e = 0; e < 7; ++e) EXPECT_NEAR(flow[e], round16[e], half_digit) << "pipe " << e + 1;
}

// N2 [from memory: widely used encyclopedia example of the method; exact solution in thirds].
TEST(PublishedLoopedNetworks, DiamondByHardyCross) {
  Built n2(4);
  n2.addPower(0, 1, 1);
  n2.addPower(0, 2, 5);
  n2.addPower(1, 2, 1);
  n2.addPower(1, 3, 5);
  n2.addPower(2, 3, 1);
  n2.draw(0, -10);
  n2.draw(3, 10);
  const State state = solveByHardyCross(n2.network);
  expectFlows(state, {20.0 / 3, 10.0 / 3, 10.0 / 3, 10.0 / 3, 20.0 / 3}, 1e-6);
  EXPECT_NEAR(state.node_pressure_pa[0] - state.node_pressure_pa[3], 100.0, 1e-6);
}

// The example as it is worked: the pipe across starts without flow, which must not stop the rounds.
TEST(PublishedLoopedNetworks, DiamondFromStillPipe) {
  Built n2(4);
  n2.addPower(0, 1, 1);
  n2.addPower(0, 2, 5);
  n2.addPower(1, 2, 1);
  n2.addPower(1, 3, 5);
  n2.addPower(2, 3, 1);
  const std::vector<LoopPath> loops = {drawnLoop({1, 3, -2}), drawnLoop({4, -5, -3})};
  std::vector<double> flow = {5, 5, 0, 5, 5};
  for (int round = 0; round < 60; ++round) roundTogether(loops, lossesAt(n2.network, flow), flow);
  const double exact[] = {20.0 / 3, 10.0 / 3, 10.0 / 3, 10.0 / 3, 20.0 / 3};
  for (int e = 0; e < 5; ++e) EXPECT_NEAR(flow[e], exact[e], 1e-6 * exact[e]);
}

// N3 [computed: manufactured from whole numbers].
TEST(PublishedLoopedNetworks, WholeNumbersByHardyCross) {
  Built n3(4);
  n3.addPower(0, 1, 2.0);
  n3.addPower(0, 2, 4.8);
  n3.addPower(1, 2, 5.5);
  n3.addPower(1, 3, 8.0);
  n3.addPower(2, 3, 106.0 / 9);
  n3.draw(0, -12);
  n3.draw(1, 1);
  n3.draw(2, 4);
  n3.draw(3, 7);
  const State state = solveByHardyCross(n3.network);
  expectFlows(state, {7, 5, 2, 4, 3}, 1e-6);
  const double heads[] = {0, -98, -120, -226};
  for (int node = 0; node < 4; ++node)
    EXPECT_NEAR(state.node_pressure_pa[node] - state.node_pressure_pa[0], heads[node], 226e-6);
}

// D1 [computed: SciPy 1.10.1, python iapws 1.5.2, residual 2e-15]: Darcy–Weisbach with Colebrook.
TEST(PublishedLoopedNetworks, DarcyNetworkByHardyCross) {
  Built d1(5);
  d1.network.density_kg_m3 = 999.70;
  d1.network.viscosity_pa_s = 1.3059e-3;
  const double eps = 4.5e-5;
  const int a = 0, b = 1, c = 2, d = 3, e = 4;
  d1.addPipe(a, b, {60, 0.1023, eps, 2.0});
  d1.addPipe(b, c, {45, 0.0779, eps, 1.5});
  d1.addPipe(c, d, {40, 0.0525, eps, 1.5});
  d1.addPipe(a, e, {50, 0.1023, eps, 2.0});
  d1.addPipe(e, d, {55, 0.0627, eps, 1.5});
  d1.addPipe(b, e, {30, 0.0525, eps, 1.0});
  const double draws_l_s[] = {-14, 3, 4, 5, 2};
  for (int node = 0; node < 5; ++node) d1.draw(node, draws_l_s[node] / 1000);
  const State state = solveByHardyCross(d1.network);
  expectFlows(state, {7.3815752e-3, 5.3603994e-3, 1.3603994e-3, 6.6184248e-3, 3.6396006e-3, -0.97882412e-3}, 1e-6);
  const double pressures_kpa[] = {0, -5.80580286, -14.71113301, -18.98553837, -4.05643943};
  for (int node = 0; node < 5; ++node)
    EXPECT_NEAR((state.node_pressure_pa[node] - state.node_pressure_pa[0]) / 1000, pressures_kpa[node], 19e-6);
}

}  // namespace
}  // namespace ebbline::network
