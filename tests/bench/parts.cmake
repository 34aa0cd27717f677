# Prints times; no test.
add_executable(bench_refresh ${CMAKE_CURRENT_LIST_DIR}/bench_refresh.cpp)
target_link_libraries(bench_refresh PRIVATE core warnings)
