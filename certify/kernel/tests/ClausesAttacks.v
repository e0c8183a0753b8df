(** Facts and proofs that refute, and twins that must be refused. *)

From Coq Require Import List PArith.
From Certify Require Import Question Propagation Variables Clauses ClausesSound Packed.
Import ListNotations.
Open Scope positive_scope.

Definition graph n list must := {| order := n; edges := list; needed := must |}.
Definition proof f s := {| facts := f; steps := s |}.

Ltac computed := vm_compute; reflexivity.

(** ** The worked example of FORMAT.md, section 9 *)

Definition theta := graph 5 [(1, 3); (1, 4); (1, 5); (2, 3); (2, 4); (2, 5)] [].
Definition worked := proof [Degree 2; Degree 3; Degree 4; Degree 5] [([], [7; 5; 4; 9])].

Example its_clauses : clauses_of theta (near_edges theta) (facts worked) =
  Some ([[10; 12]; [8; 12]; [8; 10]; [9; 11; 13]; [8]; [2]; [10]; [4]; [12]; [6]], 7).
Proof. computed. Qed.
Example worked_refutes : check_clauses theta worked = true.
Proof. computed. Qed.
(** With the edge 34 there is the cycle 1 3 4 2 5. *)
Example one_edge_more :
  check_clauses (graph 5 [(1, 3); (1, 4); (1, 5); (2, 3); (2, 4); (2, 5); (3, 4)] []) worked
  = false.
Proof. computed. Qed.
Example one_edge_less :
  check_clauses (graph 5 [(1, 3); (1, 4); (1, 5); (2, 3); (2, 4)] []) worked = false.
Proof. computed. Qed.
(** The cycle on five vertices, in place of the graph. *)
Example other_graph :
  check_clauses (graph 5 [(1, 2); (1, 5); (2, 3); (3, 4); (4, 5)] []) worked = false.
Proof. computed. Qed.
Example fact_missing :
  check_clauses theta (proof [Degree 3; Degree 4; Degree 5] [([], [7; 5; 4; 9])]) = false.
Proof. computed. Qed.
Example facts_in_disorder :
  check_clauses theta (proof [Degree 3; Degree 2; Degree 4; Degree 5] [([], [7; 5; 4; 9])]) = false.
Proof. computed. Qed.
Example no_proof : check_clauses theta (proof (facts worked) []) = false.
Proof. computed. Qed.
Example small :
  check_clauses (graph 2 [(1, 2)] []) (proof [Cut [1]] [([2], [1]); ([], [2])]) = false.
Proof. computed. Qed.

(** ** Petersen's graph, with a cut and mirrors; it has no Hamiltonian cycle
    (Holton and Sheehan, The Petersen Graph, Cambridge 1993; from memory) *)

Definition petersen := graph 10
  [(1, 2); (1, 5); (1, 6); (2, 3); (2, 7); (3, 4); (3, 8); (4, 5); (4, 9); (5, 10); (6, 8); (6, 9);
   (7, 9); (7, 10); (8, 10)] [].
Definition some_facts :=
  [Degree 1; Degree 2; Degree 3; Degree 4; Degree 5; Degree 6; Degree 7; Degree 8; Degree 10;
   Cut [1; 4; 5; 6; 9]].
Definition some_mirrors :=
  [Mirror 3 [1; 2; 3; 8; 6; 5; 7; 4; 10; 9]; Mirror 1 [5; 4; 9; 7; 10; 1; 3; 6; 2; 8];
   Mirror 1 [5; 4; 3; 8; 10; 1; 9; 2; 6; 7]].
Definition some_steps : list step :=
  [([12; 2], [6; 3; 9; 15; 20; 34; 35; 32; 28; 37]); ([22], [46; 2; 3; 7; 39; 42; 47; 12; 44]);
   ([4], [48; 3; 1; 24; 45]); ([], [49; 48; 39; 38; 24; 45; 7; 42; 47; 12; 44])].

Theorem petersen_refuted : refuted petersen.
Proof.
  apply (check_clauses_sound petersen (proof (some_facts ++ some_mirrors) some_steps));
    vm_cast_no_check (eq_refl true).
Qed.
(** One place more is a variable more, and other clauses. *)
Example mirror_at_more_places :
  check_clauses petersen
    (proof (some_facts ++ Mirror 4 [1; 2; 3; 8; 6; 5; 7; 4; 10; 9] :: tl some_mirrors) some_steps)
  = false.
Proof. computed. Qed.
(** With the edge 13 there is the cycle 1 2 7 9 6 8 10 5 4 3. *)
Example petersen_and_an_edge :
  check_clauses (graph 10 ((1, 2) :: (1, 3) :: tl (edges petersen)) [])
    (proof (some_facts ++ some_mirrors) some_steps) = false.
Proof. computed. Qed.

(** ** Facts that are not true *)

Definition says (Q : question) (f : fact) : bool :=
  match fact_clauses Q (near_edges Q) f (first_free Q) with Some _ => true | None => false end.

Definition k4 := graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4); (3, 4)] [].
Definition k4_needs := graph 4 (edges k4) [(1, 2)].
Definition square_and_leaf := graph 5 [(1, 2); (1, 4); (2, 3); (3, 4); (3, 5)] [].

Example degree : says k4 (Degree 4) = true. Proof. computed. Qed.
Example degree_of_none : says k4 (Degree 5) = false. Proof. computed. Qed.
Example degree_of_leaf : says square_and_leaf (Degree 5) = false. Proof. computed. Qed.

Example cut : says k4 (Cut [1; 4]) = true. Proof. computed. Qed.
Example cut_of_nothing : says k4 (Cut []) = false. Proof. computed. Qed.
Example cut_of_everything : says k4 (Cut [1; 2; 3; 4]) = false. Proof. computed. Qed.
Example cut_outside : says k4 (Cut [5]) = false. Proof. computed. Qed.
Example cut_partly_outside : says k4 (Cut [4; 5]) = false. Proof. computed. Qed.
Example cut_unsorted : says k4 (Cut [4; 1]) = false. Proof. computed. Qed.
Example cut_doubled : says k4 (Cut [1; 1]) = false. Proof. computed. Qed.

Example required : says k4_needs (Required 1 2) = true. Proof. computed. Qed.
Example required_backwards : says k4_needs (Required 2 1) = false. Proof. computed. Qed.
Example required_of_none : says k4_needs (Required 1 3) = false. Proof. computed. Qed.

Example mirror : says k4 (Mirror 9 [2; 3; 4; 1]) = true. Proof. computed. Qed.
Example mirror_moves_needed : says k4_needs (Mirror 9 [2; 3; 4; 1]) = false. Proof. computed. Qed.
Example mirror_keeps_needed : says k4_needs (Mirror 9 [2; 1; 4; 3]) = true. Proof. computed. Qed.
Example mirror_loses_edges :
  says square_and_leaf (Mirror 9 [2; 3; 4; 1; 5]) = false. Proof. computed. Qed.
(** Every edge of a square is folded onto one edge. *)
Example mirror_folds :
  says (graph 4 [(1, 2); (1, 4); (2, 3); (3, 4)] []) (Mirror 9 [1; 2; 1; 2]) = false.
Proof. computed. Qed.
Example mirror_too_short : says k4 (Mirror 9 [1; 2; 3]) = false. Proof. computed. Qed.
Example mirror_too_long : says k4 (Mirror 9 [2; 1; 3; 4; 5]) = false. Proof. computed. Qed.
Example mirror_outside : says k4 (Mirror 9 [1; 2; 3; 5]) = false. Proof. computed. Qed.

(** Were mirrors allowed to move the needed edge, they would refute a graph with cycles through
    it: the first of all images does not use the edge 12. *)
Definition moving := [Degree 1; Required 1 2; Mirror 1 [1; 3; 2; 4]; Mirror 1 [1; 4; 3; 2]].
Definition moving_steps : list step := [([], [5; 6; 7; 4])].

Example these_clauses_would_do :
  check_proof [[4; 6]; [2; 6]; [2; 4]; [3; 5; 7]; [2]; [3; 4]; [3; 6]] moving_steps = true.
Proof. computed. Qed.
Example and_the_mirrors_give_them :
  option_map fst (clauses_of k4 (near_edges k4) (filter (fun f => match f with Mirror _ _ => true
                                                               | _ => false end) moving))
  = Some [[3; 4]; [3; 6]].
Proof. computed. Qed.
Example moving_refused : check_clauses k4_needs (proof moving moving_steps) = false.
Proof. computed. Qed.

(** ** Steps that do not follow: the given clauses are x_1 or x_2, x_1 or not x_2, not x_1 *)

Definition given : list clause := [[2; 4]; [2; 5]; [3]].

Example follows : check_proof given [([2], [1; 2]); ([], [4; 3])] = true.
Proof. computed. Qed.
Example at_once : check_proof given [([], [3; 1; 2])] = true.
Proof. computed. Qed.
(** A satisfiable clause and the empty clause with no hint. *)
Example no_hint : check_proof [[2; 4]] [([], [])] = false.
Proof. computed. Qed.
Example satisfiable : check_proof [[2; 4]] [([], [1])] = false.
Proof. computed. Qed.
Example hint_of_itself : check_proof given [([2], [4]); ([], [4; 3])] = false.
Proof. computed. Qed.
Example hint_of_later : check_proof given [([5], [5]); ([2], [1; 2]); ([], [5; 3])] = false.
Proof. computed. Qed.
Example hint_of_none : check_proof given [([2], [1; 9]); ([], [4; 3])] = false.
Proof. computed. Qed.
Example not_unit : check_proof given [([], [1; 2; 3])] = false.
Proof. computed. Qed.
Example already_true : check_proof given [([], [3; 3; 1; 2])] = false.
Proof. computed. Qed.
Example no_contradiction : check_proof given [([2], [1]); ([], [4; 3])] = false.
Proof. computed. Qed.
Example not_ended : check_proof given [([2], [1; 2])] = false.
Proof. computed. Qed.
Example goes_on : check_proof given [([2], [1; 2]); ([], [4; 3]); ([2], [1; 2])] = false.
Proof. computed. Qed.
Example literal_and_opposite : check_proof [[2; 4]] [([2; 3], [1]); ([], [2])] = false.
Proof. computed. Qed.
Example literal_twice : check_proof given [([2; 2], [1; 2]); ([], [4; 3])] = false.
Proof. computed. Qed.
Example no_clause_and_no_step : check_proof [] [] = false.
Proof. computed. Qed.

(** ** Packed text *)

Example digits : unpack ["A}A>A?B }?A> C!5 @EFGHI@AFGHIEFG@@"%text] =
  [[1; 61; 62; 63; 64; 1983; 1984; 100000]; [5; 6; 7; 8; 9]; [1; 6; 7; 8; 9; 5; 6; 7]; []].
Proof. computed. Qed.
(** A copy: from two lists back, from the second number on, three. The number 34 has a quote. *)
Example copies : unpack ["AA""BCD@E@FBBC~G@"%text] =
  [[1; 34; 2; 3; 4]; [5]; [6; 34; 2; 3; 7]].
Proof. computed. Qed.
Example over_two_texts : unpack ["ABC"%text; "!@
"%text] = [[1; 2; 97]].
Proof. computed. Qed.
Example nonsense : unpack ["!~AZZ~@~~~BCD~"%text] = [[1; 26; 26]].
Proof. computed. Qed.

Example petersen_packed :
  packed ["AA@AB@AC@AD@AE@AF@AG@AH@AJ@BADEFI@DCABCHFEGDJI@DAEDIGJACFBH@DAEDCHJAIBFG@"%text]
    ["LB@FCIOTbc`\e@V@nBCGgjoLl@D@pCAXm@@qpgfXmGjoLl@"%text]
  = proof (some_facts ++ some_mirrors) some_steps.
Proof. computed. Qed.
