# Headers that nearly every source reads, parsed once: a build from nothing then takes two thirds of the time. Every source still includes
# what it uses; builds without this option (the default, and every build through ccache) would tell.
option(RILLCLOCK_PRECOMPILE "Parse the standard library's headers once for all sources" OFF)

if(RILLCLOCK_PRECOMPILE AND RILLCLOCK_DEVELOPER)
  # gcc 12 takes the copying inside std::string, known to be a false alarm of its own, for ours when it comes precompiled.
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
