#pragma once

// One spelling for both generations of Catch2.
#ifdef CARBOY_CATCH2_V3
#include <catch2/catch_all.hpp>
using Catch::Approx;
#else
#include <catch2/catch.hpp>
#endif
