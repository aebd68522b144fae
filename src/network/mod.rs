//! PURE: how is it wired? Elements to one linear network per conduction pattern.
