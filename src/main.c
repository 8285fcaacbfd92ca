#include <stdio.h>

int main(void)
{
    puts("gridleak " GRIDLEAK_VERSION);
    return 0;
}
