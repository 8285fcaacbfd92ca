/*
 * A decoded picture as a file again, for the pictures folder of a page: no camera data.
 */
#ifndef WRITE_PICTURE_FILE_H
#define WRITE_PICTURE_FILE_H

#include "write/picture.h"

/* "jpg" or "png". */
const char *picture_file_extension(const struct picture *picture);

/* Append the file's bytes; the same picture gives the same bytes. */
void picture_file_write(const struct picture *picture, struct buffer *out);

#endif
