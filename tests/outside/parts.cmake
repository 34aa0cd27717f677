# The batch program run as a user runs it, and a second opinion in another language. The system's python3 has scipy
# where the packages of tests/run are installed; another python found first may not.
find_program(SYSTEM_PYTHON3 python3 PATHS /usr/bin NO_DEFAULT_PATH REQUIRED)

add_test(NAME "outside: batch program on good and bad input"
  COMMAND ${SYSTEM_PYTHON3} -B ${CMAKE_CURRENT_LIST_DIR}/batch_test.py -v)
set_tests_properties("outside: batch program on good and bad input" PROPERTIES
  ENVIRONMENT "SINEWRIGHT_BATCH=$<TARGET_FILE:sinewright-batch>")

add_test(NAME "outside: second opinion on operating point, natural frequencies and loop gain"
  COMMAND ${SYSTEM_PYTHON3} -B ${CMAKE_CURRENT_LIST_DIR}/second_opinion.py)
set_tests_properties("outside: second opinion on operating point, natural frequencies and loop gain" PROPERTIES
  ENVIRONMENT "SINEWRIGHT_BATCH=$<TARGET_FILE:sinewright-batch>")
