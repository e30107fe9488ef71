"""Words of symbols, footprints, values and descriptions that name a kind of part, in the languages boards come in."""

from typing import Final


def _set(words: str) -> frozenset[str]:
    return frozenset(words.split())


WORDS: Final[dict[str, frozenset[str]]] = {
    "net-tie": _set("NETTIE NT"),
    "test-point": _set("MEASUREMENT TEST TESTPAD TESTPOINT TP TST"),
    "mechanical": _set("FID FIDUCIAL HEATSINK HOLE LOGO MOUNTING SCREW SPACER STANDOFF"),
    "fuse": _set("FUSE FUSIBLE POLYFUSE PPTC PTC RESETTABLE SICHERUNG"),
    "thermistor": _set("HEISSLEITER NTC TERMISTOR PT100 PT1000 RTD THERMISTANCE THERMISTOR ТЕРМОРЕЗИСТОР"),
    "varistor": _set("MOV VARISTANCE VARISTOR VDR ВАРИСТОР"),
    "potentiometer": _set("POT POTENCIOMETRO POTENTIOMETER POTI PRESET RHEOSTAT RVAR TRIMMER TRIMPOT ПОТЕНЦИОМЕТР"),
    "ferrite": _set("BEAD FER FERRIT FERRITA FERRITE FERRITEBEAD FERRITPERLE FILTER"),
    "transformer": _set("BALUN CMC TRAFO TRANSF TRANSFORMADOR TRANSFORMER TRASF UBERTRAGER ТРАНСФОРМАТОР"),
    "inductor": _set("BOBINA CHOKE COIL DROSSEL IND INDUCTANCIA INDUCTOR L SPULE ДРОССЕЛЬ ИНДУКТИВНОСТЬ"),
    "crystal": _set("CRISTAL CRYSTAL CUARZO KHZ MHZ QUARTZ QUARZ RESONADOR RESONATOR XTAL КВАРЦ"),
    "jumper": _set("BRUCKE JMP JUMPER LINK PUENTE SHUNTJUMPER SOLDERJUMPER ПЕРЕМЫЧКА"),
    "contact": _set(
        "BOUTON BUTTON DPDT INTERRUPTEUR INTERRUPTOR KEYPAD LLAVE PULSADOR PUSH PUSHBUTTON REED RELAIS RELAY "
        "RELE SCHALTER SPDT SPST SW SWITCH TACT TACTILE TASTER TECLA ГЕРКОН КНОПКА ПЕРЕКЛЮЧАТЕЛЬ РЕЛЕ"
    ),
    "diode": _set("DIODE DIODESCH DIODO ESD LED LEDS RECTIFIER SCHOTTKY TVS ZENER ДИОД СВЕТОДИОД"),
    "transistor": _set("BJT IGBT JFET MOSFET NJFET NMOS NPN PJFET PMOS PNP TRANSISTOR ТРАНЗИСТОР"),
    "battery": _set("ACCU AKKU BATERIA BATTERIE BATTERY CR2032 PILA БАТАРЕЯ"),
    "connector": _set(
        "BANANA BNC BORNE BORNERA BUCHSE CON CONECTOR CONN CONNECTEUR CONNECTOR HDR HEADER JACK PINHEADER "
        "PLUG RJ SMA SOCKET STECKER TB TERM TERMINAL USB РАЗЪЕМ РАЗЬЕМ"
    ),
    "ic": _set("IC MCU OPAMP OPTO OPTOCOUPLER OSC OSCILLATOR REGULATOR REGULATORS SOC CHARGER МИКРОСХЕМА"),
    "other": _set("LDR PHOTOCELL PHOTORESISTOR RPHOTO FOTORESISTENCIA ФОТОРЕЗИСТОР"),
    "resistor": _set("R RES RESISTANCE RESISTENCIA RESISTOR RESISTORE WIDERSTAND РЕЗИСТОР"),
    "capacitor": _set("C CAP CAPACITOR CAPAPOL CONDENSADOR CONDENSATEUR CP ELKO KONDENSATOR КОНДЕНСАТОР"),
}
"""Kind -> whole words in capitals without accents, the more telling kinds first."""
ARRAY_WORDS: Final = _set("ARRAY ARREGLO NETWORK NETZWERK PACK RNET RPACK RSA СБОРКА")
_LETTERS: Final = {
    "resistor": "R",
    "capacitor": "C",
    "inductor": "L",
    "ferrite": "FB FER BEAD FL",
    "diode": "D LED LD DS VD HL ZD DZ ZA TVS CR",
    "transistor": "Q VT",
    "ic": "U IC DA DD OSC",
    "connector": "J P CN CON CONN X XP XS",
    "jumper": "JMP JP SJ GS LNK SB",
    "contact": "SW S SA BTN PB KEY K RL RLY REL",
    "fuse": "F FS FU PTC XF",
    "crystal": "Y XTAL ZQ BQ",
    "test-point": "TP",
    "net-tie": "NT",
    "thermistor": "TH NTC RT",
    "varistor": "MOV RU",
    "potentiometer": "RV POT TRIM",
    "resistor-array": "RN RA RP RSA RR",
    "capacitor-array": "CA CAY",
    "battery": "BT BAT",
    "transformer": "TR TX",
    "mechanical": "FD FID H MH HS LOGO MK",
    "other": "LDR",
}
PREFIXES: Final = {letters: kind for kind, several in _LETTERS.items() for letters in several.split()}
"""Letters of the reference -> kind, where nothing else tells otherwise."""
EITHER: Final[dict[str, frozenset[str]]] = {
    "resistor": _set("ferrite fuse inductor jumper net-tie other potentiometer thermistor varistor"),
    "capacitor": _set("jumper net-tie"),
    "inductor": _set("ferrite transformer"),
    "ferrite": frozenset(),
    "ic": frozenset(),
    "diode": _set("crystal ic transistor"),
    "transistor": _set("crystal diode ic"),
    "connector": _set("battery contact crystal fuse ic jumper mechanical net-tie potentiometer test-point"),
    "jumper": _set("connector contact net-tie test-point"),
    "contact": _set("connector ic jumper"),
    "fuse": _set("ferrite inductor mechanical"),
    "crystal": _set("ic"),
    "test-point": frozenset(),
    "net-tie": _set("jumper thermistor"),
    "thermistor": _set("fuse resistor"),
    "varistor": _set("fuse potentiometer resistor"),
    "potentiometer": _set("resistor varistor"),
    "resistor-array": _set("potentiometer"),
    "capacitor-array": frozenset(),
    "battery": _set("connector ic"),
    "transformer": _set("diode inductor potentiometer thermistor transistor"),
    "mechanical": _set("connector diode"),
    "other": frozenset(),
}
"""Kind by prefix -> what a telling symbol, value or footprint may turn it into."""
