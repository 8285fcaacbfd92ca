/* Figures in HTML: plots drawn twice, plates, and the headline with its strokes. */
#include "write/html_parts.h"

enum { WIDE = 720, NARROW = 350, HEADLINE_WIDE = 480 };

void html_plot(struct html *html, const struct exhibit *exhibit)
{
    const struct plot *plot = &exhibit->plot;
    static const struct {
        double width;
        const char *classes;
    } versions[] = {{WIDE, "wideonly"}, {NARROW, "narrow"}};
    html_raw(html, "<figure id=\"");
    html_text(html, exhibit->id);
    html_raw(html, "\">");
    for (int i = 0; i < 2; i++) {
        struct drawing drawing = drawing_of_plot(plot, versions[i].width, &html->scratch);
        struct svg_frame frame = svg_frame_of(&drawing, versions[i].classes, plot->title);
        svg_write(&drawing, &frame, html->out);
        html_raw(html, "\n");
    }
    html_raw(html, "<figcaption>");
    html_caption(html, exhibit, plot->caption);
    html_raw(html, "</figcaption></figure>\n");
}

static void write_picture(struct html *html, const struct plate_picture *picture)
{
    double ratio = picture->height_px > 0 ? picture->width_px / (double)picture->height_px : 1;
    /* Shares of the width as the ratios are: both come out at the same height. */
    html_raw(html, "<div style=\"flex:");
    html_number(html, ratio);
    html_raw(html, " 1 0\"><img src=\"pictures/");
    html_text(html, picture->file);
    html_raw(html, "\" width=\"");
    buffer_decimal(html->out, picture->width_px);
    html_raw(html, "\" height=\"");
    buffer_decimal(html->out, picture->height_px);
    html_raw(html, "\" alt=\"");
    if (picture->when) {
        html_text(html, picture->when);
        html_raw(html, " ");
    }
    html_text(html, picture->text);
    html_raw(html, "\"><p>");
    if (picture->when) {
        html_raw(html, "<b>");
        html_text(html, picture->when);
        html_raw(html, "</b> ");
    }
    html_text(html, picture->text);
    html_raw(html, "</p></div>");
}

void html_plate(struct html *html, const struct exhibit *exhibit)
{
    const struct plate *plate = &exhibit->plate;
    html_raw(html, "<figure class=\"plate\" id=\"");
    html_text(html, exhibit->id);
    html_raw(html,
             plate->picture_count == 1 ? "\"><div class=\"single\">" : "\"><div class=\"pair\">");
    for (size_t i = 0; i < plate->picture_count; i++)
        write_picture(html, &plate->pictures[i]);
    html_raw(html, "</div><figcaption>");
    html_caption(html, exhibit, plate->caption);
    html_raw(html, "</figcaption></figure>\n");
}

static void write_headline_line(struct html *html, const struct headline_line *line)
{
    struct drawing drawing = drawing_of_stroke(line->stroke, &html->scratch);
    struct svg_frame frame = svg_frame_of(&drawing, "ks", NULL);
    html_raw(html, "<li>");
    svg_write(&drawing, &frame, html->out);
    html_raw(html, "<span>");
    html_text(html, line->text);
    html_raw(html, "</span></li>");
}

void html_headline(struct html *html, const struct exhibit *exhibit)
{
    const struct headline *headline = &exhibit->headline;
    html_raw(html, "<section class=\"headline\" id=\"");
    html_text(html, exhibit->id);
    html_raw(html, "\"><div><h2>");
    html_text(html, headline->heading);
    html_raw(html, "</h2><p class=\"count\">");
    html_text(html, headline->kept);
    html_raw(html, " <span>");
    html_text(html, headline->of);
    html_raw(html, "</span></p>");
    if (headline->qualifier) {
        html_raw(html, "<p class=\"soft\">");
        html_text(html, headline->qualifier);
        html_raw(html, "</p>");
    }
    html_raw(html, headline->line_count ? "<ul class=\"counts\">" : "");
    for (size_t i = 0; i < headline->line_count; i++)
        write_headline_line(html, &headline->lines[i]);
    html_raw(html, headline->line_count ? "</ul></div>\n<div>" : "</div>\n<div>");
    struct drawing wide = drawing_of_headline(headline, HEADLINE_WIDE, &html->scratch),
                   narrow = drawing_of_headline(headline, NARROW, &html->scratch);
    struct svg_frame wide_frame = svg_frame_of(&wide, "wideonly", headline->title),
                     narrow_frame = svg_frame_of(&narrow, "narrow", headline->title);
    if (headline->kind_count) {
        svg_write(&wide, &wide_frame, html->out);
        svg_write(&narrow, &narrow_frame, html->out);
    }
    if (headline->below) {
        html_raw(html, "<p class=\"soft\">");
        html_text(html, headline->below);
        html_raw(html, "</p>");
    }
    html_raw(html, "</div></section>\n");
}
