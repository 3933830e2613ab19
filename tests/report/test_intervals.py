"""Values with the digits that their interval supports; the interval as printed holds the true one."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from xsec_fem.report.intervals import certified


@pytest.mark.parametrize(
    ("value", "interval", "scale", "text"),
    [
        (5.52891, (5.5259, 5.5318), 0.0, "5.529 [5.525, 5.532]"),  # half width 0.003: thousandths
        (5.5, (5.0, 6.0), 0.0, "5.5 [5.0, 6.0]"),
        (197529.3, (197528.6, 197530.9), 0.0, "197529 [197528, 197531]"),
        (104014450.3, (104014299.7, 104014450.3), 0.0, "1.04014e8 [1.04014e8, 1.04015e8]"),  # six digits at most
        (81722.0, (80000.0, 84000.0), 0.0, "82000 [80000, 84000]"),
        (2.5e-5, (2.4e-5, 2.6e-5), 0.0, "2.5e-5 [2.4e-5, 2.6e-5]"),
        (0.003, (-0.5, 0.5), 0.0, "0 [-0.5, 0.5]"),
        (1.8e-7, (-1.2e-6, 1.0e-6), 200.0, "0 [-0.0001, 0.0001]"),  # below a millionth of 200 all is round-off
        (-178.6123, (-178.6125, -178.6122), 0.0, "-178.612 [-178.613, -178.612]"),
        (0.0, (0.0, 0.0), 0.0, "0 [0, 0]"),
        (3.0, (3.0, 3.0), 0.0, "3.00000 [3.00000, 3.00000]"),
    ],
)
def test_the_last_digit_is_that_of_the_half_width(value, interval, scale, text):
    assert " ".join(certified(value, interval, scale)) == text


@settings(deadline=None, max_examples=200)
@given(
    st.floats(-1e12, 1e12).filter(lambda x: abs(x) > 1e-12),
    st.floats(1e-9, 2.0),
    st.floats(0.0, 1.0),
    st.sampled_from([0.0, 1e-6, 1.0, 1e6]),
)
def test_what_is_printed_holds_the_interval_and_no_more_than_it_must(middle, width, share, scale):
    low, high = middle - abs(middle) * width / 2, middle + abs(middle) * width / 2
    value = low + share * (high - low)
    text, bounds = certified(value, (low, high), scale)
    shown_low, shown_high = (float(end) for end in bounds.strip("[]").split(", "))
    round_off = 4e-16 * (abs(low) + abs(high))  # reading a decimal back
    assert shown_low <= low + round_off
    assert shown_high >= high - round_off
    assert shown_low - round_off <= float(text) <= shown_high + round_off
    last = max(abs(low), abs(high)) * 1e-5 + 1e-6 * scale  # one unit of the last place, when it is not the half width's
    assert shown_high - shown_low <= (high - low) * 2.0 + 2 * last
