#include "core/loop/change.h"

#include <algorithm>

#include "core/loop/fields.h"

namespace ebbline::loop {
namespace {

template <class Wanted, class Found>
Wanted* sameType(Found& list) {
  if constexpr (std::same_as<Wanted, Found>)
    return &list;
  else
    return nullptr;
}

// The list of the loop that holds things of kind T.
template <class T>
std::vector<T>& listOf(Loop& loop) {
  std::vector<T>* found = nullptr;
  forEachList(
      [&found](const char*, auto& list, const char*) {
        if (auto* same = sameType<std::vector<T>>(list)) found = same;
      },
      loop);
  return *found;
}

template <class List>
auto findId(List& list, Id id) {
  return std::find_if(list.begin(), list.end(), [id](const auto& thing) { return thing.id == id; });
}

bool idInUse(const Loop& loop, Id id) {
  bool in_use = false;
  forEachList([&](const char*, const auto& list, const char*) { in_use |= findId(list, id) != list.end(); }, loop);
  return in_use;
}

text::Remark refusal(text::Code code, Id id) {
  text::Place place;
  place.id = id;
  return {code, place, {std::to_string(id)}};
}

using Undone = tl::expected<Step, text::Remark>;

/// Does one step and returns the step that takes it back.
struct Doer {
  Loop& loop;

  Undone operator()(const Put& put) const {
    return std::visit([&](const auto& thing) { return this->put(thing, put.index); }, put.thing);
  }

  template <class T>
  Undone put(const T& thing, std::size_t index) const {
    std::vector<T>& list = listOf<T>(loop);
    if (const auto old = findId(list, thing.id); old != list.end())
      return Put{std::exchange(*old, thing), static_cast<std::size_t>(old - list.begin())};
    if (thing.id == 0 || idInUse(loop, thing.id)) return tl::unexpected(refusal(text::Code::kChangeIdInUse, thing.id));
    list.insert(list.begin() + static_cast<std::ptrdiff_t>(std::min(index, list.size())), thing);
    return Remove{thing.id};
  }

  Undone operator()(const Remove& remove) const {
    std::optional<Put> back;
    forEachList(
        [&](const char*, auto& list, const char*) {
          if (back) return;
          const auto at = findId(list, remove.id);
          if (at == list.end()) return;
          back = Put{std::move(*at), static_cast<std::size_t>(at - list.begin())};
          list.erase(at);
        },
        loop);
    if (!back) return tl::unexpected(refusal(text::Code::kChangeIdMissing, remove.id));
    return *std::move(back);
  }

  Undone operator()(const PutProject& put) const { return PutProject{std::exchange(loop.project, put.project)}; }
  Undone operator()(const PutFluid& put) const { return PutFluid{std::exchange(loop.fluid, put.fluid)}; }
  Undone operator()(const PutControl& put) const { return PutControl{std::exchange(loop.control, put.control)}; }
};

// Takes steps back, last first. They come from Doer, so each of them can be done.
void takeBack(Loop& loop, const std::vector<Step>& undo_in_order_done) {
  for (std::size_t i = undo_in_order_done.size(); i-- > 0;) (void)std::visit(Doer{loop}, undo_in_order_done[i]);
}

}  // namespace

tl::expected<Change, text::Remark> apply(Loop& loop, const Change& change) {
  Change inverse{change.name, {}};
  inverse.steps.reserve(change.steps.size());
  for (const Step& step : change.steps) {
    Undone undone = std::visit(Doer{loop}, step);
    if (!undone) {
      takeBack(loop, inverse.steps);
      return tl::unexpected(undone.error());
    }
    inverse.steps.push_back(std::move(*undone));
  }
  std::reverse(inverse.steps.begin(), inverse.steps.end());
  return inverse;
}

bool changesNothing(const Loop& loop, const Change& change) {
  Loop after = loop;
  return apply(after, change).has_value() && after == loop;
}

Id idOf(const Thing& thing) {
  return std::visit([](const auto& x) { return x.id; }, thing);
}

Id nextFreeId(const Loop& loop) {
  Id most = 0;
  forEachList(
      [&most](const char*, const auto& list, const char*) {
        for (const auto& thing : list) most = std::max(most, thing.id);
      },
      loop);
  return most + 1;
}

}  // namespace ebbline::loop
