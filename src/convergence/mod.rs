//! Numbers in, numbers out: rates and expected orders.
