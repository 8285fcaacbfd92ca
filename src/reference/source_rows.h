/* Included with SOURCE defined: SOURCE(NAME, trust, "stable-key", "title, clause, year"). */
SOURCE(NONE, TRUST_DERIVED, "none", "")
SOURCE(POLICY, TRUST_POLICY, "policy", "shop policy (shop.yaml)")
SOURCE(GUM, TRUST_SEEN, "gum",
       "JCGM 100:2008, Guide to the expression of uncertainty in measurement")
SOURCE(ILAC_G8, TRUST_SEEN, "ilac-g8", "ILAC-G8:09/2019, decision rules, clause 4")
SOURCE(JAN_C_62, TRUST_SECOND_HAND, "jan-c-62",
       "JAN-C-62, direct leakage of new electrolytic capacitors")
SOURCE(TWENTY_TIMES, TRUST_COMMON_PRACTICE, "twenty-times",
       "common practice: a bypass leaks less than a twentieth of the current of what it bridges")
SOURCE(VALVE_RATING, TRUST_SECOND_HAND, "valve-rating",
       "the valve's maximum rating, from the valve book's row or the row in the job")
SOURCE(MARKED_RATING, TRUST_SEEN, "marked-rating", "the rating marked on the part")
SOURCE(MARKED_TOLERANCE, TRUST_SEEN, "marked-tolerance", "the tolerance marked on the part")
SOURCE(ELECTROLYTIC_TOLERANCE, TRUST_COMMON_PRACTICE, "electrolytic-tolerance",
       "common practice: old electrolytic capacitors were sold to -20/+100 %")
SOURCE(CAPACITOR_TOLERANCE, TRUST_COMMON_PRACTICE, "capacitor-tolerance",
       "common practice: 20 % where a capacitor bears no tolerance")
SOURCE(SELF_HEATING, TRUST_DERIVED, "self-heating",
       "a quarter of the power at which self-heating runs away, 12 W/(m2 K) of surface")
SOURCE(SAFETY_CLASS, TRUST_SECOND_HAND, "iec-60384-14",
       "IEC 60384-14, classes X and Y of capacitors connected to the mains")
SOURCE(TOUCH_CURRENT, TRUST_SECOND_HAND, "en-50699",
       "EN 50678 and EN 50699, test after repair: touch current below 0.5 mA")
SOURCE(OIL_PAPER_TEMPERATURE, TRUST_SEEN, "oil-paper-temperature",
       "insulation correction table of oil-filled transformers, 0 to 75 C")
SOURCE(FILM_TEMPERATURE, TRUST_RECALLED, "film-temperature",
       "makers' general data of film capacitors, insulation against temperature, 20 to 35 C")
SOURCE(ELECTROLYTIC_TEMPERATURE, TRUST_SECOND_HAND, "electrolytic-temperature",
       "leakage of aluminium electrolytics rises 2 to 3 times from 20 C to 60 C")
SOURCE(DEFAULT_TEMPERATURE, TRUST_RECALLED, "default-temperature",
       "taken as paper: a doubling in 10 K, labelled default")
SOURCE(VISHAY_038, TRUST_SEEN, "vishay-038",
       "Vishay BCcomponents 038 RSU data sheet, document 28309, 2005")
SOURCE(LARGE_CAN_SHEETS, TRUST_SECOND_HAND, "large-can-sheets",
       "makers' sheets of large can electrolytics, 3*sqrt(CV) after 5 min (root sign recalled)")
SOURCE(IEC_60063, TRUST_SEEN, "iec-60063", "IEC 60063, preferred number series")
SOURCE(IEC_60063_E3, TRUST_RECALLED, "iec-60063-e3", "IEC 60063, series E3")
SOURCE(VALVE_BOOK, TRUST_SECOND_HAND, "valve-book",
       "valve manuals, as named beside the row of the valve book")
SOURCE(GRID_CURRENT_LAW, TRUST_RECALLED, "grid-current-law",
       "grid current 15 uA*exp(Vgk/0.23 V), labelled default")
SOURCE(THREE_HALVES_LAW, TRUST_DERIVED, "three-halves-law",
       "three-halves-power law pinned to one row of a valve manual")
SOURCE(CURIE_VON_SCHWEIDLER, TRUST_SEEN, "curie-von-schweidler",
       "Curie - von Schweidler law of absorption with conduction")
SOURCE(JOB, TRUST_SEEN, "job", "given in the job for this place")
