/* predict F_RIPPLE WAVES I C1 ESR1 RS LS C2 ESR2 R_LOAD: hum across the reservoir (V rms), the
   share of it behind the section, the textbook's peak to peak, and watts in the reservoir's ESR1.
 */
#include "assess/supply.h"

#include <stdio.h>
#include <stdlib.h>

int main(int argc, char **argv)
{
    double v[10];
    if (argc != 11)
        return 2;
    for (int i = 0; i < 10; i++)
        v[i] = strtod(argv[i + 1], NULL);
    struct supply_section section = {.series_ohm = v[5],
                                     .series_h = v[6],
                                     .capacitance_f = v[7],
                                     .esr_ohm = v[8],
                                     .load_ohm = v[9]};
    printf("%.9g %.9g %.9g %.9g\n", supply_ripple(v[2], v[0], v[3], v[4]),
           supply_section_share(&section, v[0]), supply_sawtooth(v[2], v[0], v[3]),
           supply_ripple_watts(v[2], v[1] == 2, v[4]));
    return 0;
}
