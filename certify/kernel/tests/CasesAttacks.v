(** * Attacks on the kind [cases]

    True trees are accepted, so that the refusals mean something; every other example must
    compute to [false]. *)

From Coq Require Import Bool List PArith ZArith FMapPositive.
From Certify Require Import Statement Question Obstruction Counting Forced Cases.
Import ListNotations.
Open Scope positive_scope.

Definition ask n l r := {| order := n; edges := l; needed := r |}.
Definition write l s := {| nodes := l; symmetries := s |}.

(** ** Trees that are right *)

(** The tree of FORMAT.md, section 9, for Petersen's graph (Petersen 1898). *)
Definition petersen := ask 10
  [(1, 2); (1, 5); (1, 6); (2, 3); (2, 7); (3, 4); (3, 8); (4, 5); (4, 9); (5, 10);
   (6, 8); (6, 9); (7, 9); (7, 10); (8, 10)] [].
Definition one := [1; 2; 3; 8; 6; 5; 7; 4; 10; 9].
Definition two := [1; 6; 8; 3; 2; 5; 9; 10; 4; 7].
Definition petersen_tree := [Vertex 1; Vertex 2; Forced; Forced; Like 1 0; Like 1 1].

Example petersen_accepted : check_cases petersen (write petersen_tree [one; two]) = true.
Proof. vm_compute; reflexivity. Qed.

(** The complete bipartite graph on two and three vertices, closed in each way. *)
Definition two_three := ask 5 [(1, 3); (1, 4); (1, 5); (2, 3); (2, 4); (2, 5)] [].

Example forced_accepted : check_cases two_three (write [Forced] []) = true.
Proof. vm_compute; reflexivity. Qed.

(** Herschel's graph, bipartite with parts of five and six vertices (textbook, from memory). *)
Definition herschel := ask 11
  [(1, 3); (1, 4); (1, 5); (1, 6); (2, 3); (2, 4); (2, 7); (2, 8); (3, 11); (4, 10); (5, 9);
   (5, 10); (6, 9); (6, 11); (7, 9); (7, 10); (8, 9); (8, 11)] [].
Definition parts := {|
  weights := map (fun v => (v, (-1)%Z)) [1; 2]
    ++ map (fun v => (v, 1%Z)) [3; 4; 5; 6; 7; 8]
    ++ map (fun v => (v, (-1)%Z)) [9; 10; 11];
  cuts := []; parities := []
|}.

Example obstruction_accepted :
  check_cases herschel (write [ByObstruction (Separator [1; 2; 9; 10; 11])] []) = true.
Proof. vm_compute; reflexivity. Qed.

Example counting_accepted :
  check_cases herschel (write [ByCounting parts] []) = true.
Proof. vm_compute; reflexivity. Qed.

(** Below a branch the leaves are about the state and no longer about the question. *)
Example branch_accepted : check_cases herschel
    (write [Edge 1 3; ByObstruction (Separator [1; 2; 9; 10; 11]); ByCounting parts] []) = true.
Proof. vm_compute; reflexivity. Qed.

(** ** Trees that are not trees *)

Example no_nodes : check_cases petersen (write [] [one; two]) = false.
Proof. vm_compute; reflexivity. Qed.

Example cut_short :
  check_cases petersen (write (removelast petersen_tree) [one; two]) = false.
Proof. vm_compute; reflexivity. Qed.

Example too_long :
  check_cases petersen (write (petersen_tree ++ [Forced]) [one; two]) = false.
Proof. vm_compute; reflexivity. Qed.

(** ** Hamiltonian graphs *)

Definition four := ask 4 [(1, 2); (1, 3); (1, 4); (2, 3); (2, 4); (3, 4)] [].
Definition same := [1; 2; 3; 4].

Example not_forced : check_cases four (write [Forced] []) = false.
Proof. vm_compute; reflexivity. Qed.

(** A vertex that is not there has no pairs, and so no children. *)
Example no_vertex : check_cases four (write [Vertex 5] []) = false.
Proof. vm_compute; reflexivity. Qed.

Example no_edge : check_cases four (write [Edge 4 5; Forced; Forced] []) = false.
Proof. vm_compute; reflexivity. Qed.

Example untrue_obstruction : check_cases four (write [ByObstruction (Leaf 1)] []) = false.
Proof. vm_compute; reflexivity. Qed.

Example untrue_counting : check_cases four
  (write [ByCounting {| weights := [(1, 1%Z)]; cuts := []; parities := [] |}] []) = false.
Proof. vm_compute; reflexivity. Qed.

(** Petersen's tree for Petersen's graph with one edge more, with which it has a cycle. *)
Example edge_more : check_cases
  (ask 10 ((1, 2) :: (1, 3) :: tl (edges petersen)) []) (write petersen_tree [one; two]) = false.
Proof. vm_compute; reflexivity. Qed.

(** Five vertices in a ring and a chord, which no cycle uses. *)
Definition chord := ask 5 [(1, 2); (1, 3); (1, 5); (2, 3); (3, 4); (4, 5)] [].
Definition wheel := ask 5 [(1, 2); (1, 3); (1, 4); (1, 5); (2, 4); (2, 5); (3, 4); (3, 5)] [].

(** Only edges that are neither used nor removed may be branched at: the forced moves use
    the ring and remove the chord. *)
Example used_edge : check_cases chord (write [Edge 1 2; Forced; Forced] []) = false.
Proof. vm_compute; reflexivity. Qed.

Example removed_edge : check_cases chord (write [Edge 1 3; Forced; Forced] []) = false.
Proof. vm_compute; reflexivity. Qed.

Example two_used : check_cases chord (write [Vertex 1; Forced] []) = false.
Proof. vm_compute; reflexivity. Qed.

(** A node is not closed before its own children are, *)
Example like_itself : check_cases four (write [Like 0 0] [same]) = false.
Proof. vm_compute; reflexivity. Qed.

Example like_parent :
  check_cases four (write [Edge 1 2; Like 0 0; Like 0 0] [same]) = false.
Proof. vm_compute; reflexivity. Qed.

(** nor before it is reached. *)
Example like_later :
  check_cases four (write [Edge 1 2; Like 2 0; Like 1 0] [same]) = false.
Proof. vm_compute; reflexivity. Qed.

(** In the wheel with hub 1 a cycle uses two spokes that follow each other, and not the
    opposite ones 12 and 13. The closed node must assume nothing that does not hold here. *)
Example like_other : check_cases wheel
  (write [Vertex 1; Forced; Like 1 0; Like 1 0; Like 1 0; Like 1 0; Forced] [[1; 2; 3; 4; 5]])
  = false.
Proof. vm_compute; reflexivity. Qed.

(** These permutations take the other pairs to 12 and 13, but are no automorphisms. *)
Definition swaps :=
  [[1; 2; 4; 3; 5]; [1; 2; 5; 4; 3]; [1; 4; 3; 2; 5]; [1; 5; 3; 4; 2]].
Definition wheel_tree := [Vertex 1; Forced; Like 1 0; Like 1 1; Like 1 2; Like 1 3; Forced].

(** The walk takes them, as it takes any symmetries that are given to it, and that they are
    none is all that is wrong. *)
Definition walk Q l s :=
  match tree Q (adjacency Q) (map (symmetry_of (order Q)) s) (length l) (start Q) ([], [])
          {| ahead := l; number := 1; closed := PositiveMap.empty _ |} with
  | Some _ => true
  | None => false
  end.

Example swaps_would_do : walk wheel wheel_tree swaps = true.
Proof. vm_compute; reflexivity. Qed.

Example swaps_refused : check_cases wheel (write wheel_tree swaps) = false.
Proof. vm_compute; reflexivity. Qed.

(** So with automorphisms that move the needed edge: of the two cycles on four vertices
    through the edge 12 none has the path 1, 3, 2. *)
Definition four_needed := ask 4 (edges four) [(1, 2)].
Definition turns := [[3; 1; 2; 4]; [1; 3; 2; 4]].

Example turns_would_do : walk four_needed [Vertex 3; Forced; Like 1 0; Like 1 1] turns = true.
Proof. vm_compute; reflexivity. Qed.

Example turns_refused :
  check_cases four_needed (write [Vertex 3; Forced; Like 1 0; Like 1 1] turns) = false.
Proof. vm_compute; reflexivity. Qed.

(** ** Lists that are no symmetries *)

Definition three_three := ask 6
  [(1, 4); (1, 5); (1, 6); (2, 4); (2, 5); (2, 6); (3, 4); (3, 5); (3, 6)] [].
Definition symmetry_refused l := is_symmetry three_three (adjacency three_three) l = false.

Example a_symmetry : is_symmetry three_three (adjacency three_three) [4; 6; 5; 1; 2; 3] = true.
Proof. vm_compute; reflexivity. Qed.

(** Edges to edges, but two vertices to one. *)
Example folded : symmetry_refused [1; 1; 3; 4; 5; 6].
Proof. vm_compute; reflexivity. Qed.

Example edge_to_none : symmetry_refused [1; 2; 4; 3; 5; 6].
Proof. vm_compute; reflexivity. Qed.

Example outside : symmetry_refused [1; 2; 3; 4; 5; 7].
Proof. vm_compute; reflexivity. Qed.

Example too_few : symmetry_refused [1; 2; 3; 4; 5].
Proof. vm_compute; reflexivity. Qed.

Example too_many : symmetry_refused [1; 2; 3; 4; 5; 6; 7].
Proof. vm_compute; reflexivity. Qed.

(** ** Missing moves: nodes must say what the forced moves have done *)

Example already_closed :
  check_cases two_three (write [Vertex 1; Forced; Forced; Forced] []) = false.
Proof. vm_compute; reflexivity. Qed.

Example already_closed_otherwise :
  check_cases two_three (write [ByObstruction (Separator [1; 2])] []) = false.
Proof. vm_compute; reflexivity. Qed.

(** ** Too small *)

Example two_vertices : check_cases (ask 2 [(1, 2)] []) (write [Forced] []) = false.
Proof. vm_compute; reflexivity. Qed.
