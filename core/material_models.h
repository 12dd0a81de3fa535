/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Parameters of the built-in materials' analytic models, as core/materials.c takes them; wavenumbers in cm^-1. They were fitted for this
   project to open tables of n and k (named in the list of materials there); the model silicate to published facts about interstellar and
   circumstellar silicates. Fit errors stand in the materials' validity. */
#ifndef LACUNA_CORE_MATERIAL_MODELS_H
#define LACUNA_CORE_MATERIAL_MODELS_H

typedef struct {
  double strength, wavenumber, damping;
} lorentz_term;

typedef struct {
  double plasma_wavenumber, damping;
} drude_term;

/* A pair of Gaussians in Im eps with the real part that Kramers and Kronig demand. */
typedef struct {
  double amplitude, wavenumber, width;
} gauss_term;

static const gauss_term water_ice_gauss[] = {
    {0.1261, 27.489, 3236},    {0.3108, 117.54, 36.32},  {0.5882, 142.78, 17.25}, {0.8674, 194.67, 110.3},  {1.176, 202.37, 22.25},
    {0.6502, 209.67, 7.976},   {0.345, 656.8, 178.9},    {0.9763, 804.51, 109},   {0.09664, 1217.3, 457.2}, {0.1158, 1588.6, 191.2},
    {0.03797, 2220.8, 93.97},  {0.04572, 2277.9, 372.6}, {0.3769, 3198.2, 236.3}, {1.224, 3215.2, 109.8},   {0.2995, 3374, 111.9},
    {0.003931, 4983.7, 198.3}, {0.001446, 6552.3, 294},  {3.206, 87322, 10770}};
static const lorentz_term iron_lorentz[] = {{1817, 250.2, 614.5}, {1.411, 21540, 9736}, {1975, 3243, 81690}};
static const drude_term iron_drude[] = {{26510, 129}};
static const lorentz_term soot_lorentz[] = {
    {48.54, 37.54, 111}, {35.22, 219.6, 596.5}, {31.05, 1166, 3217}, {4.703, 6459, 13280}, {2.24, 52470, 87440}};
static const drude_term soot_drude[] = {{677.1, 500.3}};
static const gauss_term silica_glass_gauss[] = {{0.9288, 430.6, 90.7},    {3.546, 438.66, 27.36}, {7.897, 459.32, 16.3},
                                                {0.3466, 502.71, 296.5},  {0.9422, 806.49, 34.9}, {0.3509, 1032.8, 58.02},
                                                {13.27, 1072.4, 33.31},   {0.9141, 1163.7, 76.5}, {0.02502, 1339.7, 438.4},
                                                {0.01512, 1912.9, 117.7}, {6.704, 100070, 11090}};
static const lorentz_term model_silicate_lorentz[] = {
    {0.1596, 134600, 538500}, {0.1439, 16960, 67840}, {6.084, 306, 562.3}, {0.153, 10.3, 41.2}};
static const gauss_term model_silicate_gauss[] = {{4.404, 95000, 22000}, {2.591, 930.6, 162.5}, {3.308, 401.7, 157.1}};

#endif
