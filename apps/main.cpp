// Finds the command, runs it, prints an error, returns the exit status.
// SPDX-License-Identifier: MIT
#include <cstdio>
#include <exception>

#include "apps/console.hpp"
#include "apps/options.hpp"
#include "core/base/error.hpp"

int main(int argc, char** argv) {
    using namespace bandwright;
    Exit status = Exit::bug;
    try {
        status = run_command_line(argc, argv);
    } catch (const InputError& error) {
        complain(error.what());
        status = Exit::wrong_input;
    } catch (const FileError& error) {
        complain(error.what());
        status = Exit::file_trouble;
    } catch (const std::exception& error) {
        complain(std::string("this is a bug of ours, please report it with the structure file: ") +
                 error.what());
        status = Exit::bug;
    }
    // A full disk shows only now: what was printed must have arrived.
    if (std::fflush(stdout) != 0 || std::ferror(stdout)) {
        complain("standard output cannot be written");
        if (status == Exit::done) status = Exit::file_trouble;
    }
    return static_cast<int>(status);
}
