#include "carboy/water.h"

#include <cmath>

#include "carboy/error.h"

#include "catch_shim.h"
#include "support/csv.h"

using namespace carboy;

// water.csv: python3-iapws 1.5.3 (IAPWS-95 density, IAPWS R8-97 permittivity, IAPWS R11-07 ion product), made by
// others.
TEST_CASE("water agrees with a library that nobody here wrote, 0 to 99 °C", "[reference][water]") {
    for (const auto& row : test::read_reference("water.csv")) {
        const double t = std::stod(row.at("t_C"));
        const WaterProperties water = water_at(Temperature::celsius(t));
        INFO("t = " << t << " °C");
        // Kell 1975 rests on IPTS-68; the published difference to IAPWS-95 is 0.004 kg/m3 to 50 °C and 0.016 at 100 °C.
        CHECK(std::abs(water.density_kg_per_L * 1000 - std::stod(row.at("density_kg_m3"))) < (t <= 50 ? 0.005 : 0.017));
        CHECK(std::abs(water.relative_permittivity - std::stod(row.at("permittivity"))) < 0.005);
        CHECK(std::abs(water.pKw - std::stod(row.at("pKw"))) < 0.0005);
        CHECK(std::abs(water.debye_huckel_A - std::stod(row.at("A_log10_molal"))) < 0.00005);
    }
}

TEST_CASE("water: check value of the release on permittivity", "[reference][water]") {
    // IAPWS R8-97: 78.5907250 at 999.242866 kg/m3 and 298.15 K; at the density of 0.1 MPa (997.047 kg/m3) it
    // is 78.4085.
    CHECK(water_at(Temperature::celsius(25)).relative_permittivity == Approx(78.4085).margin(0.0005));
}

TEST_CASE("water: B of the Debye-Hückel equation", "[reference][water]") {
    // B in kg^0.5 mol^-0.5 nm^-1 with CODATA 2018 constants and IAPWS water: 3.285 at 25 °C, 3.327 at 50 °C, 3.421 at
    // 100 °C.
    CHECK(water_at(Temperature::celsius(25)).debye_huckel_B_per_nm == Approx(3.285).margin(0.001));
    CHECK(water_at(Temperature::celsius(50)).debye_huckel_B_per_nm == Approx(3.327).margin(0.002));
    CHECK(water_at(Temperature::celsius(100)).debye_huckel_B_per_nm == Approx(3.421).margin(0.003));
}

TEST_CASE("water: only liquid at normal pressure", "[water]") {
    CHECK_NOTHROW(water_at(Temperature::celsius(0)));
    CHECK_NOTHROW(water_at(Temperature::celsius(100)));
    for (const double t : {-0.001, 100.001, -300.0, 1e9, std::nan("")}) {
        try {
            water_at(Temperature::celsius(t));
            FAIL("no error at " << t);
        } catch (const Error& error) {
            CHECK(error.code() == "temperature_out_of_range");
            CHECK(error.kind() == ErrorKind::input);
        }
    }
}
