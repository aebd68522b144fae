//! HTTP: how do people ask? The form page and its files.
