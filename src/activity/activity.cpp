#include "carboy/activity.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

namespace carboy {

namespace {

constexpr int highest_charge = 8;  // the constants table admits no higher one
// Keeps g1^(z^2) finite for z up to 8. Davies passes it only beyond I = 29 mol/kg, far outside any use.
constexpr double highest_log_gamma1 = 10.0;

/// Writes g1^(z^2) and z^2 slope for every species, given the values of a singly charged ion.
void spread_over_charges(const Composition& composition, double log_gamma1, double log_slope1, Activities& out) {
    // g(z+1) = g(z) g1^(2z+1): one exp serves all charges, and looking up by charge beats branching on it.
    std::array<double, 2 * highest_charge + 1> gamma{};
    std::array<double, 2 * highest_charge + 1> slope{};
    double g = 1.0;
    double odd_power = std::exp(std::min(log_gamma1, highest_log_gamma1));
    const double square = odd_power * odd_power;
    for (std::size_t z = 0; z <= static_cast<std::size_t>(composition.highest_charge); ++z) {
        gamma[highest_charge + z] = gamma[highest_charge - z] = g;
        slope[highest_charge + z] = slope[highest_charge - z] = log_slope1 * static_cast<double>(z * z);
        g *= odd_power;
        odd_power *= square;
    }
    const std::size_t count = composition.charge.size();
    for (std::size_t i = 0; i < count; ++i) {
        const auto place = static_cast<std::size_t>(composition.charge[i]) + highest_charge;
        out.coefficient[i] = gamma[place];
        out.log_slope_kg_per_mol[i] = slope[place];
    }
    out.water_activity = 1.0;
}

/// Grows as sqrt I to `at_tenth` at 0.1 mol/kg, then by `per_mol` for every mol/kg.
double growing_uncertainty(double ionic_strength, double at_tenth, double per_mol) {
    return at_tenth * std::sqrt(std::min(ionic_strength, 0.1) / 0.1) + per_mol * std::max(ionic_strength - 0.1, 0.0);
}

class Davies final : public ActivityModel {
public:
    std::string_view name() const override { return "davies"; }
    double trusted_to_mol_per_kg() const override { return 0.5; }
    double ph_uncertainty(Molality ionic_strength) const override {
        // 0.009 is the root mean square residual on the certified standards up to 0.1 mol/kg (tests/reference); Davies
        // gave his equation an error of about 2 % in the activity coefficient at 0.1 and 8 % at 0.5 mol/kg. From
        // memory.
        return growing_uncertainty(ionic_strength.mol_per_kg(), 0.009, 0.1);
    }
    void evaluate(const WaterProperties& water, const Composition& composition, Activities& out) const override {
        constexpr double linear = 0.3;  // Davies 1962; his 1938 form had 0.2
        const double scale = -water.debye_huckel_A * std::numbers::ln10;
        // The slope is infinite at I = 0; pure water already holds 1e-7 mol/kg, a floor well under that costs nothing.
        const double ionic_strength = std::max(composition.ionic_strength_mol_per_kg, 1e-30);
        const double root = std::sqrt(ionic_strength);
        const double log_gamma1 = scale * (root / (1.0 + root) - linear * ionic_strength);
        const double log_slope1 = scale * (0.5 / (root * (1.0 + root) * (1.0 + root)) - linear);
        spread_over_charges(composition, log_gamma1, log_slope1, out);
    }
};

class DebyeHuckel final : public ActivityModel {
public:
    std::string_view name() const override { return "debye-huckel"; }
    double trusted_to_mol_per_kg() const override { return 0.1; }
    double ph_uncertainty(Molality ionic_strength) const override {
        // Without the linear term the coefficients of buffers are too low beyond 0.1 mol/kg. Own estimate, from the
        // difference to Davies.
        return growing_uncertainty(ionic_strength.mol_per_kg(), 0.012, 0.2);
    }
    void evaluate(const WaterProperties& water, const Composition& composition, Activities& out) const override {
        constexpr double ion_size_nm = 0.4565;
        const double scale = -water.debye_huckel_A * std::numbers::ln10;
        const double ba = water.debye_huckel_B_per_nm * ion_size_nm;
        const double ionic_strength = std::max(composition.ionic_strength_mol_per_kg, 1e-30);
        const double root = std::sqrt(ionic_strength);
        const double denominator = 1.0 + ba * root;
        spread_over_charges(composition, scale * root / denominator, scale * 0.5 / (root * denominator * denominator),
                            out);
    }
};

class Ideal final : public ActivityModel {
public:
    std::string_view name() const override { return "ideal"; }
    double trusted_to_mol_per_kg() const override { return 0.001; }
    double ph_uncertainty(Molality ionic_strength) const override {
        // All that is left out: for a doubly charged base, three times the limiting law's term. Own estimate.
        const double root = std::sqrt(ionic_strength.mol_per_kg());
        return 3.0 * 0.51 * root / (1.0 + root);
    }
    void evaluate(const WaterProperties&, const Composition& composition, Activities& out) const override {
        spread_over_charges(composition, 0.0, 0.0, out);
    }
};

}  // namespace

const ActivityModel& davies_model() {
    static const Davies model;
    return model;
}

const ActivityModel& debye_huckel_model() {
    static const DebyeHuckel model;
    return model;
}

const ActivityModel& ideal_model() {
    static const Ideal model;
    return model;
}

const ActivityModel* find_activity_model(std::string_view name) {
    const std::array models{&davies_model(), &debye_huckel_model(), &ideal_model()};
    const auto* hit =
        std::find_if(models.begin(), models.end(), [&](const auto* model) { return model->name() == name; });
    return hit == models.end() ? nullptr : *hit;
}

}  // namespace carboy
