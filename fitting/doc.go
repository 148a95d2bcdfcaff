// Package fitting finds a compound in what was measured.
//
// [Characterize] is the front door: one joint fit of everything in a
// data.Campaign, with honest intervals, and with a finding wherever the
// measurements cannot support a part. It is silent, pure and deterministic: the
// same campaign gives the same Result, bit for bit, on any number of workers.
//
// The rooms behind it: package superpose has the estimator, package nnls the
// non-negative inner problem, package lsq the outer one, package qr the ground
// of both.
package fitting
