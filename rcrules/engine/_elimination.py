"""Star-mesh elimination of a conductance network without a single subtraction.

The network is kept as conductances between nodes and slacks to held terminals; the diagonal of the nodal matrix is
never summed, so a small leak beside a large conductance keeps all its digits (Operations Research 33 (1985) 1107, for
Markov chains: the same arithmetic; from memory).
"""

import numpy as np

from rcrules.engine._rough import MANY, is_rough
from rcrules.engine._shape import Array, Flags, FloatingNode, Indices


def factor(between: Array, slack: Array, weight: Array) -> Array:
    """Matrix Y with Y G Yᵀ = 1 and Yᵀ Y = G⁻¹, all entries >= 0; the rows are in order of elimination.

    between: conductance between free nodes, symmetric, diagonal ignored. [S], (n, n, case), overwritten
    slack: conductance of each node to all held terminals. [S], (n, case), overwritten
    weight: capacitance of each node; nodes are eliminated in rising order of it. [F], (n, case)
    Returns Y, columns in the order of the nodes. [Ω^½], (n, n, case)
    Raises FloatingNode when a node has no path to a held terminal.
    """
    nodes, cases = slack.shape
    if nodes < 2 or cases == 0:
        return _scaled(np.ones((nodes, nodes, cases)), slack, np.zeros((nodes, 1), dtype=np.intp))
    if nodes == 2:
        return _two(between[0, 1], slack, weight[0] > weight[1])
    rough = nodes >= MANY and is_rough()
    order = np.argsort(weight[:, :1] if rough else weight, axis=0, kind="stable")
    if (order == order[:, :1]).all():
        return _in_one_order(between, slack, order[:, 0])
    return _in_own_orders(between, slack, order)


def _two(between: Array, slack: Array, swapped: Flags) -> Array:
    """Two nodes, in closed form: the second is eliminated first where swapped."""
    first, second = np.where(swapped, slack[1], slack[0]), np.where(swapped, slack[0], slack[1])
    pivot = first + between
    share = between / np.where(pivot > 0.0, pivot, 1.0)
    pivots = np.stack([pivot, second + share * first])
    if not (pivots > 0.0).all():
        raise _floating(pivots, np.stack([swapped, ~swapped]).astype(np.intp))
    upper, lower = 1.0 / np.sqrt(pivots)
    both = share * lower
    rows = [[np.where(swapped, 0.0, upper), np.where(swapped, upper, 0.0)]]
    rows.append([np.where(swapped, lower, both), np.where(swapped, both, lower)])
    return np.array(rows)


def _in_one_order(between: Array, slack: Array, order: Indices) -> Array:
    """All cases share the order of elimination."""
    inverse = _eliminate(between[np.ix_(order, order)], slack[order], order[:, None])
    found = np.empty_like(inverse)
    found[:, order] = inverse
    return found


def _in_own_orders(between: Array, slack: Array, order: Indices) -> Array:
    """Each case has its own order of elimination."""
    nodes, cases = order.shape
    case = np.arange(cases)
    sorted_between = between[order[:, None, :], order[None, :, :], case]
    inverse = _eliminate(sorted_between, np.take_along_axis(slack, order, axis=0), order)
    found = np.empty_like(inverse)
    found[np.arange(nodes)[:, None, None], order[None, :, :], case] = inverse
    return found


def _eliminate(between: Array, slack: Array, order: Indices) -> Array:
    """Eliminate the nodes in the order of the arrays; L⁻¹ grows beside, then is scaled to D^(-1/2) L⁻¹."""
    nodes, cases = slack.shape
    inverse = np.zeros((nodes, nodes, cases))
    pivots = np.empty_like(slack)
    for k in range(nodes):
        inverse[k, k] = 1.0
        row = between[k, k + 1 :].copy()
        pivots[k] = slack[k] + row.sum(axis=0)
        share = row / np.where(pivots[k] > 0.0, pivots[k], 1.0)
        slack[k + 1 :] += share * slack[k]
        between[k + 1 :, k + 1 :] += share[:, None] * row
        inverse[k + 1 :, : k + 1] += share[:, None] * inverse[k, : k + 1]
    return _scaled(inverse, pivots, order)


def _scaled(inverse: Array, pivots: Array, order: Indices) -> Array:
    """Rows divided by the root of their pivot. Raises FloatingNode where a pivot is zero."""
    if not (pivots > 0.0).all():
        raise _floating(pivots, order)
    return inverse / np.sqrt(pivots)[:, None]


def _floating(pivots: Array, order: Indices) -> FloatingNode:
    """The node whose pivot is zero in the first case that has one."""
    case, step = (int(index[0]) for index in np.nonzero(~(pivots > 0.0).T))
    return FloatingNode(int(np.broadcast_to(order, pivots.shape)[step, case]), case)
