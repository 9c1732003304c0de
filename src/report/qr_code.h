#pragma once

#include <string>

namespace carboy {

/// A QR code (ISO/IEC 18004) of a text, as the path of its dark modules.
struct QrCode {
    int modules = 0;   ///< along one side, without the quiet zone of four modules that belongs around it
    std::string path;  ///< SVG path data, one unit a module
};

/// Medium error correction or better, the smallest symbol that holds the text. UTF-8 is announced in the code where the
/// text needs it. A text beyond 2,300 bytes: Error `label_too_long` (input).
QrCode qr_code(const std::string& text);

}  // namespace carboy
