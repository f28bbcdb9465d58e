# The Python module `rillclock`, for the system's own Python. Included before any library is made: what a module is linked from has to be
# independent of its position.
if(EXISTS /usr/bin/python3)
  set(Python_EXECUTABLE /usr/bin/python3 CACHE FILEPATH "the Python that the module is for")
endif()
set(PYBIND11_FINDPYTHON ON)
find_package(Python 3.9 REQUIRED COMPONENTS Interpreter Development.Module)
find_package(pybind11 2.10 CONFIG REQUIRED)

# Nothing of the libraries is meant to be replaced from outside, so their functions stay as easy to call and to inline as in a program.
set(CMAKE_POSITION_INDEPENDENT_CODE ON)
add_compile_options($<$<COMPILE_LANGUAGE:CXX>:-fno-semantic-interposition>)

function(rillclock_python_module)
  file(GLOB sources CONFIGURE_DEPENDS ${PROJECT_SOURCE_DIR}/src/python/*.cpp)
  pybind11_add_module(rillclock_python MODULE NO_EXTRAS ${sources})
  set_target_properties(rillclock_python PROPERTIES OUTPUT_NAME rillclock LIBRARY_OUTPUT_DIRECTORY ${PROJECT_BINARY_DIR}/python)
  target_link_libraries(rillclock_python PRIVATE rillclock::rillclock rillclock_developer_flags)
  rillclock_take_together(rillclock_python)
  target_compile_definitions(rillclock_python PRIVATE RILLCLOCK_VERSION="${PROJECT_VERSION}")
  install(TARGETS rillclock_python COMPONENT python
          LIBRARY DESTINATION lib/python${Python_VERSION_MAJOR}.${Python_VERSION_MINOR}/dist-packages)
endfunction()
