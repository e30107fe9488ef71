"""Exact transient and DC solution of RC networks over many cases at once, and bounds over boxes; numbers only.

Contract (arrays are float64, first axis = case):

``Shape(free, held, resistors, capacitors)``  hashable topology. Terminals ``0 .. free-1`` are free,
    ``free .. free+held-1`` held; ``resistors`` and ``capacitors`` are tuples of terminal pairs.
``solve(shape, ohms, farads) -> Modes``  ohms (case, r) > 0, inf allowed = open; farads (case, c) >= 0.
    Raises FloatingNode.
``Modes.taus`` (case, free), slowest first, structural zeros last.
``Modes.steady(volts, amps) -> (case, free)``  DC node voltages; volts (case, held); amps (case, free) drawn out of the
    nodes.
``Modes.respond(drive, charged) -> Response``  charged (case, c): capacitor voltages (a minus b) just before t = 0.
``Drive(starts, levels, slopes, amps)``  sources piecewise linear: starts (case, s) not decreasing, starts[:, 0] == 0;
    levels, slopes (case, s, held): value at the start of a piece and its slope; amps (case, free) constant.
``Response.observe(weights, offset) -> Signal``  weights (case, terminals), offset (case,): f = weights . v - offset.
``Signal``  .before is not kept; .initial() just after t = 0; .final() limit, may be inf; .at(t), t (case,);
    .first_crossing(direction) first t >= 0 at which f >= 0 (direction +1) or f <= 0 (-1), direction (case,) or one;
        a touch of 0 at t = 0 with the slope away does not count; inf = never;
    .last_exit(low, high) last time outside [low, high], 0 if never outside, inf if it ends outside;
    .extremes() -> (lowest, highest) over t >= 0, the supremum included; .width() total time f >= 0;
    .slope_initial(); .energy() integral of f² over t >= 0; made of one ``ExponentialSum`` for each piece.
``roughly()``  context in which networks of MANY nodes and more are solved faster, good enough to search.
``transfer(shape, ohms, farads, source, omega) -> complex (case, free)``, ``source`` the number of a held terminal.
``corner(shape, ohms, farads, source, at, passes) -> (case,)``  angular frequency [rad/s] 3 dB below the pass band.
``Amplified(shape, amplifiers, ohms, farads)``  the same with ideal amplifiers (plus, minus, output): ``.taus`` complex,
    ``.settles``, ``.steady``, ``.transfer``, ``.corner``, ``.step(weights, before, after) -> Oscillation``.
``bounds(evaluate, low, nominal, high, signs, vertices_prove) -> Bounds`` and the coroutine form ``search(...)``.
"""

from rcrules.engine._amplified import Amplified
from rcrules.engine._bounds import Bounds, bounds, search
from rcrules.engine._exponential import ExponentialSum
from rcrules.engine._frequency import corner, transfer
from rcrules.engine._modes import Modes, solve
from rcrules.engine._oscillation import Oscillation
from rcrules.engine._response import Drive, Response
from rcrules.engine._rough import MANY, roughly
from rcrules.engine._shape import Array, FloatingNode, Shape
from rcrules.engine._signal import Signal

__all__ = [
    "MANY",
    "Amplified",
    "Array",
    "Bounds",
    "Drive",
    "ExponentialSum",
    "FloatingNode",
    "Modes",
    "Oscillation",
    "Response",
    "Shape",
    "Signal",
    "bounds",
    "corner",
    "roughly",
    "search",
    "solve",
    "transfer",
]
