(** * Kind [sweep]: attacks

    Questions that have a cycle, orders that are none, and what the sweep must not take for
    a cycle or for a reason. *)

From Coq Require Import List Arith PArith FMapPositive.
From Certify Require Import Statement Question Sweep SweepSound.
Import ListNotations.
Open Scope positive_scope.

Definition ask (n : nat) (l needs : list (vertex * vertex)) : question :=
  {| order := n; edges := l; needed := needs |}.

(** ** Petersen's graph: no cycle (Petersen, L'Intermédiaire des Mathématiciens 5 (1898)
    225-227), but one when any vertex is removed (a textbook fact, from memory). *)

Definition petersen_edges : list (vertex * vertex) :=
  [(1,2);(1,5);(1,6);(2,3);(2,7);(3,4);(3,8);(4,5);(4,9);(5,10);(6,8);(6,9);(7,9);(7,10);(8,10)].

Definition petersen := ask 10 petersen_edges [].

Definition straight (n : nat) : list vertex := all_vertices n.

Example petersen_accepted : check_sweep petersen (straight 10) = true.
Proof. vm_compute. reflexivity. Qed.

(** The theorem itself. *)
Example petersen_refuted : refuted petersen.
Proof.
  apply check_sweep_sound with (straight 10); vm_cast_no_check (eq_refl true).
Qed.

Example petersen_backwards : check_sweep petersen (rev (straight 10)) = true.
Proof. vm_compute. reflexivity. Qed.

(** Without its vertex 10. *)
Definition petersen_less :=
  ask 9 [(1,2);(1,5);(1,6);(2,3);(2,7);(3,4);(3,8);(4,5);(4,9);(6,8);(6,9);(7,9)] [].

Example vertex_removed : check_sweep petersen_less (straight 9) = false.
Proof. vm_compute. reflexivity. Qed.

(** With an edge more, which closes a Hamiltonian path. *)
Definition petersen_more := ask 10
  [(1,2);(1,3);(1,5);(1,6);(2,3);(2,7);(3,4);(3,8);
   (4,5);(4,9);(5,10);(6,8);(6,9);(7,9);(7,10);(8,10)] [].

Example edge_added : check_sweep petersen_more (straight 10) = false.
Proof. vm_compute. reflexivity. Qed.

(** ** The example of FORMAT.md, section 9 *)

Definition two_and_three := ask 5 [(1,3);(1,4);(1,5);(2,3);(2,4);(2,5)] [].

Example format_accepted : check_sweep two_and_three [3;2;5;1;4] = true.
Proof. vm_compute. reflexivity. Qed.

Example format_counts : sweep_counts two_and_three [3;2;5;1;4] = [1;2;0;0;0]%nat.
Proof. vm_compute. reflexivity. Qed.

(** ** Graphs with a cycle, along every order *)

Definition insert_everywhere (v : vertex) (l : list vertex) : list (list vertex) :=
  map (fun k => firstn k l ++ v :: skipn k l) (seq 0 (S (length l))).

Definition orders (n : nat) : list (list vertex) :=
  fold_right (fun v ls => flat_map (insert_everywhere v) ls) [[]] (straight n).

Definition never (Q : question) : bool :=
  forallb (fun l => negb (check_sweep Q l)) (orders (order Q)).

Definition always (Q : question) : bool :=
  forallb (check_sweep Q) (orders (order Q)).

Example all_orders : length (orders 5) = 120%nat.
Proof. vm_compute. reflexivity. Qed.

Example triangle : never (ask 3 [(1,2);(1,3);(2,3)] [(1,2);(1,3);(2,3)]) = true.
Proof. vm_compute. reflexivity. Qed.

Example ring : never (ask 6 [(1,2);(1,6);(2,3);(3,4);(4,5);(5,6)] [(1,6)]) = true.
Proof. vm_compute. reflexivity. Qed.

Example complete : never (ask 5
  [(1,2);(1,3);(1,4);(1,5);(2,3);(2,4);(2,5);(3,4);(3,5);(4,5)] [(1,2);(3,4)]) = true.
Proof. vm_compute. reflexivity. Qed.

(** Every edge of one cycle is needed: the only cycle there is must be found past vertices
    that have two edges already. *)
Example complete_fixed : never (ask 5
  [(1,2);(1,3);(1,4);(1,5);(2,3);(2,4);(2,5);(3,4);(3,5);(4,5)]
  [(1,2);(1,5);(2,3);(3,4);(4,5)]) = true.
Proof. vm_compute. reflexivity. Qed.

Example prism : never (ask 6 [(1,2);(1,3);(1,4);(2,3);(2,5);(3,6);(4,5);(4,6);(5,6)] []) = true.
Proof. vm_compute. reflexivity. Qed.

(** ** What is no cycle, along every order *)

(** Two triangles: a cycle that closes early is none. *)
Example early : always (ask 6 [(1,2);(1,3);(2,3);(4,5);(4,6);(5,6)] []) = true.
Proof. vm_compute. reflexivity. Qed.

(** A square and its diagonal, which is needed: the square is a cycle through all
    vertices and misses it, also where the diagonal joins two vertices that are not swept. *)
Example needed_diagonal : always (ask 4 [(1,2);(1,3);(1,4);(2,3);(3,4)] [(1,3)]) = true.
Proof. vm_compute. reflexivity. Qed.

(** Three needed edges at a vertex; three that form a triangle. *)
Definition four := [(1,2);(1,3);(1,4);(2,3);(2,4);(3,4)].

Example needed_three : always (ask 4 four [(1,2);(1,3);(1,4)]) = true.
Proof. vm_compute. reflexivity. Qed.

Example needed_ring : always (ask 4 four [(1,2);(1,3);(2,3)]) = true.
Proof. vm_compute. reflexivity. Qed.

(** A leaf, a vertex without edges. *)
Example leaf : always (ask 4 [(1,2);(1,3);(2,3);(3,4)] []) = true.
Proof. vm_compute. reflexivity. Qed.

Example lonely : always (ask 4 [(1,2);(1,3);(2,3)] []) = true.
Proof. vm_compute. reflexivity. Qed.

(** ** Orders that are none *)

Example order_short : check_sweep petersen (straight 9) = false.
Proof. vm_compute. reflexivity. Qed.

Example order_empty : check_sweep petersen [] = false.
Proof. vm_compute. reflexivity. Qed.

Example order_long : check_sweep petersen (straight 10 ++ [1]) = false.
Proof. vm_compute. reflexivity. Qed.

(** Swept twice, a vertex would lack its edges: the triangle would be refuted. *)
Example order_doubled : check_sweep (ask 3 [(1,2);(1,3);(2,3)] [(1,2)]) [1;1;2] = false.
Proof. vm_compute. reflexivity. Qed.

(** A stranger is a vertex without edges: it would refute everything. *)
Example order_stranger : check_sweep (ask 3 [(1,2);(1,3);(2,3)] []) [1;2;4] = false.
Proof. vm_compute. reflexivity. Qed.

(** ** Two states with one key are both kept. *)

Example keys_alike : key [(2,2)] = key [(1,4)].
Proof. reflexivity. Qed.

Example both_kept :
  snd (fold_left collect [[(2,2)]; [(1,4)]; [(2,2)]; [(1,4)]] (PositiveMap.empty _, []))
  = [[(1,4)]; [(2,2)]].
Proof. reflexivity. Qed.

(** ** Below three vertices the kind is not for use. *)

Example two : check_sweep (ask 2 [(1,2)] []) [1;2] = false.
Proof. vm_compute. reflexivity. Qed.

Example none : check_sweep (ask 0 [] []) [] = false.
Proof. vm_compute. reflexivity. Qed.
