//! HTTP: how do programs ask? One file a resource: router, request and answer types, handlers.
