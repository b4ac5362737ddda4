# Files as a C source, so that the installed program needs no data files:
#   cmake -DSYMBOL=intake_files -DHEADER=intake/embedded.h -DOUT=x.c
#         -DFILES=a.csv|b.csv -DNAMES=a|b -P embed.cmake
# defines `const struct embedded_file SYMBOL[]` and `const size_t SYMBOL_count`, in the order given.
# Lists are joined with "|": a semicolon would split the argument on its way here.
cmake_minimum_required(VERSION 3.16)

foreach(needed SYMBOL HEADER OUT FILES NAMES)
  if(NOT DEFINED ${needed})
    message(FATAL_ERROR "embed.cmake needs -D${needed}=")
  endif()
endforeach()
string(REPLACE "|" ";" files "${FILES}")
string(REPLACE "|" ";" names "${NAMES}")
list(LENGTH files count)
list(LENGTH names named)
if(count EQUAL 0 OR NOT count EQUAL named)
  message(FATAL_ERROR "embed.cmake: ${count} files and ${named} names; give one name for each file")
endif()

set(body "/* Made by src/embed.cmake; change the files it names. */\n#include \"${HEADER}\"\n")
set(rows "")
math(EXPR last "${count} - 1")
foreach(i RANGE ${last})
  list(GET files ${i} file)
  list(GET names ${i} name)
  file(READ "${file}" hex HEX)
  string(LENGTH "${hex}" length)
  math(EXPR length "${length} / 2")
  # Sixteen bytes a line; the NUL behind them lets text be used as it stands.
  string(REGEX REPLACE "(..)" "0x\\1," bytes "${hex}")
  string(REGEX REPLACE "(................................................................................)"
         "\\1\n" bytes "${bytes}")
  string(APPEND body "\n/* ${name} */\nstatic const unsigned char file_${i}[] = {\n${bytes}0x00};\n")
  string(APPEND rows "    {\"${name}\", file_${i}, ${length}},\n")
endforeach()
string(APPEND body "\nconst struct embedded_file ${SYMBOL}[] = {\n${rows}};\n")
string(APPEND body "const size_t ${SYMBOL}_count = ${count};\n")
file(WRITE "${OUT}" "${body}")
