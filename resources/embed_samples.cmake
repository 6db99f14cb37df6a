# cmake -DOUTPUT=x.cpp -DFILES=a.ebbline,b.ebbline -P embed_samples.cmake
# Writes one C++ file that holds every sample as raw string literals, cut because compilers limit the length of one.
set(piece_length 8000)
string(REPLACE "," ";" FILES "${FILES}")
set(entries "")
set(count 0)
foreach(file IN LISTS FILES)
  get_filename_component(name "${file}" NAME_WE)
  file(READ "${file}" text)
  string(FIND "${text}" ")ebb\"" closing)
  if(NOT closing EQUAL -1)
    message(FATAL_ERROR "${file} holds the end mark of a raw string literal")
  endif()
  string(LENGTH "${text}" length)
  string(APPEND entries "    {\"${name}\",")
  set(start 0)
  while(start LESS length)
    string(SUBSTRING "${text}" ${start} ${piece_length} piece)
    string(APPEND entries "\n     R\"ebb(${piece})ebb\"")
    math(EXPR start "${start} + ${piece_length}")
  endwhile()
  string(APPEND entries "},\n")
  math(EXPR count "${count} + 1")
endforeach()
file(WRITE "${OUTPUT}" "// Made from samples/ by resources/embed_samples.cmake.
#include <string_view>

namespace ebbline::resources {

struct EmbeddedSample {
  std::string_view name;
  std::string_view text;
};
extern const EmbeddedSample kEmbeddedSamples[];
extern const int kNumEmbeddedSamples;
const EmbeddedSample kEmbeddedSamples[] = {
${entries}};
const int kNumEmbeddedSamples = ${count};

}  // namespace ebbline::resources
")
