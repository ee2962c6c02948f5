#include "solvers/analyses/bias_points.hpp"

namespace bandwright {}
