/**
 * Natural frequencies: K x = omega^2 M x. Mass: the members' own (consistent) and a stated part of the downward loads
 * of each case divided by g (model->mass_factor), which acts in all directions: loads at joints there, loads on members
 * by the lever rule at the ends of their pieces. Loads upwards are no mass; self-weight of the cases is not counted a
 * second time. Linear, unloaded: forces do not change the stiffness; no damping, no rotary inertia.
 *
 * Per design: sct_fine_update with its sizes, then sct_vibration_find.
 */
#ifndef SCT_ANALYSIS_VIBRATION_H
#define SCT_ANALYSIS_VIBRATION_H

#include "analysis/modes.h"

typedef struct sct_vibration sct_vibration;

/** Borrows the divided structure. `wanted` modes, >= 1. *status: SCT_OK, SCT_NO_MEMORY. */
sct_vibration *sct_vibration_new(sct_fine *fine, int wanted, sct_status *status);
void sct_vibration_free(sct_vibration *vibration);

/** The lowest modes, lambda = omega^2 [1/s2]; *modes lives until the next call. Statuses of sct_mode_finder_run. */
sct_status sct_vibration_find(sct_vibration *vibration, sct_mode_search how, sct_modes *modes);

/** [Hz] of mode i. */
double sct_frequency(const sct_modes *modes, int i);

/** [kg] that moves in one direction: own and of loads, supported parts included. */
double sct_vibration_mass(const sct_vibration *vibration);

/** D (n_vars) = d ln omega^2 / dz of mode i found last, z = ln A, when j = i (half of it for ln f); entry (i, j) of the
 * matrix of a cluster else, as sct_stability_derivative. x'(dK - omega^2 dM) x with x'K x = 1. */
void sct_vibration_derivative(const sct_vibration *vibration, const sct_modes *modes, int i, int j, double D[]);
#endif
