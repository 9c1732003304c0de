#include <array>
#include <charconv>
#include <optional>
#include <string>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/measurements.h"
#include "carboy/notation.h"

namespace carboy {

namespace {

class MeasurementsReader {
public:
    MeasurementsReader(const Table& table, Temperature filled_at, double uncertainty, std::string_view where)
        : table_(table), filled_at_(filled_at), uncertainty_(uncertainty), where_(where) {}

    Measurements read(std::string_view csv) {
        bool has_header = false;
        while (!csv.empty()) {
            ++line_;
            const std::size_t end = std::min(csv.find('\n'), csv.size());
            std::string_view text = csv.substr(0, end);
            csv.remove_prefix(std::min(end + 1, csv.size()));
            if (line_ == 1 && text.starts_with("\xEF\xBB\xBF")) {
                text.remove_prefix(3);  // spreadsheets write a byte-order mark
            }
            if (text.ends_with('\r')) {
                text.remove_suffix(1);
            }
            if (text.find_first_not_of(" \t,") == std::string_view::npos || text.starts_with('#')) {
                continue;
            }
            const auto cells = cells_of(text);
            if (has_header) {
                read_row(cells);
            } else {
                read_header(cells);
                has_header = true;
            }
        }
        if (!has_header || result_.points.empty()) {
            fail("there are no measurements in it", "a header, then a line for each reading");
        }
        return std::move(result_);
    }

private:
    [[noreturn]] void fail(const std::string& message, const std::string& help) const {
        throw Error(ErrorKind::input, "bad_measurements", message, fmt::format("{}, line {}", where_, line_), help);
    }

    std::vector<std::string> cells_of(std::string_view text) const {
        std::vector<std::string> cells(1);
        bool quoted = false;
        for (std::size_t i = 0; i < text.size(); ++i) {
            if (text[i] == '"') {
                if (quoted && i + 1 < text.size() && text[i + 1] == '"') {
                    cells.back() += '"';
                    ++i;
                } else {
                    quoted = !quoted;
                }
            } else if (text[i] == ',' && !quoted) {
                cells.emplace_back();
            } else if (quoted || text[i] != ' ' || !cells.back().empty()) {
                cells.back() += text[i];
            }
        }
        if (quoted) {
            fail("a quoted cell is not closed", "end it with \"");
        }
        for (std::string& cell : cells) {
            while (cell.ends_with(' ')) {
                cell.pop_back();
            }
        }
        return cells;
    }

    void read_header(const std::vector<std::string>& cells) {
        for (std::size_t i = 0; i < cells.size(); ++i) {
            const std::string& cell = cells[i];
            const auto take = [&](std::optional<std::size_t>& column) {
                if (column) {
                    fail(fmt::format("the column '{}' stands twice, or two columns mean the same", cell),
                         "keep one of them");
                }
                column = i;
            };
            if (cell == "volume_mL" || cell == "volume_L" || cell == "volume_uL") {
                take(volume_);
                litres_per_unit_ = cell == "volume_mL" ? 1e-3 : cell == "volume_L" ? 1.0 : 1e-6;
            } else if (cell == "mixture") {
                take(mixture_);
            } else if (cell == "u") {
                take(u_);
            } else if (cell == "pH" || cell == "mV" || cell == "degree") {
                take(reading_);
                result_.reading = cell == "pH"   ? ReadingKind::pH
                                  : cell == "mV" ? ReadingKind::millivolt
                                                 : ReadingKind::degree;
            } else {
                const auto near =
                    nearest_words(cell, {"volume_mL", "volume_L", "volume_uL", "mixture", "pH", "mV", "degree", "u"});
                fail(fmt::format("the column '{}' is not known here", cell),
                     near.empty() ? "columns are volume_mL or mixture; pH, mV or degree; and u, its uncertainty"
                                  : fmt::format("did you mean {}?", near.front()));
            }
        }
        if (!reading_) {
            fail("there is no column of readings", "head it pH, mV or degree");
        }
        if (volume_.has_value() == mixture_.has_value()) {
            fail(volume_ ? "it has both volumes and mixtures" : "it says nothing of what was in the vessel",
                 "head a column volume_mL for titrant added, or mixture for a mixture line each");
        }
        columns_ = cells.size();
        result_.has_mixtures = mixture_.has_value();
    }

    double number(const std::string& cell, const char* what) const {
        double value = 0;
        const auto [end, fault] = std::from_chars(cell.data(), cell.data() + cell.size(), value);
        if (fault != std::errc() || end != cell.data() + cell.size() || !(value > -1e6 && value < 1e6)) {
            fail(fmt::format("'{}' is no number for {}", cell, what),
                 "write plain numbers with a decimal point; units stand in the header");
        }
        return value;
    }

    void read_row(const std::vector<std::string>& cells) {
        if (cells.size() != columns_) {
            fail(fmt::format("{} cells where the header has {}", cells.size(), columns_),
                 "quote a cell that holds a comma");
        }
        Point point;
        if (mixture_) {
            point.mixture =
                read_mixture(cells[*mixture_], table_, filled_at_, fmt::format("{}, line {}", where_, line_));
        } else {
            const double volume = number(cells[*volume_], "a volume");
            if (volume < 0) {
                fail("a volume of titrant cannot be negative", "write what had been added in all");
            }
            point.titrant = Volume::litres(volume * litres_per_unit_);
        }
        point.reading = number(cells[*reading_], "a reading");
        point.uncertainty = u_ ? number(cells[*u_], "an uncertainty") : uncertainty_;
        if (!(point.uncertainty > 0)) {
            fail("an uncertainty must be above zero", "write the standard uncertainty of the reading, as 0.02");
        }
        result_.points.push_back(std::move(point));
    }

    const Table& table_;
    Temperature filled_at_;
    double uncertainty_;
    std::string_view where_;
    std::size_t line_ = 0;
    std::size_t columns_ = 0;
    double litres_per_unit_ = 1e-3;
    std::optional<std::size_t> volume_;
    std::optional<std::size_t> mixture_;
    std::optional<std::size_t> reading_;
    std::optional<std::size_t> u_;
    Measurements result_;
};

}  // namespace

Measurements read_measurements(std::string_view csv, const Table& table, Temperature filled_at, double uncertainty,
                               std::string_view where) {
    return MeasurementsReader(table, filled_at, uncertainty, where).read(csv);
}

}  // namespace carboy
