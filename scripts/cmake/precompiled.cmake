# Headers that nearly every source reads, parsed once: a build from nothing then takes two thirds of the time. Every source still includes
# what it uses; builds without this option (the default, and every build through ccache) would tell.
option(RILLCLOCK_PRECOMPILE "Parse the standard library's headers once for all sources" OFF)

# What many sources read is then read once for all of them: a build from nothing takes half the time, one after a small change longer. Names in
# the unnamed namespaces of a room have to differ (tests/layering checks it).
option(RILLCLOCK_TOGETHER "Compile sources of a target together, some at a time" OFF)
set(together_most 8)

# Sources of the target, in the order of their names, go into as few files as `together_most` allows, each of about as many.
function(rillclock_take_together target)
  if(RILLCLOCK_TOGETHER)
    get_target_property(sources ${target} SOURCES)
    list(LENGTH sources count)
    math(EXPR files "(${count} + ${together_most} - 1) / ${together_most}")
    math(EXPR size "(${count} + ${files} - 1) / ${files}")
    set_target_properties(${target} PROPERTIES UNITY_BUILD ON UNITY_BUILD_BATCH_SIZE ${size})
  endif()
endfunction()

if(RILLCLOCK_TOGETHER AND RILLCLOCK_DEVELOPER)
  # What is hidden in one source shadows nothing in another, and a type of one source may hold what is hidden in it. And where gcc 12 sees
  # more at once it takes more optionals for uninitialised.
  target_compile_options(rillclock_developer_flags INTERFACE $<$<COMPILE_LANGUAGE:CXX>:-Wno-shadow -Wno-subobject-linkage
                         -Wno-maybe-uninitialized>)
endif()

if((RILLCLOCK_PRECOMPILE OR RILLCLOCK_TOGETHER) AND RILLCLOCK_DEVELOPER)
  # gcc 12 takes the copying inside std::string, known to be a false alarm of its own, for ours when it comes precompiled or together.
  target_compile_options(rillclock_developer_flags INTERFACE $<$<COMPILE_LANGUAGE:CXX>:-Wno-array-bounds -Wno-stringop-overflow
                         -Wno-stringop-overread -Wno-restrict>)
endif()

set(standard_headers <algorithm> <array> <charconv> <cmath> <cstddef> <cstdint> <cstdio> <cstdlib> <cstring> <filesystem> <fstream>
    <functional> <iterator> <limits> <map> <memory> <mutex> <numeric> <optional> <random> <set> <span> <sstream> <string> <string_view>
    <tuple> <unordered_map> <utility> <variant> <vector>)

# Makes the target NAME that others take their precompiled headers from: the standard library's and those given.
function(rillclock_precompiled name)
  if(RILLCLOCK_PRECOMPILE)
    set(source ${PROJECT_BINARY_DIR}/${name}.cpp)
    file(CONFIGURE OUTPUT ${source} CONTENT "" @ONLY)
    add_library(${name} OBJECT ${source})
    target_link_libraries(${name} PRIVATE rillclock_flags rillclock_developer_flags)
    target_precompile_headers(${name} PRIVATE ${standard_headers} ${ARGN})
  endif()
endfunction()

# A program is compiled otherwise than a library that a module may be linked from, and cannot share its headers with one.
function(rillclock_use_precompiled target name)
  if(RILLCLOCK_PRECOMPILE)
    get_target_property(type ${target} TYPE)
    if(type STREQUAL EXECUTABLE)
      set_target_properties(${target} ${name} PROPERTIES POSITION_INDEPENDENT_CODE OFF)
    endif()
    target_precompile_headers(${target} REUSE_FROM ${name})
  endif()
endfunction()
