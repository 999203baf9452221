#pragma once
/// Everything. A program that includes this one sees the whole library.
#include <chromacore/air.hpp>
#include <chromacore/band.hpp>
#include <chromacore/catalog.hpp>
#include <chromacore/catalog_file.hpp>
#include <chromacore/closed_form.hpp>
#include <chromacore/color.hpp>
#include <chromacore/error.hpp>
#include <chromacore/material.hpp>
#include <chromacore/paraxial.hpp>
#include <chromacore/result_json.hpp>
#include <chromacore/solve.hpp>
#include <chromacore/train.hpp>
#include <chromacore/train_file.hpp>
#include <chromacore/units.hpp>
#include <chromacore/version.hpp>
