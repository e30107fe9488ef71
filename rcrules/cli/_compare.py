"""Two saved documents held against each other."""

import argparse


def compare(chosen: argparse.Namespace) -> int:
    """The newer document with what broke, mended and moved; 1 when something new counts."""
    from rcrules.cli._output import saved
    from rcrules.cli._run import exit_code, targets_of, write_all
    from rcrules.comparison import compared

    asked = targets_of(chosen.report, quiet=chosen.quiet, boards=1)
    document = compared(saved(chosen.old), saved(chosen.new), share(chosen.moved))
    write_all([document], asked, chosen)
    return exit_code([document], chosen)


def share(text: str) -> float:
    """``5 %`` as 0.05. Raises UserMistake for anything else than a share of 0 or more."""
    from rcrules.errors import Mistake, Place, UserMistake
    from rcrules.quantities import QuantityError, parse_quantity

    try:
        spread = parse_quantity(text, "1")
    except QuantityError as error:
        problem, value = str(error), -1.0
    else:
        problem, value = "not one number of 0 or more", spread.nominal if spread.low == spread.high else -1.0
    if value < 0:
        place = Place(file="--moved")
        raise UserMistake(Mistake(place=place, problem=problem, found=text, expected="a share, such as '5 %'"))
    return value
