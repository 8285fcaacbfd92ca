/* Included with SOURCE defined: SOURCE(NAME, trust, "stable-key", "title, clause, year"). */
SOURCE(NONE, TRUST_DERIVED, "none", "")
SOURCE(POLICY, TRUST_POLICY, "policy", "shop policy (shop.yaml)")
SOURCE(GUM, TRUST_SEEN, "gum",
       "JCGM 100:2008, Guide to the expression of uncertainty in measurement")
SOURCE(ILAC_G8, TRUST_SEEN, "ilac-g8", "ILAC-G8:09/2019, decision rules, clause 4")
SOURCE(JAN_C_62, TRUST_SECOND_HAND, "jan-c-62",
       "JAN-C-62, direct leakage of new electrolytic capacitors")
