(** Weights that refute, and twins that must be refused. *)

From Coq Require Import List PArith ZArith.
From Certify Require Import Question Counting.
Import ListNotations.
Open Scope positive_scope.

Definition graph n list must := {| order := n; edges := list; needed := must |}.
Definition by_weights l y := {| weights := combine l y; cuts := []; parities := [] |}.
Definition by_cut s z := {| weights := []; cuts := [(s, z)]; parities := [] |}.
Definition by_parity s F z := {| weights := []; cuts := []; parities := [(s, F, z)] |}.

Ltac computed := vm_compute; reflexivity.

Definition theta := graph 5 [(1, 3); (1, 4); (1, 5); (2, 3); (2, 4); (2, 5)] [].
Definition pentagon := graph 5 [(1, 2); (1, 5); (2, 3); (3, 4); (4, 5)] [].

(** ** Weights of vertices *)

(** FORMAT.md, section 9: 4 are needed and 3 offered. *)
Example worked : check_counting theta (by_weights [2; 3; 4; 5] [-1; 1; 1; 1]%Z) = true.
Proof. computed. Qed.
(** Less weight: 2 are needed and 2 offered. *)
Example one_less : check_counting theta (by_weights [2; 3; 4] [-1; 1; 1]%Z) = false.
Proof. computed. Qed.
(** With the edge 34 there is the cycle 1 3 4 2 5. *)
Example one_edge_more :
  check_counting (graph 5 [(1, 3); (1, 4); (1, 5); (2, 3); (2, 4); (2, 5); (3, 4)] [])
    (by_weights [2; 3; 4; 5] [-1; 1; 1; 1]%Z) = false.
Proof. computed. Qed.
(** A vertex that is not there needs two edges that nothing offers. *)
Example strange_vertex : check_counting pentagon (by_weights [6] [1]%Z) = false.
Proof. computed. Qed.
Example unsorted :
  check_counting theta (by_weights [3; 2; 4; 5] [1; -1; 1; 1]%Z) = false.
Proof. computed. Qed.
Example twice :
  check_counting theta (by_weights [2; 3; 4; 5; 5] [-1; 1; 1; 1; 1]%Z) = false.
Proof. computed. Qed.
Example zero :
  check_counting theta (by_weights [1; 2; 3; 4; 5] [0; -1; 1; 1; 1]%Z) = false.
Proof. computed. Qed.
Example nothing : check_counting theta (by_weights [] []) = false.
Proof. computed. Qed.
(** 10 are needed and 10 offered: equality is no contradiction. *)
Example equality :
  check_counting pentagon (by_weights [1; 2; 3; 4; 5] [1; 1; 1; 1; 1]%Z) = false.
Proof. computed. Qed.
Example too_small : check_counting (graph 2 [(1, 2)] []) (by_weights [1] [1]%Z) = false.
Proof. computed. Qed.

(** A needed edge offers its score also when that is negative: -2 are needed, -3 offered. *)
Example needed_negative :
  check_counting (graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4); (3, 4)]
                    [(1, 2); (1, 3); (1, 4)])
    (by_weights [1] [-1]%Z) = true.
Proof. computed. Qed.
Example less_needed :
  check_counting (graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4); (3, 4)] [(1, 2); (1, 3)])
    (by_weights [1] [-1]%Z) = false.
Proof. computed. Qed.

(** ** Cuts *)

(** Two triangles and one edge between them. *)
Definition bridge := graph 6 [(1, 2); (1, 3); (2, 3); (3, 4); (4, 5); (4, 6); (5, 6)] [].
(** The prism: 1 2 3 6 5 4 is a cycle. *)
Definition prism must :=
  graph 6 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 5); (3, 6); (4, 5); (4, 6); (5, 6)] must.

Example cut : check_counting bridge (by_cut [1; 2; 3] 1%Z) = true.
Proof. computed. Qed.
Example cut_elsewhere : check_counting bridge (by_cut [1; 2] 1%Z) = false.
Proof. computed. Qed.
Example cut_prism : check_counting (prism []) (by_cut [1; 2; 3] 1%Z) = false.
Proof. computed. Qed.
(** Nothing leaves the empty set, or everything, or everything and more. *)
Example cut_empty : check_counting (prism []) (by_cut [] 1%Z) = false.
Proof. computed. Qed.
Example cut_everything : check_counting (prism []) (by_cut [1; 2; 3; 4; 5; 6] 1%Z) = false.
Proof. computed. Qed.
Example cut_more : check_counting (prism []) (by_cut [1; 2; 3; 4; 5; 6; 7] 1%Z) = false.
Proof. computed. Qed.
Example cut_strange : check_counting (prism []) (by_cut [7] 1%Z) = false.
Proof. computed. Qed.
Example cut_twice : check_counting bridge (by_cut [1; 1; 2; 3] 1%Z) = false.
Proof. computed. Qed.
Example cut_unsorted : check_counting bridge (by_cut [3; 1; 2] 1%Z) = false.
Proof. computed. Qed.
(** A negative weight turns the inequality round. This graph has the cycle 1 3 2 4, of which
    every edge leaves the set: needed would be -2, and offered -4. *)
Example cut_negative :
  check_counting (graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4); (3, 4)]
                    [(1, 3); (1, 4); (2, 3); (2, 4)]) (by_cut [1; 2] (-1)%Z) = false.
Proof. computed. Qed.
Example cut_zero :
  check_counting theta {| weights := combine [2; 3; 4; 5] [-1; 1; 1; 1]%Z;
                          cuts := [([1; 2], 0%Z)]; parities := [] |} = false.
Proof. computed. Qed.

(** ** Parities *)

(** The prism with all three rungs needed: a cycle would leave the triangle three times. *)
Definition rungs := [(1, 4); (2, 5); (3, 6)].

Example parity : check_counting (prism rungs) (by_parity [1; 2; 3] rungs 1%Z) = true.
Proof. computed. Qed.
Example parity_heavier : check_counting (prism rungs) (by_parity [4; 5; 6] rungs 7%Z) = true.
Proof. computed. Qed.
(** Two rungs needed: the cycle above. *)
Example two_rungs :
  check_counting (prism [(1, 4); (3, 6)]) (by_parity [1; 2; 3] rungs 1%Z) = false.
Proof. computed. Qed.
(** An even set: 1 2 3 6 5 4 leaves the triangle exactly along 14 and 36. *)
Definition two_rung_prism :=
  graph 6 [(1, 2); (1, 3); (1, 4); (2, 3); (3, 6); (4, 5); (4, 6); (5, 6)] [(1, 4); (3, 6)].

Example even :
  check_counting two_rung_prism (by_parity [1; 2; 3] [(1, 4); (3, 6)] 1%Z) = false.
Proof. computed. Qed.
Example even_as_odd :
  check_counting two_rung_prism (by_parity [1; 2; 3] [(1, 4); (3, 6); (3, 6)] 1%Z) = false.
Proof. computed. Qed.
(** An edge that does not leave the set: the same cycle again. *)
Example parity_inside :
  check_counting (prism [(1, 2); (1, 4); (3, 6)])
    (by_parity [1; 2; 3] [(1, 2); (1, 4); (3, 6)] 1%Z) = false.
Proof. computed. Qed.
(** What is to spare in the cut of the bridge may not hide an edge that is not in the graph,
    or is written backwards. *)
Definition spare F :=
  {| weights := []; cuts := [([1; 2; 3], 5%Z)]; parities := [([1; 2; 3], F, 1%Z)] |}.
Example parity_spare : check_counting bridge (spare [(3, 4)]) = true.
Proof. computed. Qed.
Example parity_no_edge : check_counting bridge (spare [(2, 4)]) = false.
Proof. computed. Qed.
Example parity_backwards : check_counting bridge (spare [(4, 3)]) = false.
Proof. computed. Qed.
Example parity_unsorted :
  check_counting (prism rungs) (by_parity [1; 2; 3] [(2, 5); (1, 4); (3, 6)] 1%Z) = false.
Proof. computed. Qed.
(** The prism has the cycle 1 2 5 4 6 3, which leaves the triangle along 25 and 36. *)
Example parity_negative :
  check_counting (prism [(2, 5); (3, 6)]) (by_parity [1; 2; 3] [(1, 4)] (-1)%Z) = false.
Proof. computed. Qed.
Example parity_everything :
  check_counting (prism rungs) (by_parity [1; 2; 3; 4; 5; 6] rungs 1%Z) = false.
Proof. computed. Qed.
Example parity_nothing_in_it :
  check_counting (prism []) (by_parity [1; 2; 3] [] 1%Z) = false.
Proof. computed. Qed.
