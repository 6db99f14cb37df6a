#include "tests/core/loop/random_loop.h"

#include <algorithm>

#include "core/loop/fields.h"

namespace ebbline::loop::test {
namespace {

/// Fills every field with a value that is within its limits.
class RandomFiller {
 public:
  RandomFiller(std::mt19937_64& random, bool set_all) : random_(random), set_all_(set_all) {}

  template <class Member>
  void operator()(const char*, Member& member, Need, const char*, const Limits& limits = {}) {
    fill(member, limits);
  }

  void fill(double& x, const Limits& limits) {
    const double least = std::max(limits.least, -1e4);
    const double most = std::min(limits.most, 1e4);
    x = most - (most - least) * static_cast<double>(random_() % 100000) / 100001.0;
  }
  void fill(bool& x, const Limits&) { x = set_all_ ? !x : random_() % 2 == 0; }
  template <class Whole>
  requires(std::integral<Whole> && !std::same_as<Whole, bool>) void fill(Whole& x, const Limits& limits) {
    x = static_cast<Whole>(std::max(limits.least, 1.0) + static_cast<double>(random_() % 50));
  }
  void fill(std::string& x, const Limits&) { x = "text " + std::to_string(random_() % 1000) + (some() ? "ü\n\"" : ""); }
  template <class Choice>
  requires std::is_enum_v<Choice>
  void fill(Choice& x, const Limits&) {
    const auto all = words(Choice{});
    x = all[set_all_ ? 1 : random_() % all.size()].value;
  }
  template <class T>
  void fill(std::optional<T>& x, const Limits& limits) {
    x.reset();
    if (set_all_ || some()) fill(x.emplace(), limits);
  }
  template <class T>
  void fill(std::vector<T>& x, const Limits& limits) {
    x.resize(set_all_ ? 2 : random_() % 4);
    for (T& item : x) fill(item, limits);
  }
  void fill(Typed& x, const Limits&) {
    x.clear();
    if (set_all_ || some()) x["length_m"] = "40 ft";
  }
  template <class Struct>
  requires kIsStruct<Struct>
  void fill(Struct& x, const Limits&) { describe(*this, x); }

 private:
  bool some() { return random_() % 2 == 0; }
  std::mt19937_64& random_;
  bool set_all_;
};

void numberIds(Loop& loop) {
  Id next = 1;
  forEachList(
      [&next](const char*, auto& list, const char*) {
        for (auto& thing : list) thing.id = next++;
      },
      loop);
}

// Joints 10 and 11 are paired, 12 is single; everything refers to them.
void connect(Loop& loop) {
  loop.joints.resize(3);
  for (Id i = 0; i < 3; ++i) {
    loop.joints[i] = {10 + i, "J" + std::to_string(i + 1), i < 2, {0.0 + i, 0}, loop.levels[0].id, 1.5};
  }
  const End supply{10, Side::kSupply};
  const End back{11, Side::kReturn};
  const auto join = [&](auto& list) {
    for (auto& thing : list) {
      thing.from = supply;
      thing.to = back;
    }
  };
  join(loop.pipe_runs);
  join(loop.terminals);
  join(loop.plants);
  join(loop.pumps);
  join(loop.valves);
  for (PairedRun& run : loop.paired_runs) {
    run.from = 10;
    run.to = 11;
  }
  for (Sensor& sensor : loop.sensors) {
    sensor.high = supply;
    sensor.low = back;
  }
  for (Vessel& vessel : loop.vessels) vessel.at_end = {12, Side::kSingle};
  for (Terminal& terminal : loop.terminals) terminal.zone = loop.zones[0].id;
  loop.control.header_supply = supply;
  loop.control.header_return = back;
  loop.control.sensors = {loop.sensors[0].id, loop.sensors[1].id};
  for (LoadState& state : loop.load_states)
    state.demands = {{loop.terminals[0].id, DemandKind::kPosition, 40}, {loop.zones[0].id, DemandKind::kRequest, 30}};
  for (LoadState& state : loop.load_states) state.rest_percent = 70;
}

void separateIds(Loop& loop) {
  Id next = 100;
  forEachList(
      [&next](const char*, auto& list, const char*) {
        for (auto& thing : list) thing.id = next++;
      },
      loop);
}

template <class List>
void addThings(std::vector<Thing>& things, const List& list) {
  for (const auto& thing : list) things.emplace_back(thing);
}

std::vector<Thing> thingsOf(const Loop& loop) {
  std::vector<Thing> things;
  forEachList([&](const char*, const auto& list, const char*) { addThings(things, list); }, loop);
  return things;
}

}  // namespace

Loop fullLoop() {
  std::mt19937_64 random(7);
  Loop loop;
  RandomFiller filler(random, true);
  describe(filler, loop);
  separateIds(loop);
  connect(loop);
  return loop;
}

Loop randomLoop(std::mt19937_64& random) {
  Loop loop;
  RandomFiller filler(random, false);
  describe(filler, loop);
  numberIds(loop);
  return loop;
}

Change randomChange(const Loop& loop, std::mt19937_64& random) {
  Change change{"Random change", {}};
  Loop now = loop;  // steps follow one another, so each is drawn on the loop the earlier ones leave
  const std::size_t count = random() % 6;
  while (change.steps.size() < count) {
    const std::vector<Thing> here = thingsOf(now);
    const Loop others = randomLoop(random);
    const std::vector<Thing> fresh = thingsOf(others);
    Step step = PutProject{others.project};
    const auto kind = random() % 6;
    if (kind == 0) step = PutFluid{others.fluid};
    if (kind == 1) step = PutControl{others.control};
    if (kind == 2 && !here.empty()) step = Remove{idOf(here[random() % here.size()])};
    if (kind >= 3 && !fresh.empty()) {
      Thing thing = fresh[random() % fresh.size()];
      Id id = nextFreeId(now);
      for (const Thing& old : here)
        if (old.index() == thing.index() && random() % 2 == 0) id = idOf(old);
      std::visit([id](auto& x) { x.id = id; }, thing);
      step = Put{thing, random() % 2 == 0 ? static_cast<std::size_t>(-1) : random() % 5};
    }
    if (!apply(now, {"", {step}})) continue;
    change.steps.push_back(step);
  }
  return change;
}

}  // namespace ebbline::loop::test
