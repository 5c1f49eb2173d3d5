//! The roles of the one executable.

use std::env;

use crate::wrapper;

/// Set for the process that runs the cells: the path of a file that exists once the session is
/// open (before that, its output must pass unchanged).
pub(crate) const OPEN_FLAG_VAR: &str = "HADE_SESSION_OPEN";

/// Set by the notebook engine for the process that runs the cells.
const ENGINE_CHILD_VAR: &str = "EVCXR_IS_RUNTIME";

/// Takes over if this process was started by a session; otherwise returns at once.
///
/// Must be the first call in `main` of every program that uses this crate. A session starts its
/// own program again in two roles: as the process that loads and runs the compiled cells, and as
/// the wrapper that adds the prebuilt libraries to the compiler's command line.
///
/// ```
/// // first in `main`:
/// hade_kernel::runtime_hook();
/// // … then the program itself
/// ```
pub fn runtime_hook() {
    if let Some(plan) = env::var_os(wrapper::PLAN_VAR) {
        wrapper::run(plan.as_ref());
    }
    if env::var_os(ENGINE_CHILD_VAR).is_some() {
        #[cfg(unix)]
        if let Some(flag) = env::var_os(OPEN_FLAG_VAR) {
            crate::filter::install(flag.into());
        }
    }
    evcxr::runtime_hook();
}
