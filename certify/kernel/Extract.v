(** * The checks as a program of OCaml

    For bulk tables and long proofs: the same functions as in the theorems, made into
    OCaml by Coq's extraction. Here the graph comes from outside, with its edges written out;
    in a theorem it is built from the claim's rule. driver.ml reads it and calls
    [shows_path] and [shows_cycle].

    Numbers stay Coq's own, digit by digit ([positive], [Z], [nat]), so no machine integer
    has to be believed not to overflow. Booleans, pairs, lists and options become OCaml's,
    with [&&] and [||] for [andb] and [orb]. *)

From Coq Require Import ZArith List.
From Coq Require Import Extraction ExtrOcamlBasic.
From Certify Require Import Statement EdgeGraph Normal Certificate.

(** The query about the graph with vertices 0, ..., n - 1 and these edges. *)
Definition asked (n : Z) (edges : list (Z * Z)) (ends : list Z) (required forbidden : list (Z * Z)) :=
  demand (edge_graph n edges) ends required forbidden.

Definition shows_path n edges ends required forbidden (answer : bool) (c : certificate) : bool :=
  check_path (asked n edges ends required forbidden) answer c.

Definition shows_cycle n edges required forbidden (answer : bool) (c : certificate) : bool :=
  check_cycle (asked n edges nil required forbidden) answer c.

(** What it means that the program says "accepted". *)
Theorem shows_path_sound : forall n edges ends required forbidden answer c,
  shows_path n edges ends required forbidden answer c = true ->
  ((exists h, ham_path (asked n edges ends required forbidden) h) <-> answer = true).
Proof. intros n edges ends required forbidden answer c. apply path_answer. Qed.

Theorem shows_cycle_sound : forall n edges required forbidden answer c,
  shows_cycle n edges required forbidden answer c = true ->
  ((exists h, ham_cycle (asked n edges nil required forbidden) h) <-> answer = true).
Proof. intros n edges required forbidden answer c. apply cycle_answer. Qed.

Extraction Language OCaml.
Extraction "kernel.ml" shows_path shows_cycle.
