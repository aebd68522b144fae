//! PURE: how is a supply written down? The one published form, read with every fault collected, and written back.
