// Looped networks from print and from exact construction, solved by Newton. Sources stand in the first lines of
// tests/data/networks_power_law.csv and network_darcy.csv.

#include <cmath>
#include <map>

#include <gtest/gtest.h>

#include "core/network/solver.h"
#include "tests/support/table_file.h"

namespace ebbline::network {
namespace {

constexpr double kGravity = 9.80665;

/// A network whose nodes are known by name, one element to an edge.
struct Named {
  Network network;
  std::map<std::string, int> node;

  int at(const std::string& name) {
    const auto [found, fresh] = node.emplace(name, network.num_nodes);
    if (fresh) {
      ++network.num_nodes;
      network.node_elevation_m.push_back(0);
    }
    return found->second;
  }
  Element& link(const std::string& from, const std::string& to) {
    network.edges.push_back({at(from), at(to), static_cast<int>(network.elements.size()), 1});
    network.elements.push_back({});
    return network.elements.back();
  }
  void draw(const std::string& name, double flow) { network.draws.push_back({at(name), flow}); }
};

State solved(const Network& network) {
  State state;
  Solver solver(network);
  const Summary summary = solver.solve({}, state);
  EXPECT_TRUE(summary.usable()) << summary.why;
  EXPECT_LE(summary.flow_residual, 1e-9);
  EXPECT_LE(summary.pressure_residual, 1e-9);
  return state;
}

/// One of the power-law networks; expected flows by edge.
Named powerLaw(const std::string& which, std::vector<double>& expected) {
  Named named;
  const quantity::CsvTable table = test::tableFile("networks_power_law");
  for (int row = 0; row < table.numRows(); ++row) {
    if (table.text(row, "network") != which) continue;
    Element& element = named.link(table.text(row, "a"), table.text(row, "b"));
    element.first_power = static_cast<int>(named.network.powers.size());
    element.num_powers = 1;
    named.network.powers.push_back({table.number(row, "r"), table.number(row, "n")});
    expected.push_back(table.number(row, "Q_solution"));
  }
  return named;
}

void expectFlows(const State& state, const std::vector<double>& expected) {
  ASSERT_GE(state.edge_flow_m3s.size(), expected.size());
  ASSERT_FALSE(expected.empty());
  for (std::size_t e = 0; e < expected.size(); ++e)
    EXPECT_NEAR(state.edge_flow_m3s[e], expected[e], 1e-6 * std::abs(expected[e])) << "pipe " << e + 1;
}

TEST(LoopedNetworksByNewton, TwoSourcesThreeLoops) {
  std::vector<double> expected;
  Named named = powerLaw("N1", expected);
  // A stands 10 ft above B: a pump of that head whatever the flow. ρ g = 1, so heads are pressures.
  Element& lift = named.link("B", "A");
  lift.kind = Element::Kind::kPump;
  lift.pump = 0;
  PumpLaw pump;
  pump.element = static_cast<int>(named.network.elements.size()) - 1;
  pump.curve = part::PumpCurve({{0, 10, 0}, {100, 10, 0}});
  named.network.pumps.push_back(pump);
  named.network.density_kg_m3 = 1 / kGravity;
  named.network.datum_node = named.at("B");
  for (const auto& [name, flow] : std::map<std::string, double>{{"1", 2}, {"2", 4}, {"3", 1}, {"4", 3}, {"B", -10}})
    named.draw(name, flow);
  const State state = solved(named.network);
  expectFlows(state, expected);
  const auto head = [&](const std::string& name) { return state.node_pressure_pa[named.at(name)]; };
  EXPECT_NEAR(head("A"), 10, 1e-8);
  EXPECT_NEAR(head("1"), -5.033911299, 1e-8);
  EXPECT_NEAR(head("2"), -18.129634636, 1e-8);
  EXPECT_NEAR(head("3"), -12.938905768, 1e-8);
  EXPECT_NEAR(head("4"), -16.850997022, 1e-8);
}

TEST(LoopedNetworksByNewton, Diamond) {
  std::vector<double> expected;
  Named named = powerLaw("N2", expected);
  named.draw("1", -10);
  named.draw("4", 10);
  expectFlows(solved(named.network), {20.0 / 3, 10.0 / 3, 10.0 / 3, 10.0 / 3, 20.0 / 3});
}

TEST(LoopedNetworksByNewton, ExactIntegers) {
  std::vector<double> expected;
  Named named = powerLaw("N3", expected);
  named.draw("A", -12);
  named.draw("B", 1);
  named.draw("C", 4);
  named.draw("D", 7);
  named.network.datum_node = named.at("A");
  const State state = solved(named.network);
  expectFlows(state, {7, 5, 2, 4, 3});
  EXPECT_NEAR(state.node_pressure_pa[named.at("B")], -98, 1e-7);
  EXPECT_NEAR(state.node_pressure_pa[named.at("C")], -120, 1e-7);
  EXPECT_NEAR(state.node_pressure_pa[named.at("D")], -226, 1e-7);
}

TEST(LoopedNetworksByNewton, DarcyColebrook) {
  Named named;
  std::vector<double> expected;
  const quantity::CsvTable table = test::tableFile("network_darcy");
  for (int row = 0; row < table.numRows(); ++row) {
    Element& element = named.link(table.text(row, "a"), table.text(row, "b"));
    element.first_pipe = static_cast<int>(named.network.pipes.size());
    element.num_pipes = 1;
    named.network.pipes.push_back(
        {table.number(row, "L_m"), table.number(row, "D_m"), table.number(row, "eps_m"), table.number(row, "K")});
    expected.push_back(table.number(row, "Q_L_s") / 1000);
  }
  named.network.density_kg_m3 = 999.70;
  named.network.viscosity_pa_s = 1.3059e-3;
  named.network.datum_node = named.at("A");
  for (const auto& [name, flow] : std::map<std::string, double>{{"A", -14}, {"B", 3}, {"C", 4}, {"D", 5}, {"E", 2}})
    named.draw(name, flow / 1000);
  const State state = solved(named.network);
  expectFlows(state, expected);
  const auto kpa = [&](const std::string& name) { return state.node_pressure_pa[named.at(name)] / 1000; };
  EXPECT_NEAR(kpa("B"), -5.80580286, 1e-6);
  EXPECT_NEAR(kpa("C"), -14.71113301, 1e-6);
  EXPECT_NEAR(kpa("D"), -18.98553837, 1e-6);
  EXPECT_NEAR(kpa("E"), -4.05643943, 1e-6);
}

}  // namespace
}  // namespace ebbline::network
