"""Pin names of chips and connectors, by what they say about the net they are on.

Patterns, one per blank, for a whole name in upper case without active-low marks; with and without its trailing number.
The first group that fits counts.
"""

import re
from typing import Final

from rcrules.networks._held_claims import GROUND, NEGATIVE, NEVER, SOURCE, SUPPLY, SWITCH

_GROUND: Final = r"""
    [A-Z]{0,4}GND[A-Z0-9_]{0,5} [A-Z]+_GND [ADPQ]?VSS[A-Z0-9_]{0,8} GROUND 0V
    EP E?PAD EXP(OSED)?_?PAD THERMAL_?P?(AD)? POWERPAD SHIELD SHELL CHASSIS
"""
_NEGATIVE: Final = r"V- VS- -VS VCC- -VCC A?VEE -V V-/GND GND/V-"
_NEVER: Final = r"""
    .*_(EN(ABLE)?|FB|PG|OK|SEL|SET|SNS|SENSE|MODE|CTRL|ADJ|DET)
    .*/~?(EN(ABLE)?|SHDN|RST|RESET)~? CNTRL.* CTRL.*
    COMP[A-Z]? V?C?ITH V?FB[A-Z+\-]? FEEDBACK ADJ(/GND)? GND/ADJ V?SENSE?[+\-PN]? VSNS REF_?ADJ
    V?SS\d*(/.*)? TR(AC)?K SOFT_?START RT(/.*)? CT RC RT/CT TIM(ER)? C?T?DLY CDELAY CV CONT(ROL)?
    THR(ES)? THRESH(OLD)? TRIG? DIS(CH)?
    REXT RBIAS [RIV]SET I?LIM IREF I?MON I?PROG ISENSE CS[+\-PN]? ZQ UVLO OVP [A-Z]*VR[PN](_.*)? AGC FILT(ER)?
    X(TAL)?_?(IN|OUT|[IO])? E?XTAL.* OSC(_?(IN|OUT|[IO]))? XT[IO] .*/E?XTAL\d* .*OSC32_?(IN|OUT).*
    BO?O?ST(RAP)? V?BST BTST CB CBOOT VB BOOT C\d*[+\-] CAP\d*[+\-] C[A-Z]?[+\-] FL(Y|T)?[+\-] CF(LY)?[+\-PN]
    SPLIT EN(ABLE)?[A-Z]? RUN ON/?OFF SHDN N?RE?SE?T_?N? MCLR.* V?RST.*
"""
_SWITCH: Final = r"SW[A-Z]? SW_[\dA-Z]* LX[A-Z]? PHASE PH LL VSW SWITCH DCC DCDC_?SW L[XN]?_?SW SWOUT"
_SOURCE: Final = r"""
    V?REG_?(OUT|N)? VREG[A-Z]* V?CAP(_[A-Z]+)? VCORE[_A-Z]* V?LDO[_A-Z]* DEC[A-Z]? DECOUPLE? REGN PMID V?SYS
    VOUT\d* VOUT[A-Z_+]* V?REF_?OUT OUT_?[FS] VTT(_?REF)? VDDOUT V?DDCAP VDD_?CORE_?OUT BYP(ASS)? NR CRES
    [\d.V]+_?V?-?OUT V?\d+(\.|V|P)\d+_?V?_?OUT V\dOUT V\dP\dOUT INTVCC VINT[A-Z]* VPLL_?OUT VDRV_?OUT
    VCP CPOUT VDDD VDDG
"""
_SUPPLY: Final = r"""
    [ADPM]?V(CC|DD)[A-Z0-9_.+/]* V\+ \+V \+VS VS\+? VCC\+ \+VCC [PA]?VIN[A-Z_]* VIN\(VCC\) VI IN
    V?BATT?[A-Z_+]* VBUS[A-Z_]* VUSB VPP VMOT? VM[A-Z]? VSUPP?(LY)? VPWR VL VL?IO[A-Z0-9]* VLOGIC VAA PVDD.*
    VPHY VPLL VDRV
    VREF[A-KMO-Z+]* AREF ADVREF\w* VANA VDIG VHV PWR POWER VADJ VTG VTREF IOREF
    \+?\d+(\.\d+)?V(_\w*)? \+?\d+V\d*(_\w*)? \+5V.* \+3\.?3?V.*
"""

NAMES: Final = tuple(
    (claim, re.compile("|".join(words.split())))
    for claim, words in (
        (GROUND, _GROUND),
        (NEGATIVE, _NEGATIVE),
        (NEVER, _NEVER),
        (SWITCH, _SWITCH),
        (SOURCE, _SOURCE),
        (SUPPLY, _SUPPLY),
    )
)
"""What a name says and the pattern of such names, in the order in which they are tried."""
