#include "apps/command.hpp"

namespace bandwright {

const std::vector<Command>& commands() {
    static const std::vector<Command> list{inspect_command(), ledger_command(), bands_command(), iv_command(),
                                           handcheck_command()};
    return list;
}

}  // namespace bandwright
