/* predict F_RIPPLE I C1 ESR1 RS LS C2 ESR2 R_LOAD: hum across the reservoir (V rms), the share of
   it behind the section, and the textbook's peak to peak. */
#include "assess/supply.h"

#include <stdio.h>
#include <stdlib.h>

int main(int argc, char **argv)
{
    double v[9];
    if (argc != 10)
        return 2;
    for (int i = 0; i < 9; i++)
        v[i] = strtod(argv[i + 1], NULL);
    struct supply_section section = {.series_ohm = v[4],
                                     .series_h = v[5],
                                     .capacitance_f = v[6],
                                     .esr_ohm = v[7],
                                     .load_ohm = v[8]};
    printf("%.9g %.9g %.9g\n", supply_ripple(v[1], v[0], v[2], v[3]),
           supply_section_share(&section, v[0]), supply_sawtooth(v[1], v[0], v[2]));
    return 0;
}
