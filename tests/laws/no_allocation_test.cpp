#include <atomic>
#include <cstdlib>
#include <new>

#include "carboy/equilibrium.h"

#include "catch_shim.h"
#include "laws/random_mixture.h"

namespace {

std::atomic<long> allocations{0};

}  // namespace

// Counts every allocation of the test program; only differences matter.
void* operator new(std::size_t size) {
    ++allocations;
    if (void* memory = std::malloc(size == 0 ? 1 : size)) {
        return memory;
    }
    throw std::bad_alloc();
}
void* operator new(std::size_t size, const std::nothrow_t&) noexcept {
    ++allocations;
    return std::malloc(size == 0 ? 1 : size);
}
void operator delete(void* memory) noexcept {
    std::free(memory);
}
void operator delete(void* memory, std::size_t) noexcept {
    std::free(memory);
}

using namespace carboy;

TEST_CASE("solving allocates nothing", "[laws][speed]") {
    std::mt19937_64 random(3);
    for (int trial = 0; trial < 50; ++trial) {
        const Mixture mixture = test::random_mixture(random, bundled_table(), 1.0);
        EquilibriumSolver solver(bundled_table(), mixture, test::random_temperature(random), davies_model());
        const long before = allocations;
        solver.solve();
        solver.hold_at(PH(7));
        for (std::size_t part = 0; part < solver.part_count(); ++part) {
            solver.set_total(part, Molality::mol_per_kg(0.01));
        }
        solver.solve();
        const long after = allocations;
        REQUIRE(after == before);
    }
    // The counter itself works.
    const long before = allocations;
    const auto memory = std::make_unique<int>(1);
    CHECK(allocations > before);
}
