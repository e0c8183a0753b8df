(** What the normal form must not lose: each graph here has the path or cycle asked for,
    or is a case where a careless normal form would answer wrongly. *)

From Coq Require Import Bool List ZArith.
From Certify Require Import Statement Question EdgeGraph Normal Witness.
Import ListNotations.
Open Scope Z_scope.

Ltac computed := vm_compute; reflexivity.

(** The path 0 - 1 - ... - (n - 1). *)
Definition line (n : Z) : query Z :=
  edge_graph n (map (fun k => (k, k + 1)) (Rules.range 0 (n - 2))).

(** The path of one vertex exists, though its cycle through the apex does not; also when
    both ends are to be this vertex; no cycle of one vertex does. *)
Example one_vertex : normal_path (line 1) = OneVertex. Proof. computed. Qed.
Example one_vertex_ends : normal_path (demand (line 1) [0; 0] [] []) = OneVertex.
Proof. computed. Qed.
Example one_vertex_shown : check_path (demand (line 1) [0; 0] [] []) [1%positive] = true.
Proof. computed. Qed.
Example one_vertex_cycle : check_cycle (line 1) [1%positive] = false. Proof. computed. Qed.
Example two_vertices_cycle : check_cycle (line 2) [1; 2]%positive = false. Proof. computed. Qed.

(** Nothing exists on no vertices; but that is a question, not something missing. *)
Example no_vertex : normal_path (line 0) = Asks {| order := 1; edges := []; needed := [] |}.
Proof. computed. Qed.
Example no_vertex_shown : check_path (line 0) [] = false. Proof. computed. Qed.

(** An end or a required edge that is not there, that is forbidden, or from a vertex to
    itself. *)
Example missing_end : normal_path (demand (line 3) [5] [] []) = Missing. Proof. computed. Qed.
Example missing_edge : normal_path (demand (line 3) [] [(0, 2)] []) = Missing.
Proof. computed. Qed.
Example missing_forbidden : normal_path (demand (line 3) [] [(0, 1)] [(1, 0)]) = Missing.
Proof. computed. Qed.
Example missing_self : normal_path (demand (line 1) [] [(0, 0)] []) = Missing.
Proof. computed. Qed.

(** Demands that are met, in whatever order they are written, are not missing, and the
    path is a witness both ways. *)
Definition met := demand (line 3) [2; 0] [(1, 0); (2, 1); (0, 1)] [(0, 2); (7, 8)].
Example met_question : normal_path met =
  Asks {| order := 4; edges := [(1, 2); (1, 4); (2, 3); (3, 4)];
          needed := [(1, 2); (1, 4); (2, 3); (3, 4)] |}%positive.
Proof. computed. Qed.
Example met_there : check_path met [1; 2; 3]%positive = true. Proof. computed. Qed.
Example met_back : check_path met [3; 2; 1]%positive = true. Proof. computed. Qed.

(** A rule that says yes one way only: the question has the edge all the same. *)
Definition one_way : query Z :=
  {| vertices := [1; 2; 3]; adjacent := fun a b => b =? a + 1;
     ends := []; required := []; forbidden := [] |}.
Example one_way_question : normal_path one_way =
  Asks {| order := 4; edges := [(1, 2); (1, 4); (2, 3); (2, 4); (3, 4)]; needed := [] |}%positive.
Proof. computed. Qed.
Example one_way_there : check_path one_way [1; 2; 3]%positive = true. Proof. computed. Qed.
Example one_way_back : check_path one_way [3; 2; 1]%positive = false. Proof. computed. Qed.

(** A vertex listed twice is no graph: nothing is refuted. *)
Example twice : normal_path
  {| vertices := [1; 2; 1]; adjacent := fun a b => b =? a;
     ends := []; required := []; forbidden := [] |} = Unfit.
Proof. computed. Qed.

(** Witnesses that are none. *)
Definition square4 := edge_graph 4 [(0, 1); (1, 2); (2, 3); (3, 0)].
Example round : check_cycle square4 [2; 3; 4; 1]%positive = true. Proof. computed. Qed.
Example too_short : check_cycle square4 [1; 2; 3]%positive = false. Proof. computed. Qed.
Example too_long : check_cycle square4 [1; 2; 3; 4; 1]%positive = false. Proof. computed. Qed.
Example visited_twice : check_cycle square4 [1; 2; 1; 4]%positive = false. Proof. computed. Qed.
Example strange : check_cycle square4 [1; 2; 3; 5]%positive = false. Proof. computed. Qed.
Example no_edge : check_cycle square4 [1; 3; 2; 4]%positive = false. Proof. computed. Qed.
Example not_closed : check_cycle (line 4) [1; 2; 3; 4]%positive = false. Proof. computed. Qed.
Example forbidden_step :
  check_cycle (demand square4 [] [] [(0, 3)]) [1; 2; 3; 4]%positive = false.
Proof. computed. Qed.
Example unused : check_path (demand square4 [] [(3, 0)] []) [1; 2; 3; 4]%positive = false.
Proof. computed. Qed.
Example wrong_end : check_path (demand square4 [1] [] []) [1; 2; 3; 4]%positive = false.
Proof. computed. Qed.
Example one_wrong_end : check_path (demand square4 [0; 1] [] []) [1; 2; 3; 4]%positive = false.
Proof. computed. Qed.
