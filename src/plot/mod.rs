//! PURE: how is it shown? SVG plots of waveforms.
