// Catch2 v3 brings its own main; v2 wants it compiled once, here.
#ifndef CARBOY_CATCH2_V3
#define CATCH_CONFIG_MAIN
#include <catch2/catch.hpp>
#endif
