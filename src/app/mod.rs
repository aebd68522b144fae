//! IO: what can be done? One method a use case, called by api and page alike.
