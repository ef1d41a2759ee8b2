# Installs BUILD to WORK/prefix, moves it (a package must not depend on the place it was installed to), builds CONSUMER against
# it and runs it on a good and on a missing file.
function(run_or_stop what)
  execute_process(COMMAND ${ARGN} RESULT_VARIABLE status OUTPUT_VARIABLE output ERROR_VARIABLE output)
  if(NOT status EQUAL 0)
    message(FATAL_ERROR "${what} failed (${status}):\n${output}")
  endif()
endfunction()

function(expect arguments wanted_status wanted_output)
  execute_process(COMMAND ${WORK}/build/consumer ${arguments} RESULT_VARIABLE status OUTPUT_VARIABLE output)
  if(NOT status STREQUAL wanted_status OR NOT output MATCHES "${wanted_output}")
    message(FATAL_ERROR "consumer ${arguments}: want ${wanted_status} and '${wanted_output}', got ${status}:\n${output}")
  endif()
endfunction()

file(REMOVE_RECURSE ${WORK})
run_or_stop("installing" ${CMAKE_COMMAND} --install ${BUILD} --prefix ${WORK}/first)
file(RENAME ${WORK}/first ${WORK}/prefix)
run_or_stop("configuring the consumer" ${CMAKE_COMMAND} -S ${CONSUMER} -B ${WORK}/build -G ${GENERATOR}
            -DCMAKE_CXX_COMPILER=${CXX} -DCMAKE_BUILD_TYPE=Release -DCMAKE_PREFIX_PATH=${WORK}/prefix)
run_or_stop("building the consumer" ${CMAKE_COMMAND} --build ${WORK}/build)

file(WRITE ${WORK}/harbour.csv "price,weight\n1,2\n3,4\n")
# Two rows cannot determine three coefficients.
expect(${WORK}/harbour.csv 0 "^price\nweight\nsingular\n$")
expect(${WORK}/no-such-file.csv 1 "no-such-file.csv")
