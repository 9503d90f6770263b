"""Many calls beside each other give what they give one after another, and Ctrl-C is heard again afterwards."""

from __future__ import annotations

import signal

from revinf.in_processes import each


def test_results_come_in_the_order_of_the_calls_whatever_the_number_of_processes() -> None:
    calls = [(number, 7) for number in range(40)]
    plain = [divmod(*call) for call in calls]
    assert list(each(divmod, calls, jobs=1)) == plain
    assert list(each(divmod, calls, jobs=2, pre_dispatch="n_jobs")) == plain


def test_an_interrupt_is_heard_again_once_the_processes_are_there() -> None:
    before = signal.getsignal(signal.SIGINT)
    results = each(divmod, [(9, 2), (8, 3)], jobs=2)
    assert next(results) == (4, 1)
    assert signal.getsignal(signal.SIGINT) is before
    assert list(results) == [(2, 2)]
