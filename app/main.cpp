#include <iostream>

#include "app/cli.h"

int main(int argc, char** argv) {
  const std::vector<std::string> arguments(argv + (argc > 0 ? 1 : 0), argv + argc);
  return ebbline::app::run(arguments, {std::cout, std::cerr});
}
