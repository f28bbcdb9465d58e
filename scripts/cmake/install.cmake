# What `cmake --install` puts where, and the Debian package that `cpack` makes of it.
include(GNUInstallDirs)
include(CMakePackageConfigHelpers)

set(rillclock_rooms core raster tiles graph io forest terrain hydraulics rainfall surface travel catchment study deliver run)
list(TRANSFORM rillclock_rooms PREPEND rillclock_ OUTPUT_VARIABLE rillclock_libraries)
foreach(room ${rillclock_rooms})
  set_target_properties(rillclock_${room} PROPERTIES EXPORT_NAME ${room})
endforeach()
set_target_properties(rillclock PROPERTIES EXPORT_NAME rillclock)
set_target_properties(rillclock_flags PROPERTIES EXPORT_NAME flags)
set_target_properties(rillclock_developer_flags PROPERTIES EXPORT_NAME developer_flags)

install(TARGETS ${rillclock_libraries} rillclock_flags rillclock_developer_flags rillclock EXPORT rillclock_targets
        ARCHIVE DESTINATION ${CMAKE_INSTALL_LIBDIR} COMPONENT library)
install(DIRECTORY ${PROJECT_SOURCE_DIR}/include/rillclock DESTINATION ${CMAKE_INSTALL_INCLUDEDIR} COMPONENT library)
install(EXPORT rillclock_targets NAMESPACE rillclock:: FILE rillclock-targets.cmake
        DESTINATION ${CMAKE_INSTALL_LIBDIR}/cmake/rillclock COMPONENT library)
configure_package_config_file(${PROJECT_SOURCE_DIR}/scripts/cmake/rillclock-config.cmake.in ${PROJECT_BINARY_DIR}/rillclock-config.cmake
                              INSTALL_DESTINATION ${CMAKE_INSTALL_LIBDIR}/cmake/rillclock)
write_basic_package_version_file(${PROJECT_BINARY_DIR}/rillclock-config-version.cmake COMPATIBILITY SameMinorVersion)
install(FILES ${PROJECT_BINARY_DIR}/rillclock-config.cmake ${PROJECT_BINARY_DIR}/rillclock-config-version.cmake
        DESTINATION ${CMAKE_INSTALL_LIBDIR}/cmake/rillclock COMPONENT library)

# The command, with manual and completions that it prints itself.
function(rillclock_printed file folder)
  set(path ${PROJECT_BINARY_DIR}/printed/${file})
  add_custom_command(OUTPUT ${path} COMMAND ${CMAKE_COMMAND} -E make_directory ${PROJECT_BINARY_DIR}/printed
                     COMMAND rillclock_command ${ARGN} > ${path} DEPENDS rillclock_command VERBATIM)
  set_property(GLOBAL APPEND PROPERTY rillclock_printed_files ${path})
  install(FILES ${path} DESTINATION ${folder} COMPONENT command)
endfunction()
rillclock_printed(rillclock.1 ${CMAKE_INSTALL_MANDIR}/man1 manual)
rillclock_printed(rillclock ${CMAKE_INSTALL_DATADIR}/bash-completion/completions completion bash)
rillclock_printed(_rillclock ${CMAKE_INSTALL_DATADIR}/zsh/site-functions completion zsh)
rillclock_printed(rillclock.fish ${CMAKE_INSTALL_DATADIR}/fish/vendor_completions.d completion fish)
get_property(printed GLOBAL PROPERTY rillclock_printed_files)
add_custom_target(rillclock_printed_words ALL DEPENDS ${printed})
install(TARGETS rillclock_command RUNTIME DESTINATION ${CMAKE_INSTALL_BINDIR} COMPONENT command)
install(FILES ${PROJECT_SOURCE_DIR}/README.md DESTINATION ${CMAKE_INSTALL_DOCDIR} COMPONENT command)
install(FILES ${leaflet_copyright} DESTINATION ${CMAKE_INSTALL_DOCDIR} RENAME leaflet-copyright COMPONENT command)

set(CPACK_GENERATOR DEB)
set(CPACK_PACKAGE_NAME rillclock)
set(CPACK_PACKAGE_CONTACT "the makers of rillclock")
set(CPACK_PACKAGE_DESCRIPTION_SUMMARY "${PROJECT_DESCRIPTION}")
set(CPACK_PACKAGING_INSTALL_PREFIX /usr)
set(CPACK_STRIP_FILES ON)
set(CPACK_DEB_COMPONENT_INSTALL ON)
set(CPACK_COMPONENTS_ALL command)
set(CPACK_DEBIAN_FILE_NAME DEB-DEFAULT)
set(CPACK_DEBIAN_COMMAND_PACKAGE_NAME rillclock)
set(CPACK_DEBIAN_PACKAGE_SECTION science)
set(CPACK_DEBIAN_PACKAGE_SHLIBDEPS ON)
set(CPACK_DEBIAN_PACKAGE_DEPENDS "proj-data")
include(CPack)
