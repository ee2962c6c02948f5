#include "solvers/kinsol_session.hpp"

#include <kinsol/kinsol.h>
#include <nvector/nvector_serial.h>
#include <sundials/sundials_linearsolver.h>

#include <algorithm>
#include <cmath>
#include <exception>
#include <utility>

#include "core/base/error.hpp"

namespace bandwright::detail {

struct KinsolSession::Memory {
    SUNContext context = nullptr;
    void* kinsol = nullptr;
    SUNLinearSolver linear = nullptr;
    N_Vector unknowns = nullptr, scale = nullptr;
    std::size_t size = 0;

    Residual residual;
    Step step;
    std::exception_ptr thrown;
    std::string message;

    ~Memory() {
        release();
        if (context) SUNContext_Free(&context);
    }

    void release() {
        if (kinsol) KINFree(&kinsol);
        if (linear) SUNLinSolFreeEmpty(linear);  // its content is ours, not to be freed
        if (unknowns) N_VDestroy(unknowns);
        if (scale) N_VDestroy(scale);
        kinsol = nullptr;
        linear = nullptr;
        unknowns = scale = nullptr;
    }
};

namespace {

// No exception may cross the C frames: it is kept and rethrown after KINSol has returned.
template <class Function>
int guarded(std::exception_ptr& thrown, Function function) {
    try {
        return function();
    } catch (...) {
        thrown = std::current_exception();
        return -1;
    }
}

// The library's serial vector with its norms and products as loops that become vector instructions: as built
// by Debian they cost as much as our whole assembly.
void use_fast_loops(N_Vector vector) {
    vector->ops->nvwl2norm = [](N_Vector x, N_Vector w) {
        const double *a = N_VGetArrayPointer(x), *b = N_VGetArrayPointer(w);
        const auto n = static_cast<std::size_t>(N_VGetLength(x));
        double sums[8] = {};
        std::size_t i = 0;
        for (; i + 8 <= n; i += 8)
            for (std::size_t k = 0; k < 8; ++k) sums[k] += (a[i + k] * b[i + k]) * (a[i + k] * b[i + k]);
        for (; i < n; ++i) sums[0] += (a[i] * b[i]) * (a[i] * b[i]);
        return std::sqrt(((sums[0] + sums[1]) + (sums[2] + sums[3])) +
                         ((sums[4] + sums[5]) + (sums[6] + sums[7])));
    };
    vector->ops->nvmaxnorm = [](N_Vector x) {
        const double* a = N_VGetArrayPointer(x);
        const auto n = static_cast<std::size_t>(N_VGetLength(x));
        double most[8] = {};
        std::size_t i = 0;
        for (; i + 8 <= n; i += 8)
            for (std::size_t k = 0; k < 8; ++k) {
                const double size = std::abs(a[i + k]);
                most[k] = size > most[k] ? size : most[k];
            }
        for (; i < n; ++i) most[0] = std::max(most[0], std::abs(a[i]));
        return *std::max_element(most, most + 8);
    };
    vector->ops->nvprod = [](N_Vector x, N_Vector y, N_Vector z) {
        const double *a = N_VGetArrayPointer(x), *b = N_VGetArrayPointer(y);
        double* c = N_VGetArrayPointer(z);
        const auto n = static_cast<std::size_t>(N_VGetLength(x));
        for (std::size_t i = 0; i < n; ++i) c[i] = a[i] * b[i];
    };
    vector->ops->nvdiv = [](N_Vector x, N_Vector y, N_Vector z) {
        const double *a = N_VGetArrayPointer(x), *b = N_VGetArrayPointer(y);
        double* c = N_VGetArrayPointer(z);
        const auto n = static_cast<std::size_t>(N_VGetLength(x));
        for (std::size_t i = 0; i < n; ++i) c[i] = a[i] / b[i];
    };
    vector->ops->nvinv = [](N_Vector x, N_Vector z) {
        const double* a = N_VGetArrayPointer(x);
        double* c = N_VGetArrayPointer(z);
        const auto n = static_cast<std::size_t>(N_VGetLength(x));
        for (std::size_t i = 0; i < n; ++i) c[i] = 1 / a[i];
    };
}

}  // namespace

KinsolSession::KinsolSession() : memory_(std::make_unique<Memory>()) {
    require(SUNContext_Create(nullptr, &memory_->context) == 0, "SUNDIALS gives no context");
}

KinsolSession::~KinsolSession() = default;

std::string KinsolSession::solve(std::span<double> unknowns, int most_iterations, Residual residual,
                                 Step step) {
    Memory& m = *memory_;
    m.residual = std::move(residual);
    m.step = std::move(step);
    m.thrown = nullptr;
    m.message.clear();
    if (m.size != unknowns.size()) {
        m.release();
        m.size = unknowns.size();
        m.unknowns = N_VNew_Serial(static_cast<sunindextype>(m.size), m.context);
        m.scale = N_VNew_Serial(static_cast<sunindextype>(m.size), m.context);
        m.kinsol = KINCreate(m.context);
        require(m.kinsol && m.unknowns && m.scale, "SUNDIALS gives no memory");
        use_fast_loops(m.unknowns);
        use_fast_loops(m.scale);
        N_VConst(1.0, m.scale);
        KINSetErrHandlerFn(
            m.kinsol,
            [](int, const char*, const char*, char* text, void* data) {
                static_cast<Memory*>(data)->message = text;
            },
            &m);
        KINSetUserData(m.kinsol, &m);
        const auto system = [](N_Vector u, N_Vector f, void* data) {
            Memory& memory = *static_cast<Memory*>(data);
            return guarded(memory.thrown, [&] {
                const Trial trial = memory.residual({N_VGetArrayPointer(u), memory.size},
                                                    {N_VGetArrayPointer(f), memory.size});
                return trial == Trial::good ? 0 : 1;
            });
        };
        require(KINInit(m.kinsol, system, m.unknowns) == KIN_SUCCESS, "KINInit fails");
        // A solver that carries its own matrix. KINSOL 6.4 takes such a solver only as an iterative one (it
        // refuses the kind "matrix embedded"), and then wants a matrix-vector product, which is never called.
        // The step comes from our block elimination, already turned into the density step, so KINSOL's linear
        // residuals mean nothing.
        m.linear = SUNLinSolNewEmpty(m.context);
        m.linear->content = &m;
        m.linear->ops->gettype = [](SUNLinearSolver) { return SUNLINEARSOLVER_ITERATIVE; };
        m.linear->ops->setatimes = [](SUNLinearSolver, void*, SUNATimesFn) -> int { return SUNLS_SUCCESS; };
        m.linear->ops->solve = [](SUNLinearSolver s, SUNMatrix, N_Vector x, N_Vector, realtype) {
            Memory& memory = *static_cast<Memory*>(s->content);
            return guarded(memory.thrown, [&] {
                return memory.step({N_VGetArrayPointer(x), memory.size}) ? SUNLS_SUCCESS
                                                                         : SUNLS_PACKAGE_FAIL_REC;
            });
        };
        require(KINSetLinearSolver(m.kinsol, m.linear, nullptr) == 0, "KINSetLinearSolver fails");
        KINSetEtaForm(m.kinsol, KIN_ETACONSTANT);
        KINSetMaxNewtonStep(m.kinsol, 1e12);  // the default cuts the first steps
        KINSetMaxSetupCalls(m.kinsol, 1);     // a new Jacobian every step
        KINSetFuncNormTol(m.kinsol, 1e-280);  // reached only when the residual callback reports convergence
        KINSetScaledStepTol(m.kinsol, 1e-280);
        KINSetNoInitSetup(m.kinsol, SUNFALSE);
    }
    std::copy(unknowns.begin(), unknowns.end(), N_VGetArrayPointer(m.unknowns));
    KINSetNumMaxIters(m.kinsol, most_iterations);
    const int code = KINSol(m.kinsol, m.unknowns, KIN_NONE, m.scale, m.scale);
    if (m.thrown) std::rethrow_exception(m.thrown);
    std::copy_n(N_VGetArrayPointer(m.unknowns), m.size, unknowns.begin());
    switch (code) {
        case KIN_SUCCESS:
        case KIN_INITIAL_GUESS_OK:
            return "";
        case KIN_STEP_LT_STPTOL:
            return "the step is zero";
        case KIN_MAXITER_REACHED:
            return "the iterations are used up";
        case KIN_MXNEWT_5X_EXCEEDED:
            return "five steps in a row are too long";
        case KIN_LSOLVE_FAIL:
        case KIN_LINSOLV_NO_RECOVERY:
            return "the linear system is singular";
        case KIN_SYSFUNC_FAIL:
        case KIN_FIRST_SYSFUNC_ERR:
        case KIN_REPTD_SYSFUNC_ERR:
            return "the equations give no finite number";
        default:
            return m.message.empty() ? "KINSOL ends with code " + std::to_string(code) : m.message;
    }
}

}  // namespace bandwright::detail
