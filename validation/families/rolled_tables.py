"""Section tables: dimensions and constants as they are printed, digit by digit, so that their rounding is known.

EN: EN 10365:2017 and mills' tables, h b tw tf r in mm; A cm², Iy Iz It cm⁴, Iw cm⁶. IPE: A, Iy, Iz and dimensions read in a
copy of an open table, the rest from memory; HEA, HEB, UPN from memory (UPN: tf at b/2, 8 %). EN 10219-2:2006, read in a copy.
AISC: Shapes Database v15.0, 2017, read in a copy; inches. Root radii of W and WT are kdes - tf, of L kdes - t.
"""

from __future__ import annotations

from collections.abc import Mapping

Row = Mapping[str, str]

EN_I: Mapping[str, Row] = {
    "IPE 200": {"h": "200", "b": "100", "tw": "5.6", "tf": "8.5", "r": "12", "A": "28.48", "Iy": "1943", "Iz": "142.4",
                "It": "6.98", "Iw": "12990"},
    "IPE 300": {"h": "300", "b": "150", "tw": "7.1", "tf": "10.7", "r": "15", "A": "53.81", "Iy": "8356", "Iz": "603.8",
                "It": "20.12", "Iw": "125900"},
    "IPE 500": {"h": "500", "b": "200", "tw": "10.2", "tf": "16", "r": "21", "A": "115.5", "Iy": "48200", "Iz": "2142",
                "It": "89.29", "Iw": "1249000"},
    "HEA 200": {"h": "190", "b": "200", "tw": "6.5", "tf": "10", "r": "18", "A": "53.83", "Iy": "3692", "Iz": "1336",
                "It": "20.98", "Iw": "108000"},
    "HEA 300": {"h": "290", "b": "300", "tw": "8.5", "tf": "14", "r": "27", "A": "112.5", "Iy": "18260", "Iz": "6310",
                "It": "85.17", "Iw": "1200000"},
    "HEB 300": {"h": "300", "b": "300", "tw": "11", "tf": "19", "r": "27", "A": "149.1", "Iy": "25170", "Iz": "8563",
                "It": "185.0", "Iw": "1688000"},
}  # fmt: skip

EN_UPN: Mapping[str, Row] = {
    "UPN 200": {"h": "200", "b": "75", "tw": "8.5", "tf": "11.5", "r1": "11.5", "r2": "6.0", "A": "32.2", "Iy": "1910",
                "Iz": "148", "It": "11.9", "Iw": "9070", "ys": "2.01", "ym": "3.94"},
    "UPN 300": {"h": "300", "b": "100", "tw": "10", "tf": "16", "r1": "16", "r2": "8.0", "A": "58.8", "Iy": "8030", "Iz": "495",
                "It": "37.4", "Iw": "69100", "ys": "2.70", "ym": "5.41"},
}  # fmt: skip

EN_RHS: Mapping[str, Row] = {
    "RHS 50x30x2": {"h": "50", "b": "30", "t": "2.0", "A": "2.94", "Iy": "9.54", "Iz": "4.29", "It": "9.77"},
}  # fmt: skip

AISC_W: Mapping[str, Row] = {
    "W8X31": {"d": "8.00", "bf": "8.00", "tw": "0.285", "tf": "0.435", "kdes": "0.829", "A": "9.13", "Ix": "110", "Iy": "37.1",
              "J": "0.536", "Cw": "530"},
    "W10X49": {"d": "10.0", "bf": "10.0", "tw": "0.340", "tf": "0.560", "kdes": "1.06", "A": "14.4", "Ix": "272", "Iy": "93.4",
               "J": "1.39", "Cw": "2070"},
    "W12X26": {"d": "12.2", "bf": "6.49", "tw": "0.230", "tf": "0.380", "kdes": "0.680", "A": "7.65", "Ix": "204", "Iy": "17.3",
               "J": "0.300", "Cw": "607"},
    "W14X90": {"d": "14.0", "bf": "14.5", "tw": "0.440", "tf": "0.710", "kdes": "1.31", "A": "26.5", "Ix": "999", "Iy": "362",
               "J": "4.06", "Cw": "16000"},
    "W18X35": {"d": "17.7", "bf": "6.00", "tw": "0.300", "tf": "0.425", "kdes": "0.827", "A": "10.3", "Ix": "510", "Iy": "15.3",
               "J": "0.506", "Cw": "1140"},
    "W36X150": {"d": "35.9", "bf": "12.0", "tw": "0.625", "tf": "0.940", "kdes": "1.69", "A": "44.3", "Ix": "9040", "Iy": "270",
                "J": "10.1", "Cw": "82200"},
}  # fmt: skip

AISC_C: Mapping[str, Row] = {
    "C10X20": {"d": "10.0", "bf": "2.74", "tw": "0.379", "tf": "0.436", "A": "5.87", "x": "0.606", "eo": "0.636", "Ix": "78.9",
               "Iy": "2.80", "J": "0.368", "Cw": "56.9"},
    "C12X20.7": {"d": "12.0", "bf": "2.94", "tw": "0.282", "tf": "0.501", "A": "6.08", "x": "0.698", "eo": "0.870", "Ix": "129",
                 "Iy": "3.86", "J": "0.369", "Cw": "112"},
}  # fmt: skip

AISC_L: Mapping[str, Row] = {
    "L4X4X1/2": {"d": "4.00", "b": "4.00", "t": "0.500", "kdes": "0.875", "A": "3.75", "x": "1.18", "Ix": "5.52", "J": "0.322",
                 "Cw": "0.366"},
}  # fmt: skip

AISC_WT: Mapping[str, Row] = {
    "WT6X25": {"d": "6.10", "bf": "8.08", "tw": "0.370", "tf": "0.640", "kdes": "1.14", "A": "7.30", "y": "1.17", "Ix": "18.7",
               "Iy": "28.2", "J": "0.855", "Cw": "1.23"},
}  # fmt: skip

AISC_HSS: Mapping[str, Row] = {
    "HSS6X4X1/4": {"h": "6.00", "b": "4.00", "t": "0.233", "A": "4.30", "Iy": "20.9", "Iz": "11.1", "It": "23.6"},
    "HSS8X8X1/2": {"h": "8.00", "b": "8.00", "t": "0.465", "A": "13.5", "Iy": "125", "Iz": "125", "It": "204"},
}  # fmt: skip


def half_digit(printed: str, digits: int = 3) -> float:
    """Return half a unit of the last digit of a printed number; zeros past so many digits fill an integer up."""
    if "." in printed:
        return 0.5 * 10.0 ** -len(printed.split(".")[1])
    zeros = len(printed) - len(printed.rstrip("0"))
    return 0.5 * 10.0 ** max(0, min(zeros, len(printed) - digits))
