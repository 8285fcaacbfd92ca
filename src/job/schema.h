/*
 * The JSON Schema (draft-07) of a job file, made from the field tables, for editors that know YAML
 * language servers.
 *
 * Every scalar may be string, number or boolean, for YAML editors take `80` and `no` as such where
 * this program takes text. Choices are enums; there is no format and no pattern.
 */
#ifndef JOB_SCHEMA_H
#define JOB_SCHEMA_H

#include "base/buffer.h"

/* Append the schema, indented, with a line end behind it. */
void schema_write(struct buffer *buffer);

#endif
