/* Included with SOURCE defined: SOURCE(NAME, trust, "stable-key", "title, clause, year"). */
SOURCE(NONE, TRUST_DERIVED, "none", "")
SOURCE(POLICY, TRUST_POLICY, "policy", "shop policy (shop.yaml)")
SOURCE(GUM, TRUST_SEEN, "gum",
       "JCGM 100:2008, Guide to the expression of uncertainty in measurement")
SOURCE(ILAC_G8, TRUST_SEEN, "ilac-g8", "ILAC-G8:09/2019, decision rules, clause 4")
SOURCE(JAN_C_62, TRUST_SECOND_HAND, "jan-c-62",
       "JAN-C-62, direct leakage of new electrolytic capacitors")
SOURCE(TWENTY_TIMES, TRUST_COMMON_PRACTICE, "twenty-times",
       "a bypass leaks less than a twentieth of the current of what it bridges")
SOURCE(VALVE_RATING, TRUST_SECOND_HAND, "valve-rating",
       "the maker’s maximum rating, from the book’s row or the row in the job")
SOURCE(MARKED_RATING, TRUST_SEEN, "marked-rating", "the rating marked on the part")
SOURCE(MARKED_TOLERANCE, TRUST_SEEN, "marked-tolerance", "the tolerance marked on the part")
SOURCE(ELECTROLYTIC_TOLERANCE, TRUST_COMMON_PRACTICE, "electrolytic-tolerance",
       "old electrolytic capacitors were sold to −20/+100 %")
SOURCE(CAPACITOR_TOLERANCE, TRUST_COMMON_PRACTICE, "capacitor-tolerance",
       "20 % where a capacitor bears no tolerance")
SOURCE(SELF_HEATING, TRUST_DERIVED, "self-heating",
       "a quarter of the power at which self-heating runs away, 12 W/(m² K) of surface")
SOURCE(SAFETY_CLASS, TRUST_SECOND_HAND, "iec-60384-14",
       "IEC 60384-14, classes X and Y of capacitors connected to the mains")
SOURCE(TOUCH_CURRENT, TRUST_SECOND_HAND, "en-50699",
       "EN 50678 and EN 50699, test after repair: touch current below 0.5 mA")
SOURCE(OIL_PAPER_TEMPERATURE, TRUST_SEEN, "oil-paper-temperature",
       "insulation correction table of oil-filled transformers, 0 to 75 °C")
SOURCE(FILM_TEMPERATURE, TRUST_RECALLED, "film-temperature",
       "makers’ general data of film capacitors, insulation against temperature, 20 to 35 °C")
SOURCE(ELECTROLYTIC_TEMPERATURE, TRUST_SECOND_HAND, "electrolytic-temperature",
       "leakage of aluminium electrolytics rises 2 to 3 times from 20 °C to 60 °C")
SOURCE(DEFAULT_TEMPERATURE, TRUST_RECALLED, "default-temperature",
       "where no figure is known, as for paper: a doubling in 10 K")
SOURCE(VISHAY_038, TRUST_SEEN, "vishay-038",
       "Vishay BCcomponents 038 RSU data sheet, document 28309, 2005")
SOURCE(LARGE_CAN_SHEETS, TRUST_SECOND_HAND, "large-can-sheets",
       "makers’ sheets of large can electrolytics, 3 √(CV) after 5 min (root sign recalled)")
SOURCE(IEC_60063, TRUST_SEEN, "iec-60063", "IEC 60063, preferred number series")
SOURCE(IEC_60063_E3, TRUST_RECALLED, "iec-60063-e3", "IEC 60063, series E3")
SOURCE(VALVE_BOOK, TRUST_SECOND_HAND, "valve-book", "makers’ manuals, as named beside the row")
SOURCE(GRID_CURRENT_LAW, TRUST_RECALLED, "grid-current-law",
       "grid current 15 µA × exp(Vgk/0.23 V), a default")
SOURCE(THREE_HALVES_LAW, TRUST_DERIVED, "three-halves-law",
       "three-halves-power law pinned to one row of a maker’s manual")
SOURCE(CURIE_VON_SCHWEIDLER, TRUST_SEEN, "curie-von-schweidler",
       "Curie - von Schweidler law of absorption with conduction")
SOURCE(JOB, TRUST_SEEN, "job", "given in the job for this place")
SOURCE(COLOUR_CODE, TRUST_SEEN, "iec-60062-colours",
       "IEC 60062, colours of resistors; five bands with green to grey recalled")
SOURCE(MICA_CODE, TRUST_SEEN, "retma-rec-115a", "RETMA REC-115A, moulded mica capacitors")
SOURCE(AWS_MICA, TRUST_SECOND_HAND, "aws-mica", "AWS and JAN six-dot code of moulded capacitors")
SOURCE(EARLY_MICA, TRUST_SECOND_HAND, "rma-early-mica",
       "early RMA three- and five-dot code of moulded mica (gold, silver inferred)")
SOURCE(DATE_PLAIN, TRUST_SEEN, "date-plain", "the date as printed on the part")
SOURCE(DATE_LETTERS, TRUST_SECOND_HAND, "british-date-letters",
       "British date letters of 1960 to 1968, R to Z; 1946 to 1959 counted back from them")
SOURCE(DATE_HUNTS, TRUST_SECOND_HAND, "hunts-whitsunday", "Hunts date code, key word WHITSUNDAY")
SOURCE(DATE_EIA, TRUST_RECALLED, "eia-date", "EIA source and date code: maker, year, week")
SOURCE(EARTH_CURRENT, TRUST_SECOND_HAND, "en-50699-conductor",
       "EN 50678 and EN 50699: protective-conductor current up to 3.5 mA")
SOURCE(EARTH_BOND, TRUST_SECOND_HAND, "en-50699-bond",
       "EN 50678 and EN 50699: protective conductor up to 0.3 Ω, lead to 5 m and 1.5 mm²")
SOURCE(INSULATION, TRUST_SECOND_HAND, "en-50699-insulation",
       "EN 50678 and EN 50699: insulation at 500 V, 1 MΩ with earth, 2 MΩ without")
SOURCE(RESIDUAL_PLUG, TRUST_SECOND_HAND, "iec-60335-residual",
       "IEC 60335-1: 34 V or less at the plug 1 s after it is pulled")
SOURCE(RESIDUAL_INSIDE, TRUST_SECOND_HAND, "iec-60204-residual",
       "IEC 60204-1: 60 V or less 5 s after switching off")
SOURCE(COPPER, TRUST_RECALLED, "copper", "copper, 0.393 % per kelvin at 20 °C")
SOURCE(
    RIPPLE, TRUST_DERIVED, "ripple",
    "first harmonic of the reservoir’s sawtooth, an upper figure; beside it the textbook’s I/(fC)")
SOURCE(METER_LOADING, TRUST_SEEN, "meter-loading",
       "Helfrick and Cooper, voltmeter loading, example 4-5")
SOURCE(RESISTOR_TOLERANCE, TRUST_COMMON_PRACTICE, "resistor-tolerance",
       "20 % where a resistor bears no tolerance")
SOURCE(WINDING_TOLERANCE, TRUST_POLICY, "winding-tolerance",
       "the tolerance of windings that bear none")
SOURCE(NO_LOAD, TRUST_DERIVED, "no-load",
       "peak of the secondary with the mains a tenth high and nothing drawn")
SOURCE(REFORM_REST, TRUST_SEEN, "eia-815",
       "EIA-815 (1999): 12 to 48 h without volts before the test")
