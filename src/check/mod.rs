//! One build's answer: verdict, figures by state and accessory, findings.

pub mod answer;
