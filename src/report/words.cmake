# Turns reports/words.csv into the sentences and places of words.h:
#   cmake -DIN=reports/words.csv -DOUT=words.inc -P words.cmake
# A row whose name stands in braces, {figure}, declares a place and says what it stands for; every
# other row is a sentence, and may use declared places only. Lines are cut off one by one, never made
# into a list: a list would split the text at semicolons. Places become their numbers.
cmake_minimum_required(VERSION 3.16)

if(NOT DEFINED IN OR NOT DEFINED OUT)
  message(FATAL_ERROR "words.cmake needs -DIN=words.csv and -DOUT=words.inc")
endif()

file(READ "${IN}" rest)
string(REPLACE "\r" "" rest "${rest}")
set(sentences "")
set(places "")
set(place_names "|")
set(names "|")
set(number 0)
set(place_count 0)
while(NOT rest STREQUAL "")
  math(EXPR number "${number} + 1")
  string(FIND "${rest}" "\n" end)
  if(end EQUAL -1)
    message(FATAL_ERROR "${IN}:${number}: the last line does not end; add a line end")
  endif()
  string(SUBSTRING "${rest}" 0 ${end} line)
  math(EXPR end "${end} + 1")
  string(SUBSTRING "${rest}" ${end} -1 rest)

  if(number EQUAL 1)
    if(NOT line STREQUAL "name,text")
      message(FATAL_ERROR "${IN}:1: unknown header; write name,text")
    endif()
    continue()
  endif()
  if(NOT line MATCHES "^([a-z0-9_]+|{[a-z0-9_]+}),(.+)$")
    message(FATAL_ERROR "${IN}:${number}: expected name,text or {place},meaning")
  endif()
  set(name "${CMAKE_MATCH_1}")
  set(text "${CMAKE_MATCH_2}")
  if(text MATCHES "^\"(.*)\"$")
    string(REPLACE "\"\"" "\"" text "${CMAKE_MATCH_1}")
  elseif(text MATCHES "[\",]")
    message(FATAL_ERROR "${IN}:${number}: text with a comma or a quote must be quoted")
  endif()
  string(FIND "${names}" "|${name}|" twice)
  if(NOT twice EQUAL -1)
    message(FATAL_ERROR "${IN}:${number}: ${name} stands twice")
  endif()
  string(APPEND names "${name}|")

  if(name MATCHES "^{(.+)}$")
    string(TOUPPER "${CMAKE_MATCH_1}" upper)
    string(APPEND places "PLACE(${upper})\n")
    string(APPEND place_names "${place_count}${name}|")
    math(EXPR place_count "${place_count} + 1")
    continue()
  endif()

  # Every {place} becomes {number}; what is left of braces is a mistake.
  while(text MATCHES "{([a-z][a-z0-9_]*)}")
    set(place "${CMAKE_MATCH_1}")
    if(NOT place_names MATCHES "\\|([0-9]+){${place}}\\|")
      message(FATAL_ERROR "${IN}:${number}: unknown place {${place}}; "
                          "declare it in a row of its own, above")
    endif()
    string(REPLACE "{${place}}" "{${CMAKE_MATCH_1}}" text "${text}")
  endwhile()
  string(REGEX REPLACE "{[0-9]+}" "" bare "${text}")
  if(bare MATCHES "[{}]")
    message(FATAL_ERROR "${IN}:${number}: a brace without a place")
  endif()
  string(REPLACE "\\" "\\\\" text "${text}")
  string(REPLACE "\"" "\\\"" text "${text}")
  string(TOUPPER "${name}" upper)
  string(APPEND sentences "SENTENCE(${upper}, \"${text}\")\n")
endwhile()

file(WRITE "${OUT}" "/* Made from reports/words.csv; change that. */
#ifdef PLACE
${places}#endif
#ifdef SENTENCE
${sentences}#endif
")
