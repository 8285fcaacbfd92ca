/* A drawing (plots, headline, marks) in the operators of a page. */
#ifndef WRITE_PDF_DRAWING_H
#define WRITE_PDF_DRAWING_H

#include "write/pdf_canvas.h"

/* With its origin at `at`, scale points per unit. */
void pdf_drawing(struct pdf_canvas *canvas, const struct drawing *drawing, struct point at,
                 double scale);

#endif
