#pragma once

#include <glib.h>

void add_published_tests (void);
void add_enumeration_tests (void);
void add_property_tests (void);
void add_small_tests (void);
