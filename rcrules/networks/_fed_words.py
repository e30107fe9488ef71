"""Words of pin names that tell what a pin is for, as data sheets use them; letters only, upper case."""

from typing import Final

# fmt: off
RESET: Final = ("RST", "RESET", "MCLR", "POR", "SRST", "TRST", "PORRST", "SRESET", "HRESET", "XRST", "XRES")
SUPPLY: Final = frozenset((
    "VCC", "VDD", "AVCC", "AVDD", "DVDD", "DVCC", "IOVDD", "VDDA", "VDDIO", "VDDIN", "VCCA", "VCCIO", "VIN", "VI",
    "PVIN", "VBAT", "VBUS", "VREF", "VREFH", "VREFP", "AREF", "VSS", "VEE", "VS", "V+", "V-", "VM", "VPP",
))
FEEDBACK: Final = frozenset((
    "FB", "VFB", "FBX", "ADJ", "COMP", "VCOMP", "INV", "ITH", "VC", "EA", "EAO", "VSENSE", "VSNS",
))
TIMING: Final = frozenset((
    "SS", "TR", "SSTR", "CT", "RT", "RTCT", "CX", "RX", "RXCX", "CEXT", "RCEXT", "REXTCEXT", "RC",
    "THR", "THRES", "THRESHOLD", "TRIG", "TRIGGER", "DIS", "DISCH", "DISCHARGE", "TIMER", "TMR", "DLY", "DELAY",
    "CD", "CDLY", "SRT", "TON", "CRST", "TD",
))
SHORT_TIMING: Final = frozenset(("TR", "RC", "RX", "CX", "RT", "CT", "SS", "DIS", "CD", "TD", "TON", "DISCHARGE"))
"""Words that also mean other things at parts with many pins."""
BOOT: Final = frozenset(("BOOT", "BST", "VBST", "BS", "CBOOT", "CBST", "BOOST", "HB", "VB", "CB", "BTST"))
SWITCH: Final = frozenset(("SW", "LX", "LL", "PH", "PHASE", "VSW", "HS", "VS", "PHS", "SWITCH"))
CURRENT: Final = frozenset(("MON", "IMON", "CS", "CSP", "CSN", "ISEN", "ISENSE", "ISNS", "SENSE", "IS", "IMEAS"))
CONVERTER: Final = frozenset(("ADC", "AIN", "AN"))
CHANNEL: Final = frozenset(("CH", "IN", "AIN", "VIN", "AN", "A"))
OUTPUT: Final = ("AOUT", "VOUT", "IOUT", "DOUT", "OUT", "SDO", "DAC")
"""Starts of the words of pins that drive, at parts that are no controllers."""
BUS: Final = frozenset(("SDA", "SCL", "SMBDAT", "SMBCLK", "SMBDATA", "SMBCLOCK", "SMDAT", "SMCLK", "ALERT", "DQ"))
CENTRE: Final = frozenset(("SPLIT", "CT", "CTT", "VCM", "VTT", "VOCM"))
BUTTON: Final = frozenset(("BTN", "BUTTON", "KEY", "SW", "SWITCH", "PUSH"))
CHASSIS: Final = frozenset((
    "SHIELD", "SHLD", "SH", "CHASSIS", "CHS", "EARTH", "PE", "FG", "CASE", "SHELL", "MOUNT", "MP", "GNDPWR", "CGND",
))
# fmt: on
