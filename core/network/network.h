#pragma once
// The loop as solved: flat arrays in SI units. `compile` is the only door from the drawing to here, and the map back
// from each node and edge to the thing drawn is kept, so that every result lands on something the user can click.

#include <cstdint>
#include <string>
#include <vector>

#include "core/loop/loop.h"
#include "core/part/pump.h"
#include "core/text/remark.h"

namespace ebbline::network {

/// One drawn pipe, terminal, plant, pump or valve as part of an edge.
struct Element {
  enum class Kind : std::uint8_t { kPipe, kTerminal, kPlant, kPump, kValve };
  Kind kind = Kind::kPipe;
  loop::Id id = 0;                              ///< The thing drawn.
  std::string tag;                              ///< Its tag as the user knows it.
  loop::Side side = loop::Side::kSingle;        ///< Paired runs: which of its two pipes.
  bool reversed = false;                        ///< Drawn against the edge's direction.
  int first_pipe = 0;                           ///< Slices of the law arrays below.
  int num_pipes = 0;
  int first_power = 0;
  int num_powers = 0;
  double quadratic_pa_s2_m6 = 0;                ///< Sum of its fixed quadratic losses: Δp = r q|q|.
  bool shut = false;                            ///< A shut valve: no flow either way, any pressure difference.
  int terminal = -1;                            ///< Index in terminals; -1 = none.
  int pump = -1;                                ///< Index in pumps; -1 = none.
  double bore_m = 0;                            ///< For velocity; 0 = none.
};

/// One edge: elements in series between two nodes, flow positive from → to. At most one element is a terminal, and it
/// runs in the edge's direction. Both nodes may be the same (a loop without a branch).
struct Edge {
  int from = 0;
  int to = 0;
  int first_element = 0;
  int num_elements = 0;
};

/// A straight pipe: Darcy–Weisbach with its loss coefficients.
struct PipeLaw {
  double length_m = 0;
  double bore_m = 0;
  double roughness_m = 0;
  double loss_k = 0;
};

/// Δp = coefficient · |q|^exponent · sign(q).
struct PowerLaw {
  double coefficient = 0;  ///< [Pa/(m³/s)^exponent]
  double exponent = 2;
};

/// Control valve of one terminal and what it asks for.
struct TerminalLaw {
  loop::Id id = 0;
  std::string tag;
  int element = 0;
  double design_flow_m3s = 0;
  double valve_kvs_m3h = 0;
  loop::ControlValve valve;
  int zone = -1;  ///< Index in the loop's zones.
  bool essential = false;
};

struct PumpLaw {
  loop::Id id = 0;
  std::string tag;
  int element = 0;
  part::PumpCurve curve;
  double minimum_speed = 0.2;
  double maximum_speed = 1.0;
};

/// An end of the drawing that a user can point at, and where it is in the network.
struct EndPlace {
  loop::End end;
  double elevation_m = 0;
  int node = -1;      ///< If it became a node.
  int edge = -1;      ///< If it was lumped into an edge: which,
  int element = -1;   ///< and after which element (index in elements) of it.
};

/// A fixed draw at a node [m³/s], positive out of the network. Only tests of looped networks use it.
struct Draw {
  int node = 0;
  double flow_m3s = 0;
};

struct Network {
  double density_kg_m3 = 1000;
  double viscosity_pa_s = 1e-3;    ///< Dynamic.
  double vapour_pressure_pa = 0;   ///< Absolute.
  /// Nodes are numbered in a good order of elimination, the datum last, and edges follow their nodes: what is used
  /// together lies together in memory. compile does so; a network built by hand need not.
  bool ordered = false;
  int num_nodes = 0;
  int datum_node = 0;              ///< Where the vessel connects (or the first node of the supply).
  double datum_gauge_pa = 0;
  double datum_elevation_m = 0;
  bool datum_known = false;        ///< False: no vessel, gauge pressures must not be shown.
  std::vector<Edge> edges;
  std::vector<Element> elements;
  std::vector<PipeLaw> pipes;
  std::vector<PowerLaw> powers;
  std::vector<TerminalLaw> terminals;   ///< In the order of Loop::terminals.
  std::vector<PumpLaw> pumps;           ///< In the order of Loop::pumps.
  std::vector<EndPlace> ends;           ///< Every connected end, sorted by (joint, side).
  std::vector<Draw> draws;
  std::vector<double> node_elevation_m;
};

/// Result of compile: the network can be used only if no remark is a fault.
struct Compiled {
  Network network;
  std::vector<text::Remark> remarks;
  bool usable() const { return !text::anyFault(remarks); }
};

/// Turns the drawing into the network: paired runs into two edges, terminals into one, chains lumped, units to SI.
/// Everything that would make the solver meaningless is refused here with a remark naming the thing: unknown sizes,
/// open ends, islands without pump, no plant, two vessels, supply joined to return …
Compiled compile(const loop::Loop& loop);

}  // namespace ebbline::network
