#include <nlohmann/json.hpp>

#include "core/loop/fields.h"
#include "core/loop/file.h"

namespace ebbline::loop {
namespace {

using Json = nlohmann::ordered_json;

std::string definitionName(std::string name) {
  for (char& c : name)
    if (c == ' ') c = '_';
  return name;
}

/// Writes the definition of a struct, and those of the structs it holds, from the field table.
class SchemaMaker {
 public:
  explicit SchemaMaker(Json& definitions) : definitions_(definitions) {}

  template <class Struct>
  Json object() {
    Json outer_properties = std::exchange(properties_, Json::object());
    Json outer_required = std::exchange(required_, Json::array());
    const Struct defaults{};
    describe(*this, defaults);
    Json made = {{"type", "object"}, {"additionalProperties", false}};
    if (!required_.empty()) made["required"] = required_;
    made["properties"] = properties_;
    properties_ = std::move(outer_properties);
    required_ = std::move(outer_required);
    return made;
  }

  template <class Member>
  void operator()(const char* key, const Member& value, Need need, const char* about, const Limits& limits = {}) {
    Json schema = {{"description", about}};
    schema.update(of(value, limits));
    addDefault(schema, value, need);
    properties_[key] = schema;
    if (need == Need::kRequired) required_.push_back(key);
  }

 private:
  template <class T>
  Json of(const T& x, const Limits& limits) {
    if constexpr (kIsOptional<T>) {
      return of(typename T::value_type{}, limits);
    } else if constexpr (kIsVector<T>) {
      return {{"type", "array"}, {"items", of(typename T::value_type{}, limits)}};
    } else if constexpr (std::same_as<T, Typed>) {
      return {{"type", "object"}, {"additionalProperties", {{"type", "string"}}}};
    } else if constexpr (kIsStruct<T>) {
      return reference<T>();
    } else if constexpr (std::is_enum_v<T>) {
      Json choices = Json::array();
      for (const auto& [choice, word] : words(T{})) choices.push_back(word);
      return {{"type", "string"}, {"enum", choices}};
    } else if constexpr (std::same_as<T, std::string>) {
      return {{"type", "string"}};
    } else if constexpr (std::same_as<T, bool>) {
      return {{"type", "boolean"}};
    } else {
      return number(std::integral<T> ? "integer" : "number", limits, x);
    }
  }

  template <class T>
  Json number(const char* type, const Limits& limits, const T&) {
    return {{"type", type}, {limits.above ? "exclusiveMinimum" : "minimum", limits.least}, {"maximum", limits.most}};
  }

  template <class T>
  Json reference() {
    const std::string name = definitionName(NameOf<T>::kValue);
    if (!definitions_.contains(name)) {
      definitions_[name] = nullptr;  // holds its place, in order of first use
      Json made = object<T>();
      definitions_[name] = std::move(made);
    }
    // In draft 7 nothing beside $ref counts, so the reference stands in allOf.
    return {{"allOf", Json::array({{{"$ref", "#/definitions/" + name}}})}};
  }

  template <class T>
  static void addDefault(Json& schema, const T& value, Need need) {
    if (need == Need::kRequired) return;
    if constexpr (std::is_enum_v<T>) {
      for (const auto& [choice, word] : words(T{}))
        if (choice == value) schema["default"] = word;
    } else if constexpr (std::is_arithmetic_v<T>) {
      schema["default"] = value;
    }
  }

  Json& definitions_;
  Json properties_ = Json::object();
  Json required_ = Json::array();
};

}  // namespace

std::string schemaText() {
  Json definitions = Json::object();
  const Json top = SchemaMaker(definitions).object<Loop>();
  Json schema = {{"$schema", "http://json-schema.org/draft-07/schema#"},
                 {"$id", "ebbline-1.schema.json"},
                 {"title", "Ebbline loop, schema version " + std::to_string(kSchemaVersion)},
                 {"description", "A branched chilled- or hot-water loop. Units are in the names of the keys."},
                 {"type", "object"},
                 {"additionalProperties", false},
                 {"required", {"schema_version"}}};
  schema["properties"]["schema_version"] = {{"description", "Version of this format."}, {"const", kSchemaVersion}};
  schema["properties"].update(top["properties"]);
  schema["definitions"] = std::move(definitions);
  return schema.dump(2) + "\n";
}

}  // namespace ebbline::loop
