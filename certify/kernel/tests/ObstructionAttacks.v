(** Obstructions that hold, and twins that must be refused. Whether a twin is about a graph
    with a Hamiltonian cycle is said where it is not plain. *)

From Coq Require Import List PArith FMapPositive.
From Certify Require Import Question Sets Pieces Obstruction.
Import ListNotations.
Open Scope positive_scope.

Definition graph n list must := {| order := n; edges := list; needed := must |}.

Ltac computed := vm_compute; reflexivity.

(** ** Small *)

Example two_vertices : check_obstruction (graph 2 [(1, 2)] []) Small = true.
Proof. computed. Qed.
Example three_vertices : check_obstruction (graph 3 [(1, 2); (1, 3); (2, 3)] []) Small = false.
Proof. computed. Qed.
(** A graph that is too small has this form and no other. *)
Example leaf_of_two : check_obstruction (graph 2 [(1, 2)] []) (Leaf 1) = false.
Proof. computed. Qed.

(** ** Leaf *)

Definition pan := graph 4 [(1, 2); (1, 3); (2, 3); (3, 4)] [].

Example leaf : check_obstruction pan (Leaf 4) = true.
Proof. computed. Qed.
Example alone : check_obstruction (graph 4 [(1, 2); (1, 3); (2, 3)] []) (Leaf 4) = true.
Proof. computed. Qed.
Example no_leaf : check_obstruction pan (Leaf 1) = false.
Proof. computed. Qed.
(** A vertex that the graph has not has no edges either. *)
Definition triangle := graph 3 [(1, 2); (1, 3); (2, 3)] [].
Example strange_leaf : check_obstruction triangle (Leaf 4) = false.
Proof. computed. Qed.

(** ** Crowded *)

(** Three paths from 1 to 2, each through one vertex. *)
Definition theta := [(1, 3); (1, 4); (1, 5); (2, 3); (2, 4); (2, 5)].

Example crowded : check_obstruction (graph 5 theta []) (Crowded 1 3 4 5) = true.
Proof. computed. Qed.
Example crowded_by_need :
  check_obstruction (graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4); (3, 4)]
                       [(1, 2); (1, 3); (1, 4)]) (Crowded 1 2 3 4) = true.
Proof. computed. Qed.
(** With only two of these needed there is the cycle 1 2 4 3. *)
Example two_needed :
  check_obstruction (graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4); (3, 4)]
                       [(1, 2); (1, 3)]) (Crowded 1 2 3 4) = false.
Proof. computed. Qed.
Definition pentagon := graph 5 [(1, 2); (1, 5); (2, 3); (3, 4); (4, 5)] [].
Example the_same_twice : check_obstruction pentagon (Crowded 1 2 2 5) = false.
Proof. computed. Qed.
Example the_same_twice_later : check_obstruction pentagon (Crowded 1 2 5 5) = false.
Proof. computed. Qed.
Example not_joined : check_obstruction pentagon (Crowded 1 2 3 5) = false.
Proof. computed. Qed.
(** With the edge 34 there is the cycle 1 3 4 2 5. *)
Example one_edge_more :
  check_obstruction (graph 5 [(1, 3); (1, 4); (1, 5); (2, 3); (2, 4); (2, 5); (3, 4)] [])
    (Crowded 1 3 4 5) = false.
Proof. computed. Qed.

(** ** Ring *)

(** Two triangles, joined by one edge. *)
Definition two_triangles must :=
  graph 6 [(1, 2); (1, 3); (2, 3); (3, 4); (4, 5); (4, 6); (5, 6)] must.

Example ring : check_obstruction (two_triangles [(1, 2)]) (Ring [1; 2; 3]) = true.
Proof. computed. Qed.
Example ring_backwards : check_obstruction (two_triangles []) (Ring [6; 5; 4]) = true.
Proof. computed. Qed.
(** All vertices on the ring: that is the cycle. *)
Example whole_ring : check_obstruction pentagon (Ring [1; 2; 3; 4; 5]) = false.
Proof. computed. Qed.
Example edge_as_ring : check_obstruction pentagon (Ring [1; 2]) = false.
Proof. computed. Qed.
Example back_and_forth : check_obstruction pentagon (Ring [2; 1; 2; 3]) = false.
Proof. computed. Qed.
Example twice_around :
  check_obstruction (graph 7 [(1, 2); (1, 7); (2, 3); (3, 4); (4, 5); (5, 6); (6, 7)] [])
    (Ring [1; 2; 1; 2; 1; 2]) = false.
Proof. computed. Qed.
Example open_ring : check_obstruction pentagon (Ring [1; 2; 3; 4]) = false.
Proof. computed. Qed.
(** One side of the ring may be left out: the cycle 1 2 4 3. *)
Example loose_side :
  check_obstruction (graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4); (3, 4)]
                       [(1, 2); (1, 3)]) (Ring [1; 2; 3]) = false.
Proof. computed. Qed.
Example side_missing :
  check_obstruction (graph 5 [(1, 2); (1, 5); (2, 3); (3, 4); (4, 5)] [(1, 2); (2, 3)])
    (Ring [1; 2; 3]) = false.
Proof. computed. Qed.

(** ** Separator *)

Example separator : check_obstruction (graph 5 theta []) (Separator [1; 2]) = true.
Proof. computed. Qed.
Example cut_vertex : check_obstruction (two_triangles []) (Separator [3]) = true.
Proof. computed. Qed.
Example in_pieces :
  check_obstruction (graph 6 [(1, 2); (1, 3); (2, 3); (4, 5); (4, 6); (5, 6)] []) (Separator [])
  = true.
Proof. computed. Qed.
(** The cycle 1 3 2 4 becomes impossible when the edge 12 is needed. *)
Example needed_inside :
  check_obstruction (graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4)] [(1, 2)])
    (Separator [1; 2]) = true.
Proof. computed. Qed.
Example not_needed :
  check_obstruction (graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4)] []) (Separator [1; 2])
  = false.
Proof. computed. Qed.
Example in_one_piece : check_obstruction triangle (Separator []) = false.
Proof. computed. Qed.
Example pieces_joined :
  check_obstruction (graph 5 [(1, 3); (1, 4); (1, 5); (2, 3); (2, 4); (2, 5); (3, 4)] [])
    (Separator [1; 2]) = false.
Proof. computed. Qed.
Example everything : check_obstruction pentagon (Separator [1; 2; 3; 4; 5]) = false.
Proof. computed. Qed.
Example everything_needed :
  check_obstruction (graph 3 [(1, 2); (1, 3); (2, 3)] [(1, 2); (1, 3); (2, 3)])
    (Separator [1; 2; 3]) = false.
Proof. computed. Qed.
(** The edge 12 is needed, but only one of its ends is in the set: the cycle 1 2 3 4 stays. *)
Example needed_outside :
  check_obstruction (graph 4 [(1, 2); (1, 4); (2, 3); (3, 4)] [(1, 2)]) (Separator [1; 3]) = false.
Proof. computed. Qed.
Example separator_unsorted : check_obstruction (graph 5 theta []) (Separator [2; 1]) = false.
Proof. computed. Qed.
Example separator_twice : check_obstruction (graph 5 theta []) (Separator [1; 1; 2]) = false.
Proof. computed. Qed.
Example separator_strange : check_obstruction (graph 5 theta []) (Separator [1; 9]) = false.
Proof. computed. Qed.

(** Labels that make two pieces of one: the edge from 1 to 2 tells. *)
Example wrong_labels :
  let label := PositiveMap.add 1 1 (PositiveMap.add 2 2 (PositiveMap.add 3 2
                 (PositiveMap.empty vertex))) in
  map (keeps_label (members []) label) (edges triangle) = [false; false; true].
Proof. computed. Qed.
Example no_labels :
  map (keeps_label (members [1]) (PositiveMap.empty vertex)) (edges triangle)
  = [true; true; false].
Proof. computed. Qed.

(** ** Independent *)

Example independent : check_obstruction (graph 5 theta []) (Independent [3; 4; 5]) = true.
Proof. computed. Qed.
(** Two independent vertices in four, and a needed edge that misses them. *)
Example independent_and_needed :
  check_obstruction (graph 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4)] [(1, 2)])
    (Independent [3; 4]) = true.
Proof. computed. Qed.
Example half : check_obstruction (graph 4 [(1, 2); (1, 4); (2, 3); (3, 4)] [(1, 2)])
                 (Independent [1; 3]) = false.
Proof. computed. Qed.
Example joined_inside : check_obstruction pentagon (Independent [1; 2; 4]) = false.
Proof. computed. Qed.
(** Counting a vertex twice, or one that is not there. *)
Example independent_twice : check_obstruction pentagon (Independent [1; 3; 3]) = false.
Proof. computed. Qed.
Example independent_strange : check_obstruction pentagon (Independent [1; 3; 6]) = false.
Proof. computed. Qed.
