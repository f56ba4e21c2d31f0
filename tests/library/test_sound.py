"""What is refused before any file is touched."""

from dataclasses import replace

import numpy as np
import pytest

from curvelab.errors import DeviceError
from curvelab.library.sound import refuse_unsound
from curvelab.records.curve import Part, typed_part
from tests.library.devices import breaker, curve


def with_part(part: Part) -> object:
    return breaker("b32", replace(curve(), parts=(part,)))


@pytest.mark.parametrize(
    ("record", "words"),
    [
        (breaker("", curve()), "is no device key"),
        (breaker("x" * 65, curve()), "is no device key"),
        (breaker("b32\n", curve()), "is no device key"),
        (breaker("b32", kind="toaster"), "kind 'toaster' is not known"),
        (breaker("b32", curve("middle")), "edge 'middle' is not known"),
        (breaker("b32", curve(element="coil")), "element 'coil' is not known"),
        (breaker("b32", curve(base="xIz")), "base 'xIz' is not known"),
        (breaker("b32", curve(meaning="melting")), "meaning 'melting' is not known"),
        (breaker("b32", curve(), curve(time_s=3.0)), "two curves of the same element"),
        (breaker("b32", replace(curve(), parts=())), "no points"),
        (with_part(typed_part([], [])), "empty"),
        (with_part(typed_part([1, 2], [3])), "differ in length"),
        (with_part(typed_part([1, 0.0], [3, 2])), "point 2: the current 0 is not above zero"),
        (with_part(typed_part([1, 2], [np.inf, 2])), "point 1: the value inf"),
        (with_part(typed_part([1, np.nan], [3, 2])), "point 2: the current nan"),
        (with_part(typed_part([2, 1], [3, 2])), "the current falls between points 1 and 2"),
        (with_part(typed_part([1, 2, 3], [3, 2, 2.5])), "the time rises between points 2 and 3"),
        (with_part(replace(typed_part([1, 2], [3, 2]), sd_value=np.array([0.1, -0.1]))), "negative or infinite"),
    ],
)
def test_an_unsound_device_is_refused(record: object, words: str) -> None:
    with pytest.raises(DeviceError) as caught:
        refuse_unsound(record)
    assert words in str(caught.value)
    assert len(str(caught.value).splitlines()) == 1


def test_a_let_through_may_rise_and_a_step_may_stand() -> None:
    rising = replace(curve(quantity="let_through"), parts=(typed_part([1, 2], [3, 4]),))
    step = replace(curve(), parts=(typed_part([1, 1, 2], [4, 3, 3]),))
    refuse_unsound(breaker("b32", rising, step))


def test_two_meanings_of_one_line_are_two_lines() -> None:
    refuse_unsound(breaker("f", curve("mean", meaning="pre_arcing"), curve("mean", meaning="operating"), kind="fuse"))
