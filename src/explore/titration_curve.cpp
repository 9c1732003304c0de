#include <algorithm>
#include <array>
#include <cmath>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/prediction.h"
#include "carboy/titration.h"

namespace carboy {

namespace {

// What can be seen: 3 between the pK of neighbouring steps is the textbook rule for a usable end point.
constexpr double visible_gap_pK = 3;

/// 1, 2 or 5 times a power of ten, not below `least`.
double round_up(double least) {
    const double power = std::pow(10.0, std::floor(std::log10(least)));
    for (const double digit : {1.0, 2.0, 5.0}) {
        if (digit * power >= least * (1 - 1e-12)) {
            return digit * power;
        }
    }
    return 10 * power;
}

/// Twelve digits of a millilitre are kept, so that three times 0.1 is 0.3.
Volume multiple(Volume step, std::size_t count) {
    return Volume::millilitres(std::round(step.mL() * static_cast<double>(count) * 1e12) / 1e12);
}

/// Where |slope| is largest between two volumes, by golden section.
Volume steepest_between(Titration& titration, Volume low, Volume high) {
    constexpr double golden = 0.6180339887498949;
    const auto slope = [&](Volume at) { return std::abs(titration.at(at).slope_per_mL); };
    Volume a = high - (high - low) * golden;
    Volume b = low + (high - low) * golden;
    double at_a = slope(a);
    double at_b = slope(b);
    for (int round = 0; round < 60 && high - low > high * 1e-9; ++round) {
        if (at_a > at_b) {
            high = b;
            b = a;
            at_b = at_a;
            a = high - (high - low) * golden;
            at_a = slope(a);
        } else {
            low = a;
            a = b;
            at_a = at_b;
            b = low + (high - low) * golden;
            at_b = slope(b);
        }
    }
    return (low + high) / 2;
}

/// Maxima of |d pH / d V| inside the curve.
std::vector<Volume> steepest_places(Titration& titration, const std::vector<TitrationPoint>& points) {
    std::vector<Volume> places;
    for (std::size_t i = 1; i + 1 < points.size(); ++i) {
        const double here = std::abs(points[i].slope_per_mL);
        if (here >= std::abs(points[i - 1].slope_per_mL) && here > std::abs(points[i + 1].slope_per_mL)) {
            places.push_back(steepest_between(titration, points[i - 1].added, points[i + 1].added));
        }
    }
    return places;
}

/// Stoichiometry first; a maximum of the slope within 3 % of it confirms that a jump can be seen there.
std::vector<EquivalencePoint> equivalence_points(Titration& titration, const std::vector<TitrationPoint>& points) {
    constexpr double same_place = 0.03;
    constexpr double a_tenth_more = 1.1;
    const std::vector<Volume> maxima = steepest_places(titration, points);
    std::vector<EquivalencePoint> found;
    for (const auto& equivalent : titration.equivalents()) {
        if (equivalent.volume > points.back().added) {
            break;
        }
        EquivalencePoint point;
        point.volume = equivalent.volume;
        point.system = equivalent.system;
        point.step = equivalent.step;
        double nearest = same_place;
        for (const Volume& at : maxima) {
            const double apart = std::abs(at / equivalent.volume - 1);
            if (apart < nearest) {
                nearest = apart;
                point.steepest = at;
            }
        }
        point.ph_past = titration.ph_at(equivalent.volume * a_tenth_more);
        point.ph = titration.ph_at(point.steepest.value_or(point.volume));
        found.push_back(point);
    }
    return found;
}

/// Past the last equivalence point that can be seen; without one, as much titrant as sample.
Volume enough(Titration& titration, const TitrationRequest& request) {
    constexpr double much_titrant = 20;
    Volume end;
    for (const auto& equivalent : titration.equivalents()) {
        if (equivalent.volume < titration.sample_volume() * much_titrant) {
            const bool visible = equivalent.gap_pK > visible_gap_pK;
            end = std::max(end, equivalent.volume * (visible ? 1.5 : 1.0));
        }
    }
    if (!request.shifts.empty()) {
        const double target = titration.ph_at({}).value() + titration.direction() * request.shifts.front();
        const auto asked = titration.volume_to(PH(target));
        end = std::max(end, asked && *asked < titration.sample_volume() * much_titrant ? *asked * 1.2 : Volume{});
    }
    return end > Volume{} ? end : titration.sample_volume();
}

Volume end_of(Titration& titration, const TitrationRequest& request, const Reagent& titrant) {
    if (request.to_volume) {
        return *request.to_volume;
    }
    if (!request.to_ph) {
        return enough(titration, request);
    }
    const auto end = titration.volume_to(*request.to_ph);
    if (!end) {
        const double start = titration.ph_at({}).value();
        const double last = titration.ph_at(titration.sample_volume() * 1000).value();
        throw Error(ErrorKind::no_recipe, "unreachable_target",
                    fmt::format("pH {:.2f} is out of reach: it begins at pH {:.2f}, and a thousand times its volume of "
                                "this {} brings pH {:.2f}",
                                request.to_ph->value(), start, titrant.name, last),
                    "--to-ph", "take a stronger titrant, or the one that moves the pH the other way");
    }
    return *end;
}

void add_warnings(TitrationCurve& curve, const Table& table, const Titration& titration, const ActivityModel& model) {
    for (const Volume& added : {curve.points.back().added, Volume{}}) {
        for (Warning& warning : predict(table, titration.mixture_at(added), curve.temperature, model).warnings) {
            const bool known = std::any_of(curve.warnings.begin(), curve.warnings.end(),
                                           [&](const Warning& other) { return other.code == warning.code; });
            if (!known) {
                curve.warnings.push_back(std::move(warning));
            }
        }
    }
}

}  // namespace

std::vector<TitrationPoint> curve_points(Titration& titration, Volume to, Volume spacing) {
    constexpr double finer_than = 0.2;
    constexpr double finest = 1e-6;  // of the whole: no burette shows less
    std::vector<TitrationPoint> points;
    const auto whole = static_cast<std::size_t>(std::floor(to / spacing * (1 + 1e-12)));
    points.reserve(whole + 256);
    points.push_back(titration.at({}));
    std::array<TitrationPoint, 32> ahead;  // what is still to be reached, nearest last
    for (std::size_t i = 1; i <= whole + 1; ++i) {
        const Volume next = std::min(multiple(spacing, i), to);
        if (next - points.back().added <= spacing * 1e-9) {
            break;
        }
        std::size_t waiting = 0;
        ahead[waiting++] = titration.at(next);
        while (waiting > 0) {
            const TitrationPoint& target = ahead[waiting - 1];
            const TitrationPoint& last = points.back();
            const bool jump = std::abs(target.ph.value() - last.ph.value()) > finer_than;
            if (jump && target.added - last.added > to * finest && waiting < ahead.size()) {
                ahead[waiting++] = titration.at((last.added + target.added) / 2);
            } else {
                points.push_back(target);
                --waiting;
            }
        }
    }
    return points;
}

TitrationCurve titrate(const Table& table, const TitrationRequest& request, const ActivityModel& model) {
    if (request.titrant.portions.size() != 1) {
        throw Error(ErrorKind::input, "usage", "a titrant is one reagent in water", "--with",
                    "write it like 0.1 M NaOH");
    }
    const Reagent& reagent = table.reagents[request.titrant.portions.front().reagent];
    Solution sample = solution_of(table, request.sample);
    if (request.sample_volume) {
        sample.water = sample.water * (*request.sample_volume / sample.volume);
        sample.volume = *request.sample_volume;
    }
    const Solution poured = solution_of(table, request.titrant);
    Titration titration(table, sample, poured, request.temperature, model);

    TitrationCurve curve;
    curve.sample_volume = sample.volume;
    curve.titrant = request.titrant.portions.front().reagent;
    const Portion& portion = request.titrant.portions.front();
    curve.titrant_strength = Molarity::mol_per_L(
        (portion.amount ? portion.amount->mol() : portion.molality->mol_per_kg() * poured.water.kg()) /
        poured.volume.L());
    curve.temperature = request.temperature;
    curve.activity_model = model.name();

    constexpr double rows = 20;
    constexpr double most_rows = 10000;
    constexpr double fineness = 200;
    Volume end = end_of(titration, request, reagent);
    curve.step = request.step.value_or(Volume::millilitres(round_up(end.mL() / rows)));
    if (end / curve.step > most_rows) {
        throw Error(ErrorKind::input, "usage", fmt::format("that is a table of {:.0f} rows", end / curve.step),
                    "--step", "take a larger step");
    }
    if (!request.to_volume && !request.to_ph) {
        end = multiple(curve.step, static_cast<std::size_t>(std::ceil(end / curve.step * (1 - 1e-9))));
    }
    const double divisions = std::max(1.0, std::ceil(fineness * (curve.step / end)));
    curve.points = curve_points(titration, end, curve.step / divisions);
    curve.ph_expanded_k2.reserve(curve.points.size());
    for (const TitrationPoint& point : curve.points) {
        titration.ph_at(point.added);
        curve.ph_expanded_k2.push_back(ph_uncertainty(titration.solver(), table, model).expanded_k2);
    }
    curve.equivalence = equivalence_points(titration, curve.points);
    const int direction = titration.direction();
    for (const double shift : request.shifts) {
        const PH target(curve.points.front().ph.value() + direction * shift);
        curve.shifts.push_back({direction * shift, target, titration.volume_to(target)});
    }
    add_warnings(curve, table, titration, model);
    return curve;
}

}  // namespace carboy
