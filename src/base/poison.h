/* Included last by every source file: what must not happen here. String functions without bounds,
 * and, so that the same input gives the same bytes, the locale and the local clock. */
#ifndef WEIRBOOK_POISON_H
#define WEIRBOOK_POISON_H
#pragma GCC poison strcpy strcat sprintf vsprintf strtok gets atof atoi strtod setlocale localtime
#endif
