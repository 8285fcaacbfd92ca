/*
 * The manual of keys, made from the field tables: every key of a job file and of shop.yaml with its
 * unit, choices and an example.
 */
#ifndef JOB_MANUAL_H
#define JOB_MANUAL_H

#include "base/buffer.h"

/* Append it as plain text of 80 columns, for `gridleak fields`. */
void manual_write(struct buffer *buffer);

#endif
