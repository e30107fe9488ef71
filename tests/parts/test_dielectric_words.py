"""The letter codes that a project file may name are those that have a rule."""

from itertools import product
from string import ascii_uppercase, digits

from rcrules.parts._dielectrics import class_one, class_two, code_of
from rcrules.vocabulary import DIELECTRIC_CODE


def test_every_letter_code_has_a_rule_and_the_reverse():
    letters = ascii_uppercase + digits
    words = ["".join(word) for size in (2, 3) for word in product(letters, repeat=size)]
    for word in words:
        code = code_of(word)
        known = code is not None and (class_one(code) or class_two(code)) is not None
        assert known == bool(DIELECTRIC_CODE.fullmatch(word)), word
