#include "report/qr_code.h"

#include <algorithm>
#include <qrcodegen/qrcodegen.hpp>
#include <vector>

#include <fmt/format.h>

#include "carboy/error.h"

namespace carboy {

namespace {

constexpr long utf8 = 26;  // assignment number of UTF-8 among the extended channel interpretations

qrcodegen::QrCode encoded(const std::string& text) {
    std::vector<qrcodegen::QrSegment> segments;
    if (std::any_of(text.begin(), text.end(), [](char c) { return static_cast<unsigned char>(c) >= 0x80; })) {
        segments.push_back(qrcodegen::QrSegment::makeEci(utf8));
    }
    segments.push_back(qrcodegen::QrSegment::makeBytes({text.begin(), text.end()}));
    try {
        return qrcodegen::QrCode::encodeSegments(segments, qrcodegen::QrCode::Ecc::MEDIUM);
    } catch (const qrcodegen::data_too_long&) {
        throw Error(ErrorKind::input, "label_too_long", "the label line is too long for a QR code", "label",
                    "shorten it");
    }
}

}  // namespace

QrCode qr_code(const std::string& text) {
    const qrcodegen::QrCode symbol = encoded(text);
    QrCode code{symbol.getSize(), {}};
    for (int y = 0; y < code.modules; ++y) {
        for (int x = 0; x < code.modules; ++x) {
            int run = 0;
            while (x + run < code.modules && symbol.getModule(x + run, y)) {
                ++run;
            }
            if (run > 0) {
                code.path += fmt::format("M{} {}h{}v1h-{}z", x, y, run, run);
                x += run;
            }
        }
    }
    return code;
}

}  // namespace carboy
